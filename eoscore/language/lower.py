"""Nodes to formulas: names become their values, functions are inlined, all in SI.

Equal formulas are one object, and every name and every call at equal arguments is lowered once, so that functions
that call functions do not blow up. The text was checked before; here every name is known and fits.
"""

from __future__ import annotations

import math
import operator
from typing import TYPE_CHECKING, NamedTuple, TypeAlias

from eoscore import formula
from eoscore.errors import Complaint, NoAnswerError, TarnError
from eoscore.language import nodes
from eoscore.language.rules import short
from eoscore.language.scope import read_in
from eoscore.language.value import si_value
from eoscore.language.walk import Step, every, run

if TYPE_CHECKING:
    from collections.abc import Callable, Mapping, Sequence

    from eoscore.formula import Condition, Formula
    from eoscore.language.scope import Named, Scope

    CallKey: TypeAlias = tuple[Named, tuple[Formula, ...]]

__all__ = ["Lowering", "conjuncts"]

_MOST_STEPS = 100_000


class _Frame(NamedTuple):
    """Where an expression is read: its scope and the arguments of the function around it."""

    scope: Scope
    arguments: Mapping[str, Formula]


_OPERATORS: dict[str, Callable[[Formula, Formula], Formula]] = {
    "+": operator.add,
    "-": operator.sub,
    "*": operator.mul,
    "/": operator.truediv,
    "^": operator.pow,
}


def conjuncts(conditions: Sequence[nodes.Condition]) -> list[nodes.Condition]:
    """The conditions with every `and` at the top taken apart: each is a wall of its own."""
    parts, waiting = [], list(reversed(conditions))
    while waiting:
        each = waiting.pop()
        if isinstance(each, nodes.Logic) and each.operator == "and":
            waiting.extend(reversed(each.operands))
        else:
            parts.append(each)
    return parts


class Lowering:
    """Lowers expressions with some names and some literals at other values than written.

    `values` are SI values of names, `literals` SI values of number nodes by their identity. Raises TarnError where
    an expression expands into more steps than can be worked through, NoAnswerError where the values given make a
    part of a field infinite.
    """

    def __init__(self, values: Mapping[Named, float], literals: Mapping[int, float]) -> None:
        self._values, self.literals = values, literals
        self._names: dict[Named, Formula] = {}
        self._calls: dict[CallKey, Formula] = {}
        self._steps = 0
        self._in_field = False

    def sets(self, named: Named) -> bool:
        """Whether a name has a value given from outside."""
        return named in self._values

    def value(self, named: Named) -> float:
        """The SI value of a name."""
        return float(run(self._name(named)).value)

    def expression(self, expr: nodes.Expr, scope: Scope) -> float:
        """The SI value of an expression without coordinates."""
        return float(run(self._expression(expr, _Frame(scope, {}))).value)

    def function(self, named: Named, arguments: Sequence[str]) -> tuple[Formula, tuple[Formula, ...]]:
        """A function as a formula of variables of the given names, and the margins of its walls."""
        definition, home = read_in(named)
        parameters = [parameter.name for parameter in definition.parameters or ()]
        variables = {name: formula.variable(to) for name, to in zip(parameters, arguments, strict=True)}
        frame = _Frame(home, variables)
        self._in_field = True
        walls = [formula.margin(run(self._condition(each, frame))) for each in conjuncts(definition.where)]
        body = run(self._expression(definition.value, frame))
        self._in_field = False
        return body, tuple(walls)

    def _expression(self, node: nodes.Expr, frame: _Frame) -> Step[Formula]:
        self._count(node)
        match node:
            case nodes.Number():
                given = self.literals.get(id(node)) if node.sigma else None
                return formula.constant(si_value(node) if given is None else given)
            case nodes.Name():
                if node.name in frame.arguments:
                    return frame.arguments[node.name]
                return self._sound((yield from self._name(frame.scope.get(node.name))), node)
            case nodes.Negative():
                operand: Formula = yield self._expression(node.operand, frame)
                return -operand
            case nodes.Binary():
                left = yield self._expression(node.left, frame)
                right = yield self._expression(node.right, frame)
                if node.operator == "/" and right.op == "constant" and right.value == 0:
                    self._sound(formula.constant(math.inf), node)
                return self._sound(_OPERATORS[node.operator](left, right), node)
            case nodes.If():
                holds: Condition = yield self._condition(node.condition, frame)
                if holds.op == "truth":
                    return (yield from self._expression(node.then if holds.value else node.otherwise, frame))
                then = yield self._expression(node.then, frame)
                return formula.choose(holds, then, (yield self._expression(node.otherwise, frame)))
            case nodes.Call():
                arguments = yield from every(self._expression(each, frame) for each in node.arguments)
                return self._sound((yield from self._call(node.function.name, arguments, frame.scope)), node)

    def _condition(self, node: nodes.Condition, frame: _Frame) -> Step[Condition]:
        if isinstance(node, nodes.Compare):
            left = yield self._expression(node.left, frame)
            right = yield self._expression(node.right, frame)
            low, high = (left, right) if node.operator.startswith("<") else (right, left)
            return formula.less(low, high, strict=len(node.operator) == 1)
        parts = yield from every(self._condition(operand, frame) for operand in node.operands)
        if node.operator == "not":
            return formula.negate(parts[0])
        whole = parts[0]
        for part in parts[1:]:
            whole = (formula.both if node.operator == "and" else formula.either)(whole, part)
        return whole

    def _sound(self, result: Formula, node: nodes.Expr) -> Formula:
        """The result itself; within a field a constant that is no number is the end, in words."""
        if self._in_field and result.op == "constant" and not math.isfinite(result.value):
            why = f"`{short(node.span)}` in line {node.span.line} has no finite value with the values given"
            raise NoAnswerError(why)
        return result

    def _count(self, node: nodes.Expr) -> None:
        self._steps += 1
        if self._steps > _MOST_STEPS:
            message = (
                f"`{short(node.span)}` stands in functions that expand into more than {_MOST_STEPS:,} steps"
            )
            raise TarnError([Complaint.at(node.span, message, "nest fewer functions")])

    def _name(self, named: Named) -> Step[Formula]:
        if named not in self._names:
            given = self._values.get(named, named.given.value if named.given else None)
            if given is not None:
                self._names[named] = formula.constant(given)
            else:
                definition, home = read_in(named)
                self._names[named] = yield self._expression(definition.value, _Frame(home, {}))
        return self._names[named]

    def _call(self, name: str, arguments: list[Formula], scope: Scope) -> Step[Formula]:
        named = scope.find(name)
        if named is None or not named.is_function:
            return formula.call(name, *arguments)
        key = (named, tuple(arguments))
        if key not in self._calls:
            definition, home = read_in(named)
            parameters = [parameter.name for parameter in definition.parameters or ()]
            frame = _Frame(home, dict(zip(parameters, arguments, strict=True)))
            self._calls[key] = yield self._expression(definition.value, frame)
        return self._calls[key]
