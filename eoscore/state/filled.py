"""Filled states: Omega(E) and its integral from the bottom, which a Fermi gas at T = 0 is made of."""

from __future__ import annotations

from math import inf
from typing import TYPE_CHECKING

import numpy as np

from eoscore.measure.rules import legendre

if TYPE_CHECKING:
    from eoscore.measure.base import Measure
    from eoscore.state.reading import FloatArray

__all__ = ["Filled"]

OCTAVES = 80  # below its foot a measure is a pure power, and this is deeper than any foot
ORDER = 16


class Filled:
    """int_0^E Omega dE for arrays of E in [0, top]: closed for sums of powers, else cumulative panels."""

    def __init__(self, measure: Measure) -> None:
        self.measure = measure
        self.powers = measure.powers()
        self._edges = np.zeros(0)
        self._sums = np.zeros(0)

    def number(self, level: FloatArray) -> FloatArray:
        """Omega, without a flat floor at level 0 (the step of the floor at E = 0 is counted as a state above)."""
        return np.where(level > 0, self.measure.volume(level), 0.0)

    def integral(self, level: FloatArray) -> FloatArray:
        """int_0^level Omega dE, in J."""
        if self.powers is not None:
            parts = (c * level**k * level / (k + 1) for c, k in self.powers)
            return sum(parts, np.zeros_like(level))
        if not self._edges.size or np.max(level, initial=0.0) > self._edges[-1]:
            self._build(float(np.max(level)))
        which = np.clip(np.searchsorted(self._edges, level, side="right") - 1, 0, self._edges.size - 1)
        start = self._edges[which]
        return self._sums[which] + self._panel(np.minimum(start, level), level)

    def _panel(self, start: FloatArray, stop: FloatArray) -> FloatArray:
        x, w = legendre(ORDER)
        width = (stop - start)[:, None]
        volume = self.measure.volume((start[:, None] + width * x).ravel()).reshape(-1, ORDER)
        return np.asarray(volume @ w * (stop - start))

    def _build(self, reach: float) -> None:
        end = min(2 * reach, self.measure.top) if self.measure.top < inf else 2 * reach
        edges = np.ldexp(end, np.arange(-OCTAVES, 1))
        for b in self.measure.breaks:
            near = b * np.concatenate([-(2.0 ** np.arange(-1, -40, -1)), [0.0], 2.0 ** np.arange(-40, 0)])
            edges = np.append(edges, b + near)
        edges = np.unique(edges[edges <= end]).astype(float)
        bottom = edges[:1] * self.measure.volume(edges[:1]) / (self.measure.exponent + 1)
        panels = self._panel(np.asarray(edges[:-1]), np.asarray(edges[1:]))
        self._sums = np.cumsum(np.concatenate([bottom, panels]))
        self._edges = edges
