"""Which points lie in the region of a trap: those from which a path below the escape energy leads to its wells."""

from __future__ import annotations

from math import inf
from typing import TYPE_CHECKING

import numpy as np

from eoscore.measure.landscape_chart import Chart
from eoscore.measure.landscape_descent import descend

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from eoscore.measure.base import FloatArray
    from eoscore.place.trap import TrapPlace

__all__ = ["joined"]

SAMPLES = 200  # of V along a straight path
BLOCK = 2000  # points tried at once
SAME = 1e-9  # of V, by which a point may lie below the bottom and still be of its region


def joined(trap: TrapPlace, points: FloatArray, height: FloatArray) -> NDArray[np.bool_]:
    """Whether points, shape (n, coordinates) in m, of a height in J above the bottom are of the trap's region.

    A straight path from one of the wells on which V stays below its value at the end tells at once, else the way
    downhill does: it ends in a well, or it goes below the bottom.
    """
    reach = SAME * (abs(trap.v_min) + (trap.top if trap.top < inf else 0.0))
    inside = (height < trap.top) & (height >= -reach)
    if trap.landscape.depth == inf:
        return inside
    chart = Chart(trap.field)
    for some in np.array_split(np.flatnonzero(inside), int(np.count_nonzero(inside)) // BLOCK + 1):
        near = np.zeros(some.size, dtype=bool)
        for well in trap.landscape.minima:
            level = np.maximum(trap.v_min + height[some], well.value) + reach
            near |= _straight(chart, np.array(well.position), points[some], level)
        far = some[~near]
        if far.size:
            away = np.linalg.norm(points[far] - np.array(trap.r_min), axis=1)
            chart.reach = 1e3 * float(away.max())
            inside[far] = descend(chart, points[far], 0.02 * away)[1] >= trap.v_min - reach
    return inside


def _straight(chart: Chart, start: FloatArray, ends: FloatArray, level: FloatArray) -> NDArray[np.bool_]:
    share = (np.arange(SAMPLES) + 0.5)[:, None, None] / SAMPLES
    return np.asarray(np.max(chart.value(start + share * (ends - start)), axis=0, initial=-inf) <= level)
