"""Shares of space for several wells, smooth and with sum 1, so that each well is integrated about its own bottom."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np
from scipy.special import erfc

if TYPE_CHECKING:
    from eoscore.measure.base import FloatArray

__all__ = ["Partition"]

STEEP = 16.0  # over the distance of two bottoms: a share falls from 1 - 1e-16 to 1e-16 over its middle 3/4


class Partition:
    """Shares of the bottoms (n, d), each axis measured in units of `unit` (d,).

    Between two bottoms the share falls as erfc of the place along the line that joins them, from the middle.
    """

    def __init__(self, bottoms: FloatArray, unit: FloatArray) -> None:
        self._unit = unit
        self._bottoms = bottoms / unit

    def share(self, own: int, x: FloatArray) -> FloatArray:
        """The share of bottom `own` at points (d, ...)."""
        if len(self._bottoms) == 2:  # erfc(-u) = 2 - erfc(u)
            return self._weight(own, x)
        total = np.zeros(x.shape[1:])
        mine = total
        for k in range(len(self._bottoms)):
            weight = self._weight(k, x)
            total = total + weight
            mine = weight if k == own else mine
        with np.errstate(invalid="ignore", divide="ignore"):
            return np.where(total > 0, mine / total, 0.0)

    def _weight(self, k: int, x: FloatArray) -> FloatArray:
        weight = np.ones(x.shape[1:])
        for j, other in enumerate(self._bottoms):
            if j != k:
                way = other - self._bottoms[k]
                middle = float(way @ (other + self._bottoms[k])) / 2
                rate = STEEP / (way @ way)
                along = sum(
                    float(part) * column for part, column in zip(way / self._unit, x, strict=True) if part
                )
                weight = weight * (erfc(rate * (along - middle)) / 2)
        return weight
