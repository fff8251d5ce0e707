"""The levels of a one-dimensional potential."""

from __future__ import annotations

import math
from functools import lru_cache
from math import inf
from typing import TYPE_CHECKING

import numpy as np

from eoscore.constants import HBAR, H
from eoscore.errors import NoAnswerError
from eoscore.formula import variable
from eoscore.formula.field import Field
from eoscore.measure import Powers, convolve, measure_of
from eoscore.measure.landscape import survey
from eoscore.state.exact.direction import Known
from eoscore.state.exact.spectral import eigenvalues

if TYPE_CHECKING:
    from collections.abc import Callable

    from eoscore.measure import Measure
    from eoscore.state.reading import FloatArray

__all__ = ["levels_on_line", "phase_space"]

LEVELS = 160  # found one by one
FEW = 20  # found on a grid of their own, since the rounding of a matrix grows as the fourth power of its size
DECAY = 22.0  # e-foldings of the wave beyond the turning points of the highest of them
POINTS = 2.1  # per level, and some more for the forbidden region
MORE = 1.25  # points of the second grid, whose difference tells the error
GOOD = 1e-5  # relative error of a level that is too much


def phase_space(field: Field, mass: float) -> Measure:
    """Phase-space volume over h below an energy from the bottom of a one-dimensional potential: the number of levels.

    p^2/2m < E holds 2 sqrt(2 m E)/h per metre.
    """
    momenta = Powers([(2 * (2 * mass) ** 0.5 / H, 0.5)])
    return convolve(momenta, measure_of(field))


def levels_on_line(field: Field, mass: float) -> Known:
    """All levels of a field of one coordinate, J from its bottom; NoAnswerError where they do not converge."""
    name = field.coordinates[0]
    as_x = {name: variable("x")}
    walls = tuple(wall.substitute(as_x) for wall in field.walls)
    return _levels(Field(("x",), field.formula.substitute(as_x), walls), mass)


@lru_cache(maxsize=32)
def _levels(field: Field, mass: float) -> Known:
    landscape = survey(field)
    if not landscape.holds or landscape.bottom is None or landscape.depth < inf:
        raise NoAnswerError(
            "`levels exact` wants a trap that holds at every energy: a leaky one has no true levels"
        )
    states = phase_space(field, mass)
    name = field.coordinates[0]
    bottom, center = landscape.bottom.value, landscape.bottom.position[0]

    def potential(x: FloatArray) -> FloatArray:
        values = np.broadcast_to(field.formula.evaluate({name: x}), x.shape) - bottom
        return np.asarray(values, dtype=float)

    def inside(x: float) -> bool:
        return all(float(np.ravel(wall.evaluate({name: np.array([x])}))[0]) > 0 for wall in field.walls)

    def stage(count: int) -> tuple[FloatArray, float]:
        top = _energy_of(states, count + 2)
        density = float(states.density(np.array([top]))[0])
        low, high = (_end(potential, inside, center, sign, top, mass, density) for sign in (-1.0, 1.0))
        return _solved(potential, (low, high), mass, count)

    (few, close), (many, far) = stage(FEW + 2), stage(LEVELS)
    energies = np.concatenate([few[:FEW], many[FEW:]])
    lowest = float(energies[0])
    return Known(energies - lowest, lowest, states, close + far + 1e-13 + _mismatch(energies, states))


def _solved(
    potential: Callable[[FloatArray], FloatArray], ends: tuple[float, float], mass: float, count: int
) -> tuple[FloatArray, float]:
    """The lowest levels between two ends by two grids, and how far these are apart."""
    points = int(POINTS * count) + 60
    first, second = (
        eigenvalues(potential, *ends, HBAR**2 / (2 * mass), count, n) for n in (points, int(MORE * points))
    )
    error = float(np.max(np.abs(first - second) / (np.gradient(second) + second)))
    if error > GOOD:
        raise NoAnswerError(
            f"the levels of a direction have not converged (relative difference {error:.1e} of two grids): the "
            "potential is too rough for the spectral method; round off its kinks and jumps"
        )
    return second, error


def _mismatch(energies: FloatArray, states: Measure) -> float:
    """How much of a level n(E) = N(E) + constant still wins or loses between the half and the end of the known ones."""
    half = energies.size // 2
    numbers = states.volume(energies) - np.arange(energies.size)
    return float(abs(numbers[-1] - numbers[half])) / energies.size


def _energy_of(states: Measure, number: float) -> float:
    """The energy below which so many levels lie, by bisection of its logarithm."""
    low, high = -130.0, -20.0
    for _ in range(80):
        middle = (low + high) / 2
        low, high = (middle, high) if float(states.volume(np.exp(middle))) < number else (low, middle)
    return float(np.exp(high))


def _end(
    potential: Callable[[FloatArray], FloatArray],
    inside: Callable[[float], bool],
    center: float,
    sign: float,
    top: float,
    mass: float,
    density: float,
) -> float:
    """Where a wave of energy `top` has died out in one direction, or the wall before."""
    step = H * density / math.sqrt(2 * mass / top) / 400  # a small part of the width of the orbit
    distance, decayed = 0.0, 0.0
    for _ in range(200_000):
        following = distance + step
        if not inside(center + sign * following):
            return _wall(inside, center, sign, distance, following)
        excess = float(potential(np.array([center + sign * following]))[0]) - top
        decayed += step * math.sqrt(2 * mass * max(excess, 0.0)) / HBAR
        distance = following
        if decayed > DECAY:
            return center + sign * distance
    raise NoAnswerError("no end was found of a direction: its potential rises too slowly")


def _wall(inside: Callable[[float], bool], center: float, sign: float, low: float, high: float) -> float:
    for _ in range(200):
        middle = (low + high) / 2
        if middle in (low, high):
            break
        low, high = (middle, high) if inside(center + sign * middle) else (low, middle)
    return center + sign * high
