"""The levels of a one-dimensional potential."""

from __future__ import annotations

import math
from functools import cached_property, lru_cache
from math import inf
from typing import TYPE_CHECKING

import numpy as np

from eoscore.constants import HBAR, H
from eoscore.errors import NoAnswerError
from eoscore.formula import variable
from eoscore.formula.field import Field
from eoscore.measure import Powers, convolve, measure_of
from eoscore.measure.kinks import kinks_of
from eoscore.measure.landscape import survey
from eoscore.state.exact.direction import END, Atoms, OnAtoms, some
from eoscore.state.exact.fading import SEEN, TURNED, faded
from eoscore.state.exact.spectral import converged
from eoscore.state.exact.tail import ladder

if TYPE_CHECKING:
    from eoscore.measure import Measure
    from eoscore.state.reading import FloatArray

__all__ = ["Line", "levels_on_line", "phase_space"]

LEVELS = 40  # found one by one
MOST = 160  # where these do not do
FEW = 14  # found on a grid of their own, since the rounding of a matrix grows as the fourth power of its size
DECAY = 14.0  # e-foldings of the wave beyond the turning points of the highest of them
BLOCK = 500  # steps at a time
GOOD = 1e-5  # relative error of a level that is too much


class Line(OnAtoms):
    """All levels of a field of the coordinate x, J from its bottom; NoAnswerError where they do not converge."""

    def __init__(self, field: Field, mass: float) -> None:
        super().__init__()
        landscape = survey(field)
        if not landscape.holds or landscape.bottom is None or landscape.depth < inf:
            raise NoAnswerError(
                "`levels exact` wants a trap that holds at every energy: a leaky one has no true levels"
            )
        self.field, self.mass, self.bottom = field, mass, landscape.bottom.value
        self.center, self.states = landscape.bottom.position[0], phase_space(field, mass)
        far = 30 * self._width(_energy_of(self.states, MOST + 1.0))
        self.kinks = kinks_of(field.formula, "x", self.center - far, self.center + far)
        self.energies = np.concatenate([self._solved(FEW + 2)[:FEW], self._solved(LEVELS)[FEW:]])
        self.lowest = float(self.energies[0])
        self.gap = float(self.energies[1]) - self.lowest

    def below(self, energy: float) -> float:
        """See `Direction`."""
        return float(self.states.volume(energy + self.lowest))

    def made(self, top: float, *, coarse: bool) -> Atoms:
        """See `OnAtoms`."""
        known, upto = some(self.energies[None, :], coarse=coarse), top + self.lowest
        walls, breaks = self._at_walls, self.states.breaks
        if self.kinks:
            e, w = faded(known[0], self._count, upto, breaks, walls)
        else:
            e, w = (x[0] for x in ladder(known, self._count, np.zeros(1), upto, breaks, walls[None, :]))
        return Atoms(e[1:] - self.lowest, w[1:])

    def _apart(self, kT: float) -> float:
        """With what kinks above the known levels may do to those that reach them."""
        high = self._at_kinks[self._at_kinks > SEEN * self.energies[-1]] - self.lowest
        if not high.size:
            return super()._apart(kT)
        e, w = self._as_far(kT, coarse=False)
        whole = 1 + float((np.exp(-np.minimum(e / kT, END)) * w).sum())
        turned = TURNED * float(np.exp(-np.minimum(high / kT, END)).sum())
        return super()._apart(kT) + turned / whole

    def refined(self, reach: float) -> bool:  # noqa: ARG002 - there is one row
        """See `OnAtoms`."""
        count = self.energies.size
        if count >= MOST:
            return False
        self.energies = np.concatenate([self.energies, self._solved(2 * count)[count:]])
        return True

    def _count(self, e: FloatArray) -> FloatArray:
        return np.asarray(self.states.volume(e.ravel())).reshape(e.shape)

    def _potential(self, x: FloatArray) -> FloatArray:
        values = np.broadcast_to(self.field.formula.evaluate({"x": x}), x.shape) - self.bottom
        return np.asarray(values, dtype=float)

    def _inside(self, x: float) -> bool:
        return all(float(np.ravel(wall.evaluate({"x": np.array([x])}))[0]) > 0 for wall in self.field.walls)

    def _solved(self, count: int) -> FloatArray:
        """The lowest levels, J from the bottom."""
        top = _energy_of(self.states, count + 1)
        low, high = (np.array([self._end(sign, top)]) for sign in (-1.0, 1.0))
        energies, error = converged(
            lambda x, _: self._potential(x), low, high, HBAR**2 / (2 * self.mass), count, kinks=self.kinks
        )
        if not error < GOOD:
            raise NoAnswerError(
                f"the levels of a direction have not converged (relative difference {error:.1e} of two grids): the "
                "potential varies on too many scales, or has too many kinks, for the spectral method"
            )
        self._known = max(self._known, error)
        return np.asarray(energies[0])

    def _end(self, sign: float, top: float) -> float:
        """Where a wave of energy `top` has died out in one direction, or the wall before."""
        step = self._width(top) / 400
        decayed = 0.0
        for start in range(0, 200_000, BLOCK):
            distance = step * np.arange(start, start + BLOCK + 1.0)
            excess = np.maximum(self._potential(self.center + sign * distance[1:]) - top, 0.0)
            sums = decayed + np.cumsum(step * np.sqrt(2 * self.mass * excess)) / HBAR
            stop = distance[1 + np.searchsorted(sums, DECAY)] if sums[-1] > DECAY else distance[-1]
            if not self._inside(self.center + sign * stop):
                return self._wall(sign, float(distance[0]), float(stop))
            if sums[-1] > DECAY:
                return self.center + sign * float(stop)
            decayed = float(sums[-1])
        raise NoAnswerError("no end was found of a direction: its potential rises too slowly")

    def _wall(self, sign: float, low: float, high: float) -> float:
        """Between two distances of which the second is beyond it."""
        for _ in range(200):
            middle = (low + high) / 2
            if middle in (low, high):
                break
            low, high = (middle, high) if self._inside(self.center + sign * middle) else (low, middle)
        return self.center + sign * high

    def _width(self, energy: float) -> float:
        """About that of an orbit, m."""
        return float(H * self.states.density(np.array([energy]))[0] / math.sqrt(2 * self.mass / energy))

    @cached_property
    def _at_kinks(self) -> FloatArray:
        """V at the kinks, J: the higher side of each."""
        beside = 1e-9 * self._width(self.gap) * np.array([[-1.0], [1.0]])
        return np.asarray(self._potential(np.array(self.kinks) + beside).max(axis=0))

    @cached_property
    def _at_walls(self) -> FloatArray:
        """V at the walls, J; as far as a thousand times the width of the known levels."""
        far = 1e3 * self._width(float(self.energies[-1]))
        walls = [self._wall(s, 0.0, far) for s in (-1.0, 1.0) if not self._inside(self.center + s * far)]
        return self._potential(np.array(walls)) if walls else np.empty(0)


def phase_space(field: Field, mass: float) -> Measure:
    """Phase-space volume over h below an energy from the bottom of a one-dimensional potential: the number of levels.

    p^2/2m < E holds 2 sqrt(2 m E)/h per metre.
    """
    momenta = Powers([(2 * (2 * mass) ** 0.5 / H, 0.5)])
    return convolve(momenta, measure_of(field))


def levels_on_line(field: Field, mass: float) -> Line:
    """All levels of a field of one coordinate, J from its bottom; NoAnswerError where they do not converge."""
    name = field.coordinates[0]
    as_x = {name: variable("x")}
    walls = tuple(wall.substitute(as_x) for wall in field.walls)
    return _levels(Field(("x",), field.formula.substitute(as_x), walls), mass)


_levels = lru_cache(maxsize=32)(Line)


def _energy_of(states: Measure, number: float) -> float:
    """The energy below which so many levels lie, by bisection of its logarithm."""
    low, high = -130.0, -20.0
    for _ in range(80):
        middle = (low + high) / 2
        low, high = (middle, high) if float(states.volume(np.exp(middle))) < number else (low, middle)
    return float(np.exp(high))
