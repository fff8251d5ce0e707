"""A measure known by its volume function, kept as Chebyshev series that are made when first asked for."""

from __future__ import annotations

from functools import cache
from math import ceil, inf, log, log2
from threading import Lock
from typing import TYPE_CHECKING

import numpy as np

from eoscore.measure.base import FloatArray, Foot, Measure, Nodes
from eoscore.measure.need import EASES, Need, eased_at
from eoscore.measure.panel import ORDER, Panel, points, stretches, to_series
from eoscore.measure.table import Table

if TYPE_CHECKING:
    from collections.abc import Callable

    from numpy.typing import ArrayLike

__all__ = ["Sampled"]

FINEST = {"log": 2.0**-11, "left": 2.0**-14, "right": 2.0**-14}  # panels this short in t are not halved
SHARPEST = 1e-14  # relative tail of a series at which a panel counts as resolved
SHORT = 2.0**-5  # and one this short in t not, where halving did not help
ROUGH = 1e-8  # error of a function whose series need not be better than it, each by its share of energy
STALLED = 0.7  # share of the tail before, above which halving did not help
PARTS = 8  # of a stretch towards a break, for moments
NOISE = 1e-4  # a tail below this that halving does not lower is the rounding of the function itself


class Sampled(Measure):
    """Omega from a function of energies (n,) -> (n,) in (foot, top], as piecewise series of Omega / v^exponent.

    scale: an energy (J) of the order at which Omega begins to leave its pure power.
    foot: below it Omega is taken as that power; by default so low that no double would show the difference.
    error: relative bound on the function's own values, or a function of energies (any shape) that tells it up
    to each as far as it is known; the tails of the series are added to it, each with the
    share of energy that its panel takes (a panel as narrow as 4e-9 at a break hardly counts).
    kT: the series are as good as sums up to that temperature (J) need them. ease: makes the measure that is so.
    project: Omega on the parts of a stretch (parts, n) as coefficients of T_n, given its value at the start, where
    its moments do for those sums and its values would need many panels. parent: the same measure for all
    temperatures, whose panels serve far below kT.
    """

    noise = NOISE  # of the function, which a kind that knows its own may lower

    def __init__(
        self,
        function: Callable[[FloatArray], FloatArray],
        exponent: float,
        *,
        scale: float,
        foot: float | None = None,
        top: float = inf,
        error: float | Callable[[FloatArray], FloatArray] = 0.0,
        route: str,
        breaks: tuple[float, ...] = (),
        kT: float = inf,
        ease: Callable[[float], Measure] | None = None,
        project: Callable[[Panel, int, float], FloatArray] | None = None,
        parent: Sampled | None = None,
    ) -> None:
        breaks = tuple(b for b in breaks if 0 < b < top)
        scale = min(scale, top, *breaks)
        super().__init__(exponent, top=top, error=0.0, route=route, breaks=breaks, scale=scale)
        self._function = function
        self._own_error = error
        self._need = Need(kT, SHARPEST)
        self._ease = None if ease is None else cache(ease)
        self._project, self._parent = project, parent
        self.foot = foot if foot is not None else scale * 2.0**-52
        self._ahead = stretches(self.foot, self.breaks, top)
        self._lock = Lock()
        self._table: Table | None = None
        self._reach = self.foot
        self._tails = np.empty(0)

    @property
    def error(self) -> float:
        """See `Measure.error`."""
        return float(self.error_below(self._reach))

    def error_below(self, v: ArrayLike) -> FloatArray:
        """See `Measure.error_below`."""
        energy = np.asarray(v, dtype=float)
        tail = np.zeros_like(energy)
        if self._table is not None:
            tails = np.concatenate([[0.0], np.maximum.accumulate(self._tails)])
            tail = tails[np.searchsorted(self._table.firsts, energy)]
        return np.asarray(tail + self._function_error(energy))

    def _function_error(self, v: FloatArray) -> FloatArray:
        own = self._own_error
        return own(v) if callable(own) else np.full(v.shape, own)

    def eased(self, kT: float) -> Measure:
        """See `Measure.eased`."""
        return self if self._ease is None else self._ease(eased_at(kT, self.top))

    def volume(self, v: ArrayLike) -> FloatArray:
        """See `Measure.volume`."""
        energy = np.clip(np.asarray(v, dtype=float), 0.0, self.top)
        flat = energy.ravel()
        volume = self._up_to(flat).volume(np.maximum(flat, self.foot))
        return np.reshape(volume * np.minimum(flat / self.foot, 1.0) ** self.exponent, energy.shape)

    def density(self, v: ArrayLike) -> FloatArray:
        """See `Measure.density`."""
        return self.density_beside(np.asarray(v, dtype=float), None)

    def density_beside(self, v: FloatArray, gap: FloatArray | None) -> FloatArray:
        """See `Measure.density_beside`."""
        energy = np.asarray(v, dtype=float)
        flat = energy.ravel()
        inside = (flat > 0) & (flat < self.top)
        flat = np.where(inside, flat, self.foot)
        table = self._up_to(flat)
        density = table.density(np.maximum(flat, self.foot), None if gap is None else gap.ravel())
        low = flat < self.foot
        if low.any():
            density[low] = self.exponent * self.volume(flat[low]) / flat[low]
        return np.where(inside, density, 0.0).reshape(energy.shape)

    def nodes(self, upto: float = inf) -> Nodes:
        """See `Measure.nodes`."""
        end = self.end(upto)
        table = self._up_to(np.array([end]))
        which, low, high = table.pieces
        last, s = table.place(end)
        below = (which < last) | ((which == last) & (low < s))
        v, w = table.rule(
            which[below], low[below], np.where(which[below] == last, np.minimum(high[below], s), high[below])
        )
        return Nodes(v.ravel(), w.ravel(), self.footing)

    @property
    def footing(self) -> Foot:
        """The part that is a pure power."""
        first = float(self._up_to(np.array([self.foot])).volume(np.array([self.foot]))[0])
        return Foot(first / self.foot**self.exponent, self.exponent, self.foot)

    def table(self, upto: float) -> Table:
        """Omega on panels up to an energy (J) at least."""
        return self._up_to(np.array([self.end(upto)]))

    def _up_to(self, v: FloatArray) -> Table:
        """The table with panels at least up to the greatest of these energies."""
        wanted = min(float(v.max(initial=self.foot)), self.top)
        table = self._table
        if table is None or wanted > self._reach:
            with self._lock:
                while self._table is None or wanted > self._reach:
                    self._extend()
                table = self._table
        return table

    def _extend(self) -> None:
        """Add the next stretch: its moments, or panels fine enough for their series to converge."""
        stretch = next(self._ahead)
        rough = self._project is not None and self._table is not None and stretch.kind != "log"
        low = stretch.kind == "log" and stretch.hi <= min(self._need.kT, self.top / EASES)
        done = (
            self._parent._rows(stretch)
            if self._parent and low
            else []
            if rough
            else self._converging(stretch)
        )
        panels = [panel for panel, _, _ in done]
        series, powers = np.array([row for _, row, _ in done]), np.full(len(done), self.exponent)
        if not done:
            panels, series = self._projected(stretch)
            powers = np.zeros(len(panels))
        self._tails = np.concatenate([self._tails, [tail for _, _, tail in done] or np.zeros(len(panels))])
        if self._table is None:
            self._table = Table(tuple(panels), series, powers, self.scale)
        else:
            self._table = self._table.with_more(panels, series, powers)
        self._reach = stretch.hi
        if self._reach >= self.top and hasattr(self._function, "release"):
            self._function.release()  # of what it holds: all its values are known

    def _rows(self, stretch: Panel) -> list[tuple[Panel, FloatArray, float]]:
        """The panels of a stretch, with their series and its tail."""
        table = self._up_to(np.array([stretch.hi]))
        rows = zip(table.panels, table.series, self._tails.tolist(), strict=True)
        return [row for row in rows if stretch.lo <= row[0].lo and row[0].hi <= stretch.hi]

    def _converging(self, stretch: Panel) -> list[tuple[Panel, FloatArray, float]]:
        """Panels in ascending order, with their series and its tail; none where moments will do better."""
        done: list[tuple[Panel, FloatArray, float]] = []
        waiting = [(stretch, inf)]
        while waiting:
            series, tails, needs = self._sample([panel for panel, _ in waiting])
            halved: list[tuple[Panel, float]] = []
            for (panel, before), row, tail, need in zip(waiting, series, tails, needs, strict=True):
                if self._resolved(panel, tail, before, need):
                    done.append((panel, row, tail * min(1.0, log(panel.last / panel.first))))
                elif self._project is not None and self._table is not None:
                    return []
                else:
                    halved += [(half, tail) for half in panel.halves()]
            waiting = halved
        return sorted(done, key=lambda item: (item[0].first, item[0].start))

    def _projected(self, stretch: Panel) -> tuple[list[Panel], FloatArray]:
        """The parts of a stretch and Omega on each as a series, from its moments."""
        if self._project is None or self._table is None:
            return [], np.empty((0, ORDER))
        count = ceil(log2(stretch.hi / stretch.lo)) if stretch.kind == "log" else PARTS
        base = float(self._table.volume(np.array([self._reach]))[0])
        series = self._project(stretch, count, base)
        return stretch.parts(count), series

    def _resolved(self, panel: Panel, tail: float, before: float, need: float) -> bool:
        """Whether a series is as good as needed or as it gets; `before` is the tail of the panel halved for it."""
        own = float(self._function_error(np.asarray(panel.last)))
        rough = own > ROUGH and tail * min(1.0, log(panel.last / panel.first)) <= own
        if tail <= max(need, 0.3 * own) or rough or panel.stop - panel.start <= FINEST[panel.kind]:
            return True
        return tail > STALLED * before and (tail < self.noise or panel.stop - panel.start <= SHORT)

    def _sample(self, panels: list[Panel]) -> tuple[FloatArray, list[float], FloatArray]:
        """Series of Omega / (v/scale)^exponent on panels; their last coefficients beside its least value; the need."""
        s = points()
        v = np.array([p.energy(p.start + (p.stop - p.start) * s) for p in panels])
        omega = self._function(v.ravel()).reshape(v.shape)
        values = omega / (v / self.scale) ** self.exponent
        series = values @ to_series().T
        tails = np.abs(series[:, -3:]).max(axis=1) / np.maximum(
            np.abs(values).min(axis=1), 1e-6 * np.abs(values).max(axis=1)
        )
        return series, [float(tail) for tail in tails], self._need.allowed(v, omega).min(axis=1)
