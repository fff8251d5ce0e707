"""The argument of a Bose or Fermi function from its value, by Newton's method kept within a bracket.

Bose: for the logarithm of the value as a function of ln alpha, which is nearly straight for s < 1 and alpha -> 0, from
the leading term of Robinson's expansion or the exponential. Fermi: for the logarithm as a function of eta, concave, so
that a start below the root, ln f, only climbs. Both are exact up to the rounding of the function itself; alpha near 0
for s > 1 then has the digits that zeta(s) - g leaves.
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

import numpy as np

from eoscore.gas.bose_function import bose
from eoscore.gas.fermi_function import fermi

if TYPE_CHECKING:
    from collections.abc import Callable

    from numpy.typing import ArrayLike

    from eoscore.gas.blocks import Block

__all__ = ["alpha_from_bose", "eta_from_fermi"]

_STEPS = 100


def alpha_from_bose(s: float, g: ArrayLike) -> Block:
    """The alpha >= 0 with Li_s(e^-alpha) = g, elementwise, for s in [-5, 30].

    inf at g = 0, 0 at g = zeta(s) (s > 1) or inf (s <= 1); nan where there is none: g < 0, and g > zeta(s) for s > 1.
    ValueError for an order out of range.
    """
    _check(s, -5.0)
    value = np.asarray(g, dtype=np.float64)
    top = bose(s, 0.0)
    result = np.where(value == top, 0.0, np.where(value == 0, np.inf, np.full(value.shape, np.nan)))
    inside = (value > 0) & (value < top)
    if inside.any():
        target = value[inside]

        def step(tau: Block) -> tuple[Block, Block]:
            alpha = np.exp(tau)
            found = bose(s, alpha)
            return _gap(found, target), -alpha * bose(s - 1, alpha) / found

        with np.errstate(all="ignore"):
            start = np.log(_alpha_guess(s, target, top))
            result[inside] = np.exp(_root(step, start, -744.0, 6.62))
            result[inside] = _polished_alpha(s, result[inside], target)
    return result[()]


def eta_from_fermi(s: float, f: ArrayLike) -> Block:
    """The eta with -Li_s(-e^eta) = f, elementwise, for s in [0, 30].

    -inf at f = 0, inf at f = inf (f = 1 for s = 0); nan where there is none. ValueError for an order out of range.
    """
    _check(s, 0.0)
    value = np.asarray(f, dtype=np.float64)
    top = 1.0 if s == 0 else np.inf
    result = np.where(value == top, np.inf, np.where(value == 0, -np.inf, np.full(value.shape, np.nan)))
    inside = (value > 0) & (value < top)
    if inside.any():
        target = value[inside]

        def step(eta: Block) -> tuple[Block, Block]:
            found = fermi(s, eta)
            return -_gap(found, target), -fermi(s - 1, eta) / found

        with np.errstate(all="ignore"):
            far = np.exp((np.log(target) + math.lgamma(s + 1)) / s) if s > 0 else np.zeros(target.size)
            start = np.log(target)
            deep = far > 2 * s + 5
            start = np.where(deep, far, start)
            high = np.where(deep, 4 * far + 100, 1e3)
            result[inside] = _root(step, start, -800.0, high)
    return result[()]


def _check(s: float, low: float) -> None:
    if not low <= s <= 30.0:
        raise ValueError(f"the order is {s!r}; expected a number from {low:g} to 30; give such an order")


def _gap(found: Block, target: Block) -> Block:
    """ln(found / target), without the loss of the digits of their difference where they are close."""
    return np.where(np.isfinite(found), np.log1p((found - target) / target), np.inf)


def _alpha_guess(s: float, g: Block, top: float) -> Block:
    """From the leading behaviour at either end."""
    far = np.log1p(g * 2.0**-s) - np.log(g)
    if s < 0.95:
        near = (math.gamma(1 - s) / g) ** (1 / (1 - s))
        return np.where(g > 1.0, near, np.maximum(far, 1e-3))
    if s <= 1.05:
        return np.where(g > 1.0, np.exp(-g), far)
    lack = (top - g) / top
    if s < 1.95:
        near = (lack * top / -math.gamma(1 - s)) ** (1 / (s - 1))
    elif s < 2.05:
        near = lack * top / (1 - np.log(lack))
    else:
        near = lack * top / bose(s - 1, 0.0)
    return np.where(lack < 0.5, np.maximum(near, 5e-324), far)


def _root(
    step: Callable[[Block], tuple[Block, Block]], start: Block, low: float | Block, high: float | Block
) -> Block:
    """The root of a falling function; `step` gives it and its slope."""
    x = np.clip(start, low, high)
    low, high = np.broadcast_to(low, x.shape).copy(), np.broadcast_to(high, x.shape).copy()
    for _ in range(_STEPS):
        gap, slope = step(x)
        low, high = np.where(gap > 0, x, low), np.where(gap < 0, x, high)
        following = x - gap / slope
        following = np.where((following >= low) & (following <= high), following, (low + high) / 2)
        moved = np.abs(following - x)
        x = np.where(gap == 0, x, following)
        if (moved <= 4e-16 * np.maximum(np.abs(x), 1e-2)).all() or (gap == 0).all():
            break
    return x


def _polished_alpha(s: float, alpha: Block, target: Block) -> Block:
    """One more step in alpha itself, whose last bits a large ln alpha does not hold."""
    found = bose(s, alpha)
    better = alpha + (found - target) / bose(s - 1, alpha)
    return np.where((better > 0) & np.isfinite(better), better, alpha)
