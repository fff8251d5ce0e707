"""The series of a sampled measure, side by side in arrays, so that many energies are looked up at once."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING

import numpy as np
from numpy.polynomial.chebyshev import chebder

from eoscore.measure.panel import ORDER, POWER, Panel
from eoscore.measure.rules import RATIO, legendre

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from eoscore.measure.base import FloatArray

    Which = NDArray[np.intp]

__all__ = ["Table"]

CODE = {"log": 0, "left": 1, "right": 2}


@dataclass(frozen=True)
class Table:
    """Panels in ascending order, without gaps: Omega is (v / scale)^power times a series on each.

    series (panels, order): coefficients of T_n; powers (panels,); scale in J.
    """

    panels: tuple[Panel, ...]
    series: FloatArray
    powers: FloatArray
    scale: float

    def with_more(self, panels: list[Panel], series: FloatArray, powers: FloatArray) -> Table:
        """The table and panels above it."""
        return Table(
            (*self.panels, *panels),
            np.concatenate([self.series, series]),
            np.concatenate([self.powers, powers]),
            self.scale,
        )

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

    def volume(self, v: FloatArray) -> FloatArray:
        """Omega at energies in the table, shape (n,)."""
        which, _, s = self._locate(v)
        return np.asarray(_clenshaw(self.series.T, which, s) * (v / self.scale) ** self.powers[which])

    def density(self, v: FloatArray, gap: FloatArray | None = None) -> FloatArray:
        """dOmega/dv, shape (n,); `gap`: distance from a break where better known."""
        which, stretch, s = self._locate(v, gap)
        ratio, slope = _clenshaw(self.series.T, which, s), _clenshaw(self.slopes.T, which, s) / stretch
        power = self.powers[which]
        return np.asarray((v / self.scale) ** power * (power * ratio / v + slope))

    def energy(self, which: Which, s: FloatArray) -> FloatArray:
        """Energies at local coordinates s in [0, 1] of panels, of any one shape."""
        lo, hi, kind, start, stop = (column[which] for column in self._shape)
        t = start + (stop - start) * s
        near = np.where(kind == CODE["left"], t, 1 - t) ** POWER * (hi - lo)
        curved = np.where(kind == CODE["left"], lo + near, hi - near)
        return np.asarray(np.where(kind == CODE["log"], lo * np.exp(t * np.log(hi / lo)), curved))

    def rise(self, which: Which, s: FloatArray, v: FloatArray) -> FloatArray:
        """dOmega/ds at local coordinates s of panels, where the energy is v."""
        lo, hi, kind, start, stop = (column[which] for column in self._shape)
        t = start + (stop - start) * s
        slope = np.where(kind == CODE["left"], t, 1 - t) ** (POWER - 1) * POWER * (hi - lo)
        slope = np.where(kind == CODE["log"], v * np.log(hi / lo), slope) * (stop - start)
        power = self.powers[which]
        ratio, bend = _clenshaw(self.series.T, which, s), _clenshaw(self.slopes.T, which, s)
        return np.asarray((v / self.scale) ** power * (power * ratio / v * slope + bend))

    @cached_property
    def pieces(self) -> tuple[Which, FloatArray, FloatArray]:
        """Parts of the panels whose ends differ by a factor RATIO at most: which panel, from s to s."""
        lasts = np.append(self.firsts[1:], self.panels[-1].last)
        count = np.maximum(np.ceil(np.log(lasts / self.firsts) / np.log(RATIO)), 1).astype(int)
        which = np.repeat(np.arange(count.size), count)
        part = np.arange(which.size) - np.repeat(np.cumsum(count) - count, count)
        return which, part / count[which], (part + 1) / count[which]

    def rule(self, which: Which, low: FloatArray, high: FloatArray) -> tuple[FloatArray, FloatArray]:
        """Nodes v and weights dOmega, each (pieces, ORDER), on parts of panels from s to s."""
        x, w = legendre(ORDER)
        s = low[:, None] + (high - low)[:, None] * x
        v = self.energy(which[:, None], s)
        return v, self.rise(which[:, None], s, v) * w * (high - low)[:, None]

    def place(self, v: float) -> tuple[int, float]:
        """The panel that holds an energy, and its local coordinate."""
        which, _, s = self._locate(np.array([v]))
        return int(which[0]), float(s[0])

    def local(self, which: Which, v: FloatArray) -> FloatArray:
        """The coordinates s in [0, 1] of energies in panels."""
        lo, hi, kind, start, stop = (column[which] for column in self._shape)
        near = np.where(kind == CODE["left"], v - lo, hi - v)
        root = np.maximum(near / (hi - lo), 0.0) ** (1 / POWER)
        t = np.where(
            kind == 0, np.log(v / lo) / np.log(hi / lo), np.where(kind == CODE["left"], root, 1 - root)
        )
        return np.clip((t - start) / (stop - start), 0.0, 1.0)

    def _locate(self, v: FloatArray, gap: FloatArray | None = None) -> tuple[Which, FloatArray, FloatArray]:
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


def _clenshaw(series: FloatArray, which: Which, s: FloatArray) -> FloatArray:
    """Sum of series[n, which] T_n(2 s - 1)."""
    x = 2 * s - 1
    later = np.zeros_like(x)
    latest = np.zeros_like(x)
    for row in series[:0:-1]:
        later, latest = row[which] + 2 * x * later - latest, later
    return np.asarray(series[0][which] + x * later - latest)
