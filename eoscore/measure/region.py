"""The region that joins the wells of a potential below a ceiling, as seen on a grid."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.measure.landscape_chart import Chart
from eoscore.measure.mesh import held_grid

if TYPE_CHECKING:
    from collections.abc import Sequence

    from numpy.typing import NDArray

    from eoscore.formula.field import Field
    from eoscore.measure.base import FloatArray
    from eoscore.measure.landscape_record import Minimum

__all__ = ["Region"]

GRID = {2: 120, 3: 34}  # points along each axis


class Region:
    """Points of a grid that reaches a little beyond the region below a ceiling (J from the first minimum)."""

    def __init__(self, field: Field, minima: Sequence[Minimum], ceiling: float) -> None:
        self.chart = Chart(field)
        self.ceiling = minima[0].value + ceiling
        self.lines, self.held = held_grid(field, minima, ceiling, GRID[len(field.coordinates)])
        self.size = np.array([line[-1] - line[0] for line in self.lines])

    def holds(self, points: FloatArray) -> NDArray[np.bool_]:
        """Whether points (n, d) below the ceiling belong to the region: whether a grid point beside them does."""
        below = [
            np.clip(np.searchsorted(line, points[:, i]) - 1, 0, line.size - 2)
            for i, line in enumerate(self.lines)
        ]
        beside = [
            self.held[tuple(b + s for b, s in zip(below, shift, strict=True))]
            for shift in np.ndindex(*(2,) * self.held.ndim)
        ]
        return np.asarray(np.any(beside, axis=0))

    def points(self, *, beyond: bool) -> FloatArray:
        """The held points of the grid (n, d), and, if wanted, their neighbours."""
        from scipy import ndimage

        held = (
            ndimage.binary_dilation(self.held, np.ones((3,) * self.held.ndim, dtype=bool))
            if beyond
            else self.held
        )
        index = np.argwhere(held)
        return np.stack([line[index[:, i]] for i, line in enumerate(self.lines)], axis=1)
