"""Bounds of a formula over boxes: the natural interval extension, for arrays of boxes at once.

Each operation is bounded from the bounds of its arguments and widened by a few units in the last place. The
result always holds the true range; it is as tight as the formula repeats its variables seldom. Where a
function is defined on part of a box only, that part is bounded; a box wholly outside gives nan.
"""

from __future__ import annotations

from typing import TYPE_CHECKING, cast

import numpy as np

from eoscore.formula.monotone import BOUNDS
from eoscore.formula.tape import ordered

if TYPE_CHECKING:
    from collections.abc import Mapping

    from numpy.typing import ArrayLike, NDArray

    from eoscore.formula.expression import Formula, Node

    Bounds = tuple[NDArray[np.float64], NDArray[np.float64]]

__all__ = ["bounds"]

WIDENED = 4 * np.finfo(float).eps


def bounds(
    f: Formula, boxes: Mapping[str, tuple[ArrayLike, ArrayLike]]
) -> tuple[NDArray[np.float64], NDArray[np.float64]]:
    """Lower and upper bounds of f where each variable lies between its two values.

    The ends may be arrays of one shape, a box each. Raises ValueError if a variable has no ends.
    """
    missing = sorted(f.variables - set(boxes))
    if missing:
        message = f"bounds need the ends of {', '.join(missing)}"
        raise ValueError(message)
    ends = {name: (np.asarray(low, float), np.asarray(high, float)) for name, (low, high) in boxes.items()}
    shape = np.broadcast_shapes(*(end.shape for pair in ends.values() for end in pair))
    known: dict[int, Bounds] = {}
    with np.errstate(all="ignore"):
        for node in ordered([f]):
            known[node.serial] = _bounded(node, [known[arg.serial] for arg in node.args], ends)
    low, high = known[f.serial]
    return np.full(shape, low), np.full(shape, high)


def _bounded(node: Node, args: list[Bounds], ends: Mapping[str, Bounds]) -> Bounds:
    if node.op in ("constant", "truth"):
        value = np.asarray(node.value)
        return value, value
    if node.op == "variable":
        return ends[node.name]
    if node.op == "pow" and node.args[1].op == "constant":
        return _widened(*_power(*args[0], cast("Formula", node.args[1]).value))
    low, high = BOUNDS[node.op](*args)
    if node.op in ("less", "less_equal", "both", "either", "choose", "min", "max", "neg", "abs", "sign"):
        return low, high
    return _widened(low, high)


def _widened(low: NDArray[np.float64], high: NDArray[np.float64]) -> Bounds:
    tiny = np.finfo(float).tiny
    wider = low - (WIDENED * np.abs(low) + tiny), high + (WIDENED * np.abs(high) + tiny)
    return np.where(np.isinf(low), low, wider[0]), np.where(np.isinf(high), high, wider[1])


def _power(low: NDArray[np.float64], high: NDArray[np.float64], exponent: float) -> Bounds:
    """Bounds of x**exponent; a base below zero counts only for whole exponents."""
    if not exponent.is_integer():
        low = np.where(high < 0, np.nan, np.maximum(low, 0.0))
    one, other = low**exponent, high**exponent
    least, most = np.minimum(one, other), np.maximum(one, other)
    inside = (low < 0) & (high > 0)
    if exponent > 0:
        return np.where(inside & (exponent % 2 == 0), 0.0, least), most
    touches = (low <= 0) & (high >= 0)
    if exponent.is_integer() and exponent % 2:
        least = np.where(touches & (low < 0), -np.inf, least)
    return least, np.where(touches & (high > 0) | touches & (exponent % 2 == 0), np.inf, most)
