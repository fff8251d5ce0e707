"""The series of a sampled measure, side by side in arrays, so that many energies are looked up at once."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING

import numpy as np
from numpy.polynomial.chebyshev import chebder

from eoscore.measure.panel import POWER, Panel

if TYPE_CHECKING:
    from eoscore.measure.base import FloatArray

__all__ = ["Table"]

CODE = {"log": 0, "left": 1, "right": 2}


@dataclass(frozen=True)
class Table:
    """Panels in ascending order, without gaps, and the coefficients of a function on each (panel, order)."""

    panels: tuple[Panel, ...]
    series: FloatArray

    @cached_property
    def firsts(self) -> FloatArray:
        """Least energies of the panels."""
        return np.array([p.first for p in self.panels])

    @cached_property
    def _shape(self) -> tuple[FloatArray, ...]:
        """lo, hi, kind, start, stop of the panels, each an array."""
        rows = [(p.lo, p.hi, CODE[p.kind], p.start, p.stop) for p in self.panels]
        return tuple(np.array(rows, dtype=float).T)

    @cached_property
    def slopes(self) -> FloatArray:
        """Coefficients of the derivative with respect to the local coordinate s in [0, 1]."""
        return np.asarray(2 * chebder(self.series, axis=1), dtype=float)

    def value(self, v: FloatArray) -> FloatArray:
        """The function at energies in the table, shape (n,)."""
        which, _, s = self._locate(v)
        return _clenshaw(self.series.T, which, s)

    def value_and_derivative(
        self, v: FloatArray, gap: FloatArray | None = None
    ) -> tuple[FloatArray, FloatArray]:
        """The function and its derivative in v, shapes (n,); `gap`: distance from a break where better known."""
        which, slope, s = self._locate(v, gap)
        return _clenshaw(self.series.T, which, s), _clenshaw(self.slopes.T, which, s) / slope

    def _locate(
        self, v: FloatArray, gap: FloatArray | None = None
    ) -> tuple[np.ndarray[tuple[int], np.dtype[np.intp]], FloatArray, FloatArray]:
        """Panel, dv/ds and s in [0, 1] of each energy."""
        which = np.clip(np.searchsorted(self.firsts, v, side="right") - 1, 0, len(self.panels) - 1)
        lo, hi, kind, start, stop = (column[which] for column in self._shape)
        span = np.log(hi / lo)
        width = hi - lo
        near = np.where(kind == CODE["left"], v - lo, hi - v)
        if gap is not None:
            near = np.where(np.abs(np.abs(gap) - near) <= 4e-15 * v, np.abs(gap), near)
        root = np.maximum(near / width, 1e-30 if gap is not None else 4e-16) ** (1 / POWER)
        t = np.where(kind == 0, np.log(v / lo) / span, np.where(kind == CODE["left"], root, 1 - root))
        slope = np.where(kind == 0, v * span, width * POWER * root ** (POWER - 1))
        length = stop - start
        return which, slope * length, np.clip((t - start) / length, 0.0, 1.0)


def _clenshaw(
    series: FloatArray, which: np.ndarray[tuple[int], np.dtype[np.intp]], s: FloatArray
) -> FloatArray:
    """Sum of series[n, which] T_n(2 s - 1)."""
    x = 2 * s - 1
    later = np.zeros_like(x)
    latest = np.zeros_like(x)
    for row in series[:0:-1]:
        later, latest = row[which] + 2 * x * later - latest, later
    return np.asarray(series[0][which] + x * later - latest)
