"""A measure known by its volume function, kept as Chebyshev series that are made when first asked for."""

from __future__ import annotations

from math import inf, log
from threading import Lock
from typing import TYPE_CHECKING

import numpy as np

from eoscore.measure.base import FloatArray, Foot, Measure, Nodes
from eoscore.measure.panel import ORDER, Panel, points, stretches, to_series
from eoscore.measure.rules import RATIO, legendre
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
NOISE = 1e-4  # a tail below this that halving does not lower is the rounding of the function itself


class Sampled(Measure):
    """Omega from a function of energies (n,) -> (n,) in (foot, top], as piecewise series of Omega / v^exponent.

    scale: an energy (J) of the order at which Omega begins to leave its pure power.
    foot: below it Omega is taken as that power; by default so low that no double would show the difference.
    error: relative bound on the function's own values, or a function of energies (any shape) that tells it up
    to each as far as it is known; the tails of the series are added to it, each with the
    share of energy that its panel takes (a panel as narrow as 4e-9 at a break hardly counts).
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
    ) -> None:
        breaks = tuple(b for b in breaks if 0 < b < top)
        scale = min(scale, top, *breaks)
        super().__init__(exponent, top=top, error=0.0, route=route, breaks=breaks, scale=scale)
        self._function = function
        self._own_error = error
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

    def volume(self, v: ArrayLike) -> FloatArray:
        """See `Measure.volume`."""
        energy = np.clip(np.asarray(v, dtype=float), 0.0, self.top)
        flat = energy.ravel()
        ratio = self._up_to(flat).value(np.maximum(flat, self.foot))
        return np.reshape(ratio * (flat / self.scale) ** self.exponent, energy.shape)

    def density(self, v: ArrayLike) -> FloatArray:
        """See `Measure.density`."""
        return self.density_beside(np.asarray(v, dtype=float), None)

    def density_beside(self, v: FloatArray, gap: FloatArray | None) -> FloatArray:
        """See `Measure.density_beside`."""
        energy = np.asarray(v, dtype=float)
        flat = energy.ravel()
        inside = (flat > 0) & (flat < self.top)
        flat = np.where(inside, flat, self.foot)
        ratio, slope = self._up_to(flat).value_and_derivative(
            np.maximum(flat, self.foot), None if gap is None else gap.ravel()
        )
        slope = np.where(flat < self.foot, 0.0, slope)
        density = (flat / self.scale) ** self.exponent * (self.exponent * ratio / flat + slope)
        return np.where(inside, density, 0.0).reshape(energy.shape)

    def nodes(self, upto: float = inf) -> Nodes:
        """See `Measure.nodes`."""
        end = self.end(upto)
        table = self._up_to(np.array([end]))
        foot = Foot(
            float(table.value(np.array([self.foot]))[0]) / self.scale**self.exponent, self.exponent, self.foot
        )
        rules = [
            self._rule(panel, series, end) for panel, series in zip(table.panels, table.series, strict=True)
        ]
        return Nodes(np.concatenate([v for v, _ in rules]), np.concatenate([w for _, w in rules]), foot)

    def whole_panels(self, upto: float) -> tuple[FloatArray, Nodes]:
        """Where the panels of a rule begin, and the rule: to the end of the panel that holds `upto` (J)."""
        panels = self._up_to(np.array([self.end(upto)])).panels
        edges = []
        for panel in panels:
            parts = max(1, int(np.ceil(np.log(panel.last / panel.first) / np.log(RATIO))))
            edges.append(panel.energy(np.linspace(panel.start, panel.stop, parts + 1)[:-1]))
        return np.concatenate(edges), self.nodes(panels[-1].last)

    def _rule(self, panel: Panel, series: FloatArray, end: float) -> tuple[FloatArray, FloatArray]:
        """Nodes and weights dOmega on the part of a panel below `end`."""
        if panel.first >= end:
            return np.empty(0), np.empty(0)
        stop = panel.stop if panel.last <= end else panel.place(end)
        parts = int(np.ceil(np.log(min(panel.last, end) / panel.first) / np.log(RATIO)))
        edges = np.linspace(panel.start, stop, max(parts, 1) + 1)
        x, w = legendre(ORDER)
        t = (edges[:-1, None] + np.diff(edges)[:, None] * x).ravel()
        dt = (np.diff(edges)[:, None] * w).ravel()
        v, slope = panel.energy(t), panel.slope(t)
        place = 2 * (t - panel.start) / (panel.stop - panel.start) - 1
        ratio = np.polynomial.chebyshev.chebval(place, series)
        bend = np.polynomial.chebyshev.chebval(place, np.polynomial.chebyshev.chebder(series))
        bend *= 2 / (panel.stop - panel.start)
        return v, dt * (v / self.scale) ** self.exponent * (self.exponent * ratio / v * slope + bend)

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
        """Add the next stretch, in panels fine enough for their series to converge."""
        stretch = next(self._ahead)
        done: list[tuple[Panel, FloatArray, float]] = []
        waiting = [(stretch, inf)]
        while waiting:
            series, tails = self._sample([panel for panel, _ in waiting])
            halved: list[tuple[Panel, float]] = []
            for (panel, before), row, tail in zip(waiting, series, tails, strict=True):
                if self._resolved(panel, tail, before):
                    done.append((panel, row, tail * min(1.0, log(panel.last / panel.first))))
                else:
                    halved += [(half, tail) for half in panel.halves()]
            waiting = halved
        done.sort(key=lambda item: (item[0].first, item[0].start))
        panels = tuple(panel for panel, _, _ in done)
        series = np.array([row for _, row, _ in done])
        self._tails = np.concatenate([self._tails, [tail for _, _, tail in done]])
        if self._table is not None:
            panels, series = self._table.panels + panels, np.concatenate([self._table.series, series])
        self._table = Table(panels, series)
        self._reach = stretch.hi
        if self._reach >= self.top and hasattr(self._function, "release"):
            self._function.release()  # of what it holds: all its values are known

    def _resolved(self, panel: Panel, tail: float, before: float) -> bool:
        """Whether a series is as good as it gets; `before` is the tail of the panel that was halved for it."""
        own = float(self._function_error(np.asarray(panel.last)))
        rough = own > ROUGH and tail * min(1.0, log(panel.last / panel.first)) <= own
        if tail <= max(SHARPEST, 0.3 * own) or rough or panel.stop - panel.start <= FINEST[panel.kind]:
            return True
        return tail > STALLED * before and (tail < self.noise or panel.stop - panel.start <= SHORT)

    def _sample(self, panels: list[Panel]) -> tuple[FloatArray, list[float]]:
        """Series of Omega / (v/scale)^exponent on panels, and their last coefficients beside its least value."""
        s = points()
        v = np.array([p.energy(p.start + (p.stop - p.start) * s) for p in panels])
        omega = self._function(v.ravel()).reshape(v.shape)
        values = omega / (v / self.scale) ** self.exponent
        series = values @ to_series().T
        tails = np.abs(series[:, -3:]).max(axis=1) / np.maximum(
            np.abs(values).min(axis=1), 1e-6 * np.abs(values).max(axis=1)
        )
        return series, [float(tail) for tail in tails]
