"""Light simplification, applied as nodes are built: constants folded, neutral elements dropped, roots undone.

Not algebra: only what keeps inlined functions and derivatives small, and what removes removable
singularities (the derivative of sqrt(u)^2 at u = 0 by the chain rule is 0/0).
"""

from __future__ import annotations

from typing import TYPE_CHECKING, TypeAlias, cast

import numpy as np

from eoscore.formula.numeric import numeric

if TYPE_CHECKING:
    from collections.abc import Callable

    from eoscore.formula.expression import Condition, Formula, Node

    Result: TypeAlias = Formula | Condition | float | bool | None

__all__ = ["CONDITIONS", "simplified"]

CONDITIONS = frozenset({"less", "less_equal", "both", "either", "truth"})


def simplified(op: str, args: tuple[Node, ...]) -> Result:
    """What `op(*args)` is, if it is something simpler: a node, a number, a truth value; else None."""
    if all(arg.op == "constant" for arg in args):
        return _folded(op, [arg.value for arg in args])
    if op in ("both", "either"):
        return _logic(op, *cast("tuple[Condition, Condition]", args))
    if op == "choose":
        condition, a, b = cast("tuple[Condition, Formula, Formula]", args)
        if condition.op == "truth":
            return a if condition.value else b
        return a if a is b else None
    if op in ("min", "max") and args[0] is args[1]:
        return cast("Formula", args[0])
    rule = _RULES.get(op)
    return rule(*cast("tuple[Formula, ...]", args)) if rule else None


def _folded(op: str, values: list[float]) -> float | bool:
    with np.errstate(all="ignore"):
        result = numeric(op)(*map(np.float64, values))
    return bool(result) if op in CONDITIONS else float(result)


def _logic(op: str, a: Condition, b: Condition) -> Condition | None:
    for one, other in ((a, b), (b, a)):
        if one.op == "truth":
            neutral = (op == "both") == bool(one.value)
            return other if neutral else one
    return a if a is b else None


def _is(node: Formula, value: float) -> bool:
    return node.op == "constant" and node.value == value


def _add(a: Formula, b: Formula) -> Result:
    if a.op == "constant":
        return b + a
    if b.op == "constant":
        if b.value == 0:
            return a
        if a.op == "add" and a.args[1].op == "constant":
            return a.operands[0] + (a.args[1].value + b.value)
        return None
    if b.op == "neg":
        return a - b.operands[0]
    if a.op == "neg":
        return b - a.operands[0]
    return b + a if a.serial > b.serial else None


def _sub(a: Formula, b: Formula) -> Result:
    if b.op == "constant":
        return a + -b.value
    if _is(a, 0):
        return -b
    if b.op == "neg":
        return a + b.operands[0]
    return 0.0 if a is b else None


def _mul(a: Formula, b: Formula) -> Result:
    if b.op == "constant":
        return b * a
    if a.op == "constant":
        return _scaled(a.value, b)
    for one, other in ((a, b), (b, a)):
        if one.op == "neg":
            return -(one.operands[0] * other)
        if one.op == "mul" and one.args[0].op == "constant":
            return one.args[0].value * (one.operands[1] * other)
    if a is b:
        return a**2
    return b * a if a.serial > b.serial else None


def _scaled(factor: float, b: Formula) -> Result:
    if factor == 0:
        return 0.0
    if factor in (1, -1):
        return b if factor == 1 else -b
    if b.op == "neg":
        return -factor * b.operands[0]
    if b.op == "mul" and b.args[0].op == "constant":
        return factor * b.args[0].value * b.operands[1]
    return None


def _div(a: Formula, b: Formula) -> Result:
    if _is(a, 0):
        return 0.0
    if b.op == "constant" and b.value in (1, -1):
        return a if b.value == 1 else -a
    if a.op == "neg":
        return -(a.operands[0] / b)
    return -(a / b.operands[0]) if b.op == "neg" else None


def _pow(a: Formula, b: Formula) -> Result:
    if b.op != "constant":
        return None
    if b.value in (0, 1):
        return a if b.value == 1 else 1.0
    if b.value == 0.5:
        return a.apply("sqrt")
    even = (b.value / 2).is_integer()
    if even and a.op in ("neg", "abs"):
        return a.operands[0] ** b
    if a.op == "sqrt" and b.value.is_integer():
        return a.operands[0] ** (b.value / 2)
    if a.op == "pow" and a.args[1].op == "constant" and _merges(a.args[1].value, b.value):
        return a.operands[0] ** (a.args[1].value * b.value)
    return None


def _merges(inner: float, outer: float) -> bool:
    """Whether (x^inner)^outer is x^(inner outer) wherever the left side is defined."""
    return outer.is_integer() and (inner.is_integer() or (inner * outer).is_integer() or not (outer % 2))


def _sqrt(a: Formula) -> Result:
    if a.op == "pow" and _is(a.operands[1], 2):
        return a.operands[0].apply("abs")
    return None


_RULES: dict[str, Callable[..., Result]] = {
    "add": _add,
    "sub": _sub,
    "mul": _mul,
    "div": _div,
    "pow": _pow,
    "sqrt": _sqrt,
    "neg": lambda a: a.operands[0] if a.op == "neg" else None,
    "abs": lambda a: a if a.op in ("abs", "sqrt") else None,
    "less": lambda a, b: False if a is b else None,
    "less_equal": lambda a, b: True if a is b else None,
}
