"""The levels of an isotropic V(r): one radial problem for each angular momentum."""

from __future__ import annotations

from functools import lru_cache
from itertools import count
from math import inf
from typing import TYPE_CHECKING, NamedTuple

import numpy as np

from eoscore.constants import HBAR
from eoscore.errors import NoAnswerError
from eoscore.measure.landscape import survey
from eoscore.state.exact.direction import REACH, Known, Sums
from eoscore.state.exact.orbit import Orbit
from eoscore.state.exact.spectral import eigenvalues

if TYPE_CHECKING:
    from collections.abc import Iterator

    from numpy.typing import NDArray

    from eoscore.formula.field import Field
    from eoscore.state.reading import FloatArray

__all__ = ["Radial", "radial_levels"]

LEVELS = 50  # found one by one for each angular momentum
POINTS, MORE = 170, 1.2
DECAY = 22.0  # e-foldings of the wave beyond its turning points
ALL = 24  # angular momenta below are taken one by one, above in panels of some nodes
NODES, RATIO = 8, 1.5
GOOD = 1e-5


class Part(NamedTuple):
    """The levels of one angular momentum: all of them, from the lowest of the place; weight: of the interpolation."""

    levels: Known
    offset: float
    weight: float


class Radial:
    """Levels of angular momentum l, each (2 l + 1)-fold; solved as far as a temperature asks for them."""

    def __init__(self, field: Field, mass: float) -> None:
        landscape = survey(field)
        if not landscape.holds or landscape.bottom is None or landscape.depth < inf:
            raise NoAnswerError(
                "`levels exact` wants a trap that holds at every energy: a leaky one has no true levels"
            )
        self.field, self.mass, self.bottom = field, mass, landscape.bottom.value
        self.wall = self._wall(landscape.bottom.position[0])
        self._solved = lru_cache(maxsize=4096)(self._solve)
        self.ground = self._solved(0)
        self.lowest = self.ground.lowest
        self.gap = min(self.ground.gap, self._solved(1).lowest - self.lowest)
        self._worst = self.ground.error

    @property
    def error(self) -> float:
        """See `Direction`: of the levels, and of the interpolation between angular momenta."""
        return self._worst + 1e-8

    def sums(self, beta: NDArray[np.inexact], kT: float) -> Sums:
        """See `Direction`."""
        total = list(self.ground.sums(beta, kT))
        for part in self._parts(kT):
            z0, z1, z2 = part.levels.sums(beta, kT)
            fading = part.weight * np.exp(-beta * part.offset)
            whole, e = 1 + z0, part.offset
            total[0] = total[0] + fading * whole
            total[1] = total[1] + fading * (z1 + e * whole)
            total[2] = total[2] + fading * (z2 + 2 * e * z1 + e * e * whole)
        return Sums(*total)

    def _parts(self, kT: float) -> Iterator[Part]:
        """l = 1, 2, ... one by one, then panels, as far as their lowest level is within 45 kT."""
        end = REACH * kT
        for angular, weight in _angular():
            levels = self._solved(angular)
            offset = levels.lowest - self.lowest
            if offset > end:
                return
            self._worst = max(self._worst, levels.error)
            yield Part(levels, offset, weight)

    def _potential(self, r: FloatArray, squared: float) -> FloatArray:
        """V + hbar^2 squared/(2 m r^2), J from the bottom."""
        with np.errstate(divide="ignore", over="ignore"):
            own = np.broadcast_to(self.field.formula.evaluate({"r": r}), np.shape(r)) - self.bottom
            return np.asarray(own + HBAR**2 * squared / (2 * self.mass) / np.asarray(r) ** 2)

    def _solve(self, angular: int) -> Known:
        squared = angular * (angular + 1.0)
        # Langer: the half beside l makes the smooth count right near r = 0 (Phys. Rev. 51, 669 (1937))
        orbit = Orbit(
            lambda r: self._potential(r, squared + 0.25), self.mass, self._center(squared + 0.25), self.wall
        )
        top = _energy(orbit, LEVELS + 2.0)
        low, high = self._ends(orbit, top)
        kinetic = HBAR**2 / (2 * self.mass)
        first, second = (
            eigenvalues(lambda r: self._potential(r, squared), low, high, kinetic, LEVELS, points)
            for points in (POINTS, int(MORE * POINTS))
        )
        error = float(np.max(np.abs(first - second) / (np.gradient(second) + second)))
        if error > GOOD:
            raise NoAnswerError(
                f"the levels of angular momentum {angular} have not converged (relative difference {error:.1e} of two "
                "grids): the potential is too rough for the spectral method; round off its kinks and jumps"
            )
        numbers = orbit.volume(second[[LEVELS // 2, -1]]) - np.array([LEVELS // 2, LEVELS - 1])
        drift = float(abs(numbers[1] - numbers[0])) / LEVELS**2
        return Known(second - second[0], float(second[0]), orbit, error + drift)

    def _center(self, squared: float) -> float:
        """Where the effective potential is least, to a part in a thousand: the turning points need no more."""
        far = self.wall
        if far == inf:
            far = (HBAR**2 / (2 * self.mass * 1e-30)) ** 0.5 * 1e-3
            while (
                float(self._potential(np.array([far]), 0.0)[0]) * far**2
                < 1e3 * HBAR**2 * (squared + 10) / self.mass
            ):
                far *= 1.3
        r = far * np.geomspace(1e-5, 1, 12_000)[:-1]
        return float(r[np.argmin(self._potential(r, squared))])

    def _wall(self, start: float) -> float:
        if not self.field.walls:
            return inf

        def inside(r: float) -> bool:
            point = {"r": np.array([r])}
            return all(float(np.ravel(wall.evaluate(point))[0]) > 0 for wall in self.field.walls)

        low, high = max(start, 1e-12), max(start, 1e-12)
        while inside(high):
            low, high = high, 2 * high
            if high > 1e6:
                return inf
        for _ in range(200):
            middle = (low + high) / 2
            low, high = (middle, high) if inside(middle) else (low, middle)
        return high

    def _ends(self, orbit: Orbit, top: float) -> tuple[float, float]:
        """Where a wave of energy `top` has died out on both sides, or 0 and the wall."""
        inner, outer = (float(r[0]) for r in orbit.turning(np.array([top])))
        low = _died(orbit, top, np.linspace(inner, 0.0, 2000)[:-1])
        high = self.wall if self.wall < inf else _died(orbit, top, outer * np.geomspace(1, 30, 20_000))
        return (low or 0.0), (high or outer * 30)


def radial_levels(field: Field, mass: float) -> Radial:
    """All levels of V(r), J from its bottom. NoAnswerError where they do not converge."""
    return Radial(field, mass)


def _died(orbit: Orbit, top: float, r: FloatArray) -> float | None:
    excess = np.maximum(orbit.potential(r) - top, 0.0)
    decay = np.cumsum(np.sqrt(2 * orbit.mass * excess[1:]) * np.abs(np.diff(r))) / HBAR
    beyond = np.flatnonzero(decay > DECAY)
    return float(r[1 + beyond[0]]) if beyond.size else None


def _energy(orbit: Orbit, number: float) -> float:
    """The energy below which so many levels lie, to a few percent and not below it."""
    low = float(orbit.potential(np.array([orbit.center]))[0])
    row = np.asarray(1.5 ** np.arange(12), dtype=np.float64)
    step = HBAR**2 / (orbit.mass * orbit.center**2) * row
    while True:
        counted = orbit.volume(low + step)
        if counted[-1] >= number:
            return low + 1.02 * float(np.exp(np.interp(np.log(number), np.log(counted), np.log(step))))
        step = step[-1] * row


def _angular() -> Iterator[tuple[int, float]]:
    """Angular momenta with weights: the sum of (2 l + 1) f(l) over all l > 0, f a polynomial on each panel."""
    for angular in range(1, ALL):
        yield angular, 2.0 * angular + 1
    start = ALL
    for _ in count():
        stop = int(start * RATIO)
        place = (1 - np.cos(np.pi * (np.arange(NODES) + 0.5) / NODES)) / 2
        nodes = np.unique(np.rint(start + place * (stop - 1 - start)).astype(int))
        every = np.arange(start, stop)
        for node in nodes.tolist():
            others = nodes[nodes != node]
            share = np.prod((every[:, None] - others) / (node - others), axis=1)
            yield node, float(((2 * every + 1) * share).sum())
        start = stop
