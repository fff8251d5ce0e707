"""Very many wells along one coordinate joined with what happens along the others."""

from __future__ import annotations

from functools import lru_cache
from math import ceil, log
from typing import TYPE_CHECKING

import numpy as np

from eoscore.measure.crowded import Crowd
from eoscore.measure.logarithms import Logarithms
from eoscore.measure.rules import legendre
from eoscore.measure.sampled import Sampled
from eoscore.measure.slopes import overlaps, rule
from eoscore.measure.smeared import footed

if TYPE_CHECKING:
    from collections.abc import Callable

    from eoscore.measure.base import FloatArray, Measure
    from eoscore.measure.slopes import Slopes

__all__ = ["SmearedCrowd"]

ROUNDING = 1e-8  # of the sum over stretches, measured against lattices of period 1 in closed form
TABLED = 2e-5  # where the second is a crowd, too, and as rough
NARROW, LONG, FEW = 2.0**0.25, 32, 12  # ratio of narrow panels, how many are made at once, their nodes
BLOCK = 100_000  # energies and nodes at once
CLEAR = 8.0  # feet above the bottom: below, all is a pure power


class SmearedCrowd(Sampled):
    """Omega of a crowd and another measure together.

    It remembers both: joined with one more measure, it is the crowd joined with the smoother rest.
    """

    noise = 3 * ROUNDING  # it is known: what halving does not lower above it are waves

    def __init__(self, crowd: Crowd, other: Measure, top: float) -> None:
        self.crowd, self.other = crowd, other
        self._panels = lru_cache(maxsize=4)(self._made)
        self._volume = (
            other.volume if other.powers() else Logarithms(other, steep=not isinstance(other, Crowd))
        )
        rough = TABLED if isinstance(other, Crowd) else ROUNDING
        super().__init__(
            self._together,
            crowd.exponent + other.exponent,
            scale=min(crowd.scale, other.scale),
            foot=crowd.foot,
            top=top,
            error=lambda v: crowd.error_below(v) + other.error_below(v) + rough,
            route=crowd.route if other.powers() else f"{crowd.route} * {other.route}",
            breaks=(*crowd.breaks, *other.breaks),
        )

    def cut(self, top: float) -> Measure:
        """See `Measure.cut`."""
        return self if top >= self.top else SmearedCrowd(self.crowd, self.other, top)

    def _together(self, energies: FloatArray) -> FloatArray:
        """int dOmega_crowd(v) Omega_other(E - v) at energies (n,).

        Far below E by the nodes of narrow panels, which know the crowd to all digits; from the last whole panel on by
        the stretches themselves.
        """
        crowd, volume = self.crowd, self._volume
        e = np.maximum(energies, CLEAR * crowd.foot)
        edges, v, w = self._panels(ceil(log(float(e.max()) / crowd.foot) / log(NARROW) / LONG) * LONG)
        place = np.maximum(np.searchsorted(edges, e, side="right") - 2, 0)
        total = _near(crowd.stretches, volume, e, edges[place]) + footed(crowd.footing, volume, e)
        for panel in np.unique(place).tolist():
            whole, below = np.flatnonzero(place == panel), slice(0, panel * FEW)
            for at in np.array_split(whole, ceil(whole.size * panel * FEW / BLOCK) or 1):
                total[at] += volume(e[at, None] - v[below]) @ w[below]
        return np.asarray(total * (energies / e) ** self.exponent)

    def _made(self, count: int) -> tuple[FloatArray, FloatArray, FloatArray]:
        edges = self.crowd.foot * NARROW ** np.arange(count + 1)
        v, w = rule(self.crowd.stretches, edges, FEW, FEW)
        return edges, v.ravel(), w.ravel()


def _near(
    rows: Slopes, volume: Callable[[FloatArray], FloatArray], e: FloatArray, start: FloatArray
) -> FloatArray:
    """The same integral from energies `start` (n,) on."""
    order = np.argsort(e, kind="stable")
    total = np.zeros_like(e)
    x, dx = legendre(FEW)
    first = np.searchsorted(e[order], rows.base, side="right")
    last = np.searchsorted(start[order], rows.top, side="left")
    for which, k in overlaps(first, last):
        at = order[k]
        t_0, t_e = rows.place(which, start[at])[:, None], rows.place(which, e[at])[:, None]
        t = t_e - (t_e - t_0) * x**2
        part = rows.steepness(which, t) * volume(e[at, None] - rows.energy(which, t))
        total += np.bincount(at, (part * (2 * x * dx) * (t_e - t_0)).sum(axis=1), e.size)
    return total
