"""Nodes to SymPy by a walk of its own: no formula, no text and no `sympify` on the way.

Literals are exact: `55 um` is 55/10^6, `1.5` is 3/2. A literal that stands for a given value keeps its digits.
"""

from __future__ import annotations

from typing import TYPE_CHECKING, Any, NamedTuple

import sympy as sp

from eoscore.language import nodes
from eoscore.language.scope import read_in
from eoscore.language.units import known_unit
from eoscore.language.walk import Step, every, run

if TYPE_CHECKING:
    from collections.abc import Callable, Mapping

    from eoscore.language.scope import Named, Scope

__all__ = ["SympyWalk", "exact"]

_FUNCTIONS: dict[str, Callable[..., Any]] = {
    "sqrt": sp.sqrt, "exp": sp.exp, "ln": sp.log, "log10": lambda x: sp.log(x) / sp.log(10), "sin": sp.sin,
    "cos": sp.cos, "tan": sp.tan, "asin": sp.asin, "acos": sp.acos, "atan": sp.atan, "atan2": sp.atan2,
    "sinh": sp.sinh, "cosh": sp.cosh, "tanh": sp.tanh, "abs": sp.Abs, "sign": sp.sign, "min": sp.Min,
    "max": sp.Max, "erf": sp.erf, "ellipk": sp.elliptic_k, "ellipe": sp.elliptic_e, "besselj": sp.besselj,
}  # fmt: skip
_ORDERS: dict[str, Callable[..., Any]] = {"<": sp.Lt, "<=": sp.Le, ">": sp.Gt, ">=": sp.Ge}
_LARGEST_POWER = 200  # beyond it an exact power of numbers would fill pages


class _Frame(NamedTuple):
    """Where an expression is read: its scope and the arguments of the function around it."""

    scope: Scope
    arguments: Mapping[str, Any]


def exact(value: float) -> Any:
    """A double as the rational of its shortest digits; an infinity or nan as SymPy has it."""
    return sp.Rational(repr(value)) if abs(value) < float("inf") else sp.Float(value)


class SympyWalk:
    """Turns expressions into SymPy; `atom` says which names stay symbols, None sends the walk into a definition.

    `literals` are SI values of number nodes by their identity.
    """

    def __init__(self, atom: Callable[[Named], Any], literals: Mapping[int, float]) -> None:
        self._atom, self._literals = atom, literals
        self._names: dict[Named, Any] = {}
        self._calls: dict[tuple[Named, tuple[Any, ...]], Any] = {}

    def expression(self, expr: nodes.Expr, scope: Scope, arguments: Mapping[str, Any]) -> Any:
        """An expression in a scope, the names in `arguments` standing for SymPy expressions."""
        return run(self._expression(expr, _Frame(scope, arguments)))

    def name(self, named: Named) -> Any:
        """The expression behind a name."""
        return run(self._name(named))

    def margin(self, condition: nodes.Condition, scope: Scope, arguments: Mapping[str, Any]) -> Any:
        """An expression that is positive where the condition holds."""
        return run(self._margin(condition, _Frame(scope, arguments)))

    def _expression(self, node: nodes.Expr, frame: _Frame) -> Step[Any]:
        match node:
            case nodes.Number():
                given = self._literals.get(id(node)) if node.sigma else None
                return _literal(node) if given is None else exact(given)
            case nodes.Name():
                if node.name in frame.arguments:
                    return frame.arguments[node.name]
                return (yield from self._name(frame.scope.get(node.name)))
            case nodes.Negative():
                return -(yield self._expression(node.operand, frame))
            case nodes.Binary():
                left = yield self._expression(node.left, frame)
                return _joined(node.operator, left, (yield self._expression(node.right, frame)))
            case nodes.If():
                holds = yield self._condition(node.condition, frame)
                then = yield self._expression(node.then, frame)
                return sp.Piecewise((then, holds), ((yield self._expression(node.otherwise, frame)), True))
            case nodes.Call():
                arguments = yield from every(self._expression(each, frame) for each in node.arguments)
                return (yield from self._call(node.function.name, arguments, frame.scope))

    def _name(self, named: Named) -> Step[Any]:
        if named not in self._names:
            found = self._atom(named)
            if found is None:
                definition, home = read_in(named)
                found = yield self._expression(definition.value, _Frame(home, {}))
            self._names[named] = found
        return self._names[named]

    def _call(self, name: str, arguments: list[Any], scope: Scope) -> Step[Any]:
        named = scope.find(name)
        if named is None or not named.is_function:
            return _FUNCTIONS[name](*arguments)
        key = (named, tuple(arguments))
        if key not in self._calls:
            definition, home = read_in(named)
            parameters = [parameter.name for parameter in definition.parameters or ()]
            frame = _Frame(home, dict(zip(parameters, arguments, strict=True)))
            self._calls[key] = yield self._expression(definition.value, frame)
        return self._calls[key]

    def _condition(self, node: nodes.Condition, frame: _Frame) -> Step[Any]:
        if isinstance(node, nodes.Compare):
            left = yield self._expression(node.left, frame)
            return _ORDERS[node.operator](left, (yield self._expression(node.right, frame)))
        parts = yield from every(self._condition(each, frame) for each in node.operands)
        return {"and": sp.And, "or": sp.Or, "not": sp.Not}[node.operator](*parts)

    def _margin(self, node: nodes.Condition, frame: _Frame) -> Step[Any]:
        if isinstance(node, nodes.Compare):
            left = yield self._expression(node.left, frame)
            right = yield self._expression(node.right, frame)
            return right - left if node.operator.startswith("<") else left - right
        parts = yield from every(self._margin(each, frame) for each in node.operands)
        if node.operator == "not":
            return -parts[0]
        return (sp.Min if node.operator == "and" else sp.Max)(*parts)


def _literal(node: nodes.Number) -> Any:
    value = sp.Rational(node.text) if node.value else sp.Integer(0)  # not the millions of digits of 0e999999
    for symbol, exponent in node.unit.factors if node.unit else ():
        value *= _factor(symbol) ** exponent
    return value


def _factor(symbol: str) -> Any:
    known = known_unit(symbol)
    if symbol == "deg" or known is None:
        return sp.pi / 180
    factor = known[0]
    return exact(factor) if isinstance(factor, float) else sp.Rational(factor.numerator, factor.denominator)


def _joined(operator: str, left: Any, right: Any) -> Any:
    match operator:
        case "+":
            return left + right
        case "-":
            return left - right
        case "*":
            return left * right
        case "/":
            return left / right
    if left.is_Rational and right.is_Rational and abs(right) > _LARGEST_POWER:
        return exact(float(left) ** float(right))
    return left**right
