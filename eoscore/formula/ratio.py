"""Whether one formula is a number times another, shown by their structure."""

from __future__ import annotations

from math import isclose, sqrt
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from eoscore.formula.expression import Formula, Node

__all__ = ["ratio"]

_SAME = 64 * 2.0**-52  # two terms scale alike when their factors agree to the rounding of folded constants
_DEEPEST = 300  # levels that are walked


def ratio(f: Formula, g: Formula) -> float | None:
    """The number c with f = c g at every point; None where there is none, or where the structure does not show it.

    Sums need one c for all their terms, products and powers multiply theirs; arguments of functions must be the
    same. No values are tried.
    """
    return _ratio(f, g, _DEEPEST)


def _ratio(f: Node, g: Node, depth: int) -> float | None:
    (c, f), (d, g) = _stripped(f), _stripped(g)
    if f is g:
        return None if d == 0.0 else c / d
    inner = _of_like(f, g, depth - 1) if f.op == g.op and depth > 0 else None
    return None if inner is None or d == 0.0 or c == 0.0 else c / d * inner


def _stripped(f: Node) -> tuple[float, Node]:
    """The constant factor in front, and the rest; a constant alone is left as its own rest."""
    factor = 1.0
    while True:
        if f.op == "neg":
            factor, f = -factor, f.args[0]
        elif f.op == "mul" and f.args[0].op == "constant":
            factor, f = factor * f.args[0].value, f.args[1]
        else:
            return factor, f


def _of_like(f: Node, g: Node, depth: int) -> float | None:
    """The ratio of two nodes of one operation."""
    if f.op == "constant":
        return f.value / g.value if f.value and g.value else None
    if f.op in ("add", "sub", "min", "max", "choose"):
        return _of_terms(f, g, depth)
    if f.op in ("mul", "div"):
        return _of_factors(f, g, depth)
    if f.op == "pow" and f.args[1] is g.args[1] and f.args[1].op == "constant":
        base, power = _ratio(f.args[0], g.args[0], depth), f.args[1].value
        return None if base is None or (base < 0.0 and not power.is_integer()) else float(base**power)
    if f.op in ("sqrt", "abs"):
        inner = _ratio(f.args[0], g.args[0], depth)
        if inner is None or (inner < 0.0 and f.op == "sqrt"):
            return None
        return sqrt(inner) if f.op == "sqrt" else abs(inner)
    return None


def _of_terms(f: Node, g: Node, depth: int) -> float | None:
    """One ratio for both terms; a choice by the same condition, and an extreme, which wants it positive."""
    skip = f.op == "choose"
    if skip and f.args[0] is not g.args[0]:
        return None
    for order in (1, -1) if f.op in ("add", "min", "max") else (1,):
        pairs = zip(f.args[skip:], g.args[skip:][::order], strict=True)
        ratios = [_ratio(a, b, depth) for a, b in pairs]
        first, second = ratios
        if first is not None and second is not None and isclose(first, second, rel_tol=_SAME):
            return first if first > 0.0 or f.op not in ("min", "max") else None
    return None


def _of_factors(f: Node, g: Node, depth: int) -> float | None:
    for order in (1, -1) if f.op == "mul" else (1,):
        first, second = (_ratio(a, b, depth) for a, b in zip(f.args, g.args[::order], strict=True))
        if first is not None and second is not None:
            return first * second if f.op == "mul" else first / second
    return None
