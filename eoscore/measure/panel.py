"""Panels of energy on which a measure is a Chebyshev series, each with a map that suits its ends."""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import cache
from itertools import pairwise
from math import log
from typing import TYPE_CHECKING, Literal

import numpy as np

if TYPE_CHECKING:
    from collections.abc import Iterator

    from numpy.typing import ArrayLike

    from eoscore.measure.base import FloatArray

__all__ = ["ORDER", "Panel", "points", "stretches", "to_series"]

ORDER = 20  # nodes of a panel
POWER = 2  # of the maps at a break, where Omega has a step of power 1/2 (1D), 3/2 (3D) or a logarithm
STRIDE = 16.0  # ratio of the ends of a first stretch; it is halved until its series converges

Kind = Literal["log", "left", "right"]


@cache
def points() -> FloatArray:
    """Chebyshev points of the first kind on [0, 1], ascending; none lies on an end."""
    return np.asarray((1 - np.cos(np.pi * (np.arange(ORDER) + 0.5) / ORDER)) / 2)


@cache
def to_series() -> FloatArray:
    """The matrix from values at the points to coefficients of T_n(2 s - 1)."""
    angle = np.pi * (np.arange(ORDER) + 0.5) / ORDER
    matrix = 2 / ORDER * np.cos(np.outer(np.arange(ORDER), np.pi - angle))
    matrix[0] /= 2
    return np.asarray(matrix)


@dataclass(frozen=True)
class Panel:
    """The part of [lo, hi] with t in [start, stop], 0 <= t <= 1.

    `log`: v = lo (hi/lo)^t, for the stretches between; `left`, `right`: v leaves `lo` as t^2, or reaches `hi` as
    (1 - t)^2, which turns the half powers of a break into whole ones.
    """

    lo: float
    hi: float
    kind: Kind
    start: float = 0.0
    stop: float = 1.0

    @property
    def first(self) -> float:
        """Least energy of the panel."""
        return self.lo if self.start == 0 else float(self.energy(np.asarray(self.start)))

    @property
    def last(self) -> float:
        """Greatest energy of the panel."""
        return self.hi if self.stop == 1 else float(self.energy(np.asarray(self.stop)))

    def energy(self, t: FloatArray) -> FloatArray:
        """Energy at t."""
        if self.kind == "log":
            return np.asarray(self.lo * np.exp(t * log(self.hi / self.lo)))
        width = self.hi - self.lo
        return self.lo + width * t**POWER if self.kind == "left" else self.hi - width * (1 - t) ** POWER

    def place(self, v: ArrayLike) -> FloatArray:
        """The t of energies in [lo, hi]."""
        v = np.asarray(v, dtype=float)
        if self.kind == "log":
            return np.asarray(np.log(v / self.lo) / log(self.hi / self.lo))
        width = self.hi - self.lo
        if self.kind == "left":
            return np.asarray(((v - self.lo) / width) ** (1 / POWER))
        return np.asarray(1 - ((self.hi - v) / width) ** (1 / POWER))

    def parts(self, count: int) -> list[Panel]:
        """The panel in parts of equal length in t."""
        edges = np.linspace(self.start, self.stop, count + 1).tolist()
        return [replace(self, start=start, stop=stop) for start, stop in pairwise(edges)]

    def halves(self) -> tuple[Panel, Panel]:
        """The panel in two, at the middle of its t."""
        lower, upper = self.parts(2)
        return lower, upper


def stretches(foot: float, breaks: tuple[float, ...], top: float) -> Iterator[Panel]:
    """Panels from the foot to the top in ascending order, without end for an infinite top; breaks between them."""
    lo, singular = foot, False
    for knot in (*breaks, top):
        if knot == np.inf:
            break
        middle = (lo + knot) / 2
        left_end = min(2 * lo, middle) if singular else lo
        right_start = max(knot / 2, left_end)
        if singular:
            yield Panel(lo, left_end, "left")
        yield from _strides(left_end, right_start)
        yield Panel(right_start, knot, "right")
        lo, singular = knot, True
    if top < np.inf:
        return
    if singular:
        yield Panel(lo, 2 * lo, "left")
        lo = 2 * lo
    while True:
        yield Panel(lo, lo * STRIDE, "log")
        lo *= STRIDE


def _strides(lo: float, hi: float) -> Iterator[Panel]:
    while lo < hi:
        step = min(lo * STRIDE, hi)
        yield Panel(lo, step, "log")
        lo = step
