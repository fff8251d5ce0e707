"""Roots of rising functions, many at once: Newton's method kept inside a bracket."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

if TYPE_CHECKING:
    from collections.abc import Callable

    from numpy.typing import NDArray

    from eoscore.state.reading import FloatArray

__all__ = ["rising_root"]

ROUNDS = 200
CLOSE = 1e-10  # a Newton step this short (the unknowns are logarithms) leaves an error of its square
TIGHT = 4e-16


def rising_root(
    function: Callable[[FloatArray, NDArray[np.intp]], tuple[FloatArray, FloatArray]],
    low: FloatArray,
    high: FloatArray,
    start: FloatArray,
    ends: tuple[FloatArray, FloatArray] | None = None,
) -> FloatArray:
    """x with function(x) = 0 for every point, given low <= x <= high, all of one axis.

    function(x, which) is asked for some points only, named by their index, and gives values that rise with x and
    their derivatives; `ends` are its values at low and high, where they are known. A Newton step that leaves the
    bracket, or falls short of halving the one before it, is replaced by false position and bisection in turn, so
    that each root is found whatever the derivative; nan derivatives are as good as none. Where the function has
    one sign only, the end it points to is returned.
    """
    low, high = low.astype(float), high.astype(float)
    unknown = np.full(low.shape, np.nan)
    below, above = (each.astype(float) for each in ends or (unknown, unknown))
    x = np.clip(start, low, high)
    before = high - low
    bisect = np.zeros(low.shape, dtype=bool)
    which = np.flatnonzero(np.isfinite(x))
    for _ in range(ROUNDS):
        if not which.size:
            break
        here = x[which]
        value, slope = function(here, which)
        under, over = which[value < 0], which[value > 0]
        low[under], below[under] = x[under], value[value < 0]
        high[over], above[over] = x[over], value[value > 0]
        with np.errstate(all="ignore"):
            step = -value / slope
            chord = low[which] - below[which] * (high[which] - low[which]) / (above[which] - below[which])
        new = here + step
        newton = (new >= low[which]) & (new <= high[which]) & (2 * np.abs(step) <= before[which])
        false_position = ~newton & ~bisect[which] & (chord > low[which]) & (chord < high[which])
        new = np.where(newton, new, np.where(false_position, chord, (low[which] + high[which]) / 2))
        bisect[which] = false_position
        moved = np.abs(new - here)
        scale = np.maximum(np.abs(new), 1.0)
        narrow = high[which] - low[which] <= TIGHT * scale
        done = (value == 0) | (newton & (moved <= CLOSE * scale)) | narrow
        x[which] = np.where(value == 0, here, new)
        before[which] = moved
        which = which[~done]
    return x
