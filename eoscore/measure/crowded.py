"""The measure of very many stretches of a line."""

from __future__ import annotations

from copy import copy
from dataclasses import replace
from math import ceil, inf, log
from typing import TYPE_CHECKING

import numpy as np

from eoscore.measure.base import FloatArray, Foot, Measure, Nodes
from eoscore.measure.bottom import beginning
from eoscore.measure.coordinate import RADIAL
from eoscore.measure.rules import RATIO
from eoscore.measure.slopes import Slopes, joined, overlaps, rule

if TYPE_CHECKING:
    from collections.abc import Iterator

    from numpy.typing import ArrayLike

    from eoscore.measure.slopes import IntArray

__all__ = ["Crowd"]

ERROR = 1e-9  # of the series near a bottom, where V loses digits
DOUBTS = 100  # energies at which the error of samples is taken
POINTS = 26  # nodes of a panel over a factor 8


class Crowd(Measure):
    """Omega from the series of all stretches.

    It tells its breaks where they are few: there may be thousands. `volume` and `density` follow every one of them;
    `nodes` are exact for functions that are smooth over a factor 8 in energy, whatever waves Omega has. known:
    stretches that are followed; sampled: such as stand for waves without number.
    """

    def __init__(
        self, name: str, known: Slopes, sampled: Slopes | None, top: float, breaks: tuple[float, ...]
    ) -> None:
        self.stretches = stretches = joined([known, sampled] if sampled else [known]).trimmed()
        tops = np.argsort(stretches.top, kind="stable")
        self._tops = stretches.top[tops]
        self._whole = np.concatenate([[0.0], np.cumsum(stretches.whole[tops])])
        first = float(np.min(stretches.base[stretches.base > 0], initial=self._tops[0]))
        v = np.geomspace(1e-12, 0.5, 400) * min(first, self._tops[0])
        exponent, bent = beginning(v, self._below(v))
        route = "line of many wells" if name not in RADIAL else "radial, of many wells"
        super().__init__(
            exponent, top=top, error=ERROR, route=route, scale=min(bent, first, top), breaks=breaks
        )
        self.foot = self.scale * 2.0**-40
        self._asked = self.foot
        self._doubt = self._of_samples(sampled) if sampled else (np.zeros(1), np.full(1, ERROR))

    @property
    def error(self) -> float:
        """See `Measure.error`."""
        return float(self.error_below(self._asked))

    def error_below(self, v: ArrayLike) -> FloatArray:
        """See `Measure.error_below`."""
        return np.asarray(np.interp(np.asarray(v, dtype=float), *self._doubt))

    def _of_samples(self, sampled: Slopes) -> tuple[FloatArray, FloatArray]:
        """Energies, and the error up to each: how far two halves of the samples differ in Omega."""
        order = np.argsort(sampled.base, kind="stable")
        half = np.cumsum(np.where(order % 2 == 0, 1.0, -1.0) * sampled.whole[order])
        least, last = sampled.base[order[[0, -1]]]
        v = np.geomspace(least, last, DOUBTS + 1)[1:]
        apart = np.maximum.accumulate(np.abs(half))[np.searchsorted(sampled.base[order], v, side="right") - 1]
        return np.append(least, v), ERROR + np.append(0.0, apart / self._below(v))

    def volume(self, v: ArrayLike) -> FloatArray:
        """See `Measure.volume`."""
        energy = np.clip(np.asarray(v, dtype=float), 0.0, self.top)
        flat = energy.ravel()
        low = np.maximum(flat, self.foot)
        self._asked = max(self._asked, float(low.max(initial=0.0)))
        return np.asarray(self._below(low) * (flat / low) ** self.exponent).reshape(energy.shape)

    def density(self, v: ArrayLike) -> FloatArray:
        """See `Measure.density`."""
        energy = np.asarray(v, dtype=float)
        flat = energy.ravel()
        inside = (flat > 0) & (flat < self.top)
        low = np.maximum(np.where(inside, flat, self.foot), self.foot)
        total = np.zeros_like(low)
        for order, which in self._crossed(low):
            t = np.clip(self.stretches.place(which, low[order]), 1e-9, 1 - 1e-9)
            slope = self.stretches.steepness(which, t) / (
                self.stretches.height[which] * np.pi / 2 * np.sin(np.pi * t)
            )
            total += np.bincount(order, slope, low.size)
        total *= (np.where(inside, flat, low) / low) ** (self.exponent - 1)
        return np.where(inside, total, 0.0).reshape(energy.shape)

    def cut(self, top: float) -> Measure:
        """See `Measure.cut`."""
        return self if top >= self.top else self._changed(self.stretches, top)

    def scaled(self, factor: float) -> Measure:
        """See `Measure.scaled`."""
        rows = self.stretches
        more = {name: factor * getattr(rows, name) for name in ("whole", "series", "tail")}
        return self._changed(replace(rows, **more), self.top)

    def _changed(self, stretches: Slopes, top: float) -> Crowd:
        other = copy(self)
        other.top, other.stretches = top, stretches
        other._whole = self._whole * (stretches.whole[0] / self.stretches.whole[0])
        return other

    def nodes(self, upto: float = inf) -> Nodes:
        """See `Measure.nodes`."""
        end = self.end(upto)
        self._asked = max(self._asked, end)
        count = max(1, ceil(log(end / self.foot) / log(RATIO)))
        edges = self.foot * (end / self.foot) ** (np.arange(count + 1) / count)
        v, w = rule(self.stretches, edges, POINTS)
        return Nodes(v.ravel(), w.ravel(), self.footing)

    @property
    def footing(self) -> Foot:
        """The pure power below the foot."""
        return Foot(
            float(self._below(np.array([self.foot]))[0]) / self.foot**self.exponent, self.exponent, self.foot
        )

    def _below(self, v: FloatArray) -> FloatArray:
        """Omega at energies (n,) above the foot."""
        total = self._whole[np.searchsorted(self._tops, v, side="right")]
        for order, which in self._crossed(v):
            part = self.stretches.below(which, self.stretches.place(which, v[order]))
            total = total + np.bincount(order, part, v.size)
        return np.asarray(total)

    def _crossed(self, v: FloatArray) -> Iterator[tuple[IntArray, IntArray]]:
        """Pairs of an energy and a stretch that reaches from below it to above it, in blocks."""
        order = np.argsort(v, kind="stable")
        first = np.searchsorted(v[order], self.stretches.base, side="right")
        last = np.searchsorted(v[order], self.stretches.top, side="left")
        for which, k in overlaps(first, last):
            yield order[k], which
