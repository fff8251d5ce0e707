"""Which part of a trap a picture shows: up to its escape energy, or as far as the cloud reaches."""

from __future__ import annotations

from dataclasses import dataclass
from math import inf
from typing import TYPE_CHECKING

import numpy as np

from eoscore.constants import K_B

if TYPE_CHECKING:
    from collections.abc import Iterator, Mapping

    from numpy.typing import ArrayLike, NDArray

    from eoscore.place import TrapPlace

__all__ = ["View", "views_of"]

_STEPS = np.geomspace(1e-9, 1.0, 400)  # m: from the size of a molecule to that of an apparatus
_HOT = 60.0  # in a trap that is deeper in kT the cloud is shown closely as well
_DEEPEST = 3000.0  # a trap that is deeper in kT is shown as far as the cloud reaches only
_REACH = 7.0  # kT up to which a cloud is shown
_BELOW = 0.999  # of the escape energy: the points of a picture may miss the ridge by so much
_RADIAL = ("rho", "r")


@dataclass(frozen=True)
class View:
    """The range of each coordinate in m, and the energy above the bottom in J up to which the picture goes."""

    trap: TrapPlace
    energy: float
    ranges: tuple[tuple[float, float], ...]

    def energies(self, positions: Mapping[str, ArrayLike]) -> NDArray[np.float64]:
        """V - V_min in J at positions by coordinate; nan behind walls."""
        return _energies(self.trap, positions)

    def at_bottom(self) -> dict[str, float]:
        """The bottom by coordinate."""
        return dict(zip(self.trap.field.coordinates, self.trap.r_min, strict=True))

    def inside(self) -> dict[str, float]:
        """The bottom by coordinate, moved off a wall on which it lies by next to nothing."""
        bottom = self.at_bottom()
        if all(float(wall.evaluate(bottom)) > 0 for wall in self.trap.field.walls):
            return bottom
        middle = {name: sum(ends) / 2 for name, ends in zip(bottom, self.ranges, strict=True)}
        return {name: x + 1e-10 * (middle[name] - x) for name, x in bottom.items()}

    def holds(self, values: NDArray[np.float64], at: tuple[int, ...]) -> NDArray[np.bool_]:
        """Where a cut or a map of V - V_min in J belongs to the trap, `at` being the place of the bottom in it.

        Stretches below the escape energy that run off the picture without the bottom lie beyond a pass.
        """
        if self.trap.top == inf:
            return np.isfinite(values)
        from scipy.ndimage import label

        names, _ = label(values < _BELOW * self.trap.top)
        ends = [np.take(names, (0, -1), axis=axis).ravel() for axis in range(names.ndim)]
        outside = np.setdiff1d(np.concatenate(ends), [names[at]])
        return np.asarray((names > 0) & ~np.isin(names, outside))

    def shows(self, position: tuple[float, ...]) -> bool:
        """Whether a point lies within the ranges."""
        return all(low <= x <= high for x, (low, high) in zip(position, self.ranges, strict=True))


def views_of(trap: TrapPlace, temperature: float | None) -> Iterator[View]:
    """The whole trap, and the cloud at a temperature in K where it is small in there; none without a length."""
    kT = None if temperature is None else K_B * temperature
    if kT is None or trap.top <= _DEEPEST * kT:
        yield from filter(None, [_view_up_to(trap, trap.top)])
    if kT is not None and trap.top > _HOT * kT:
        yield from filter(None, [_view_up_to(trap, _REACH * kT)])


def _view_up_to(trap: TrapPlace, energy: float) -> View | None:
    if energy == inf:
        far = dict(zip(trap.field.coordinates, trap.r_min, strict=True))
        far[trap.field.coordinates[0]] += 2e-5
        energy = float(_energies(trap, far))  # no temperature is known: what lies 20 um from the bottom
    if not np.isfinite(energy) or energy <= 0.0:
        return None
    reaches = [_reach(trap, place, 0.6 * energy) for place in range(len(trap.field.coordinates))]
    known = [reach for pair in reaches for reach in pair if reach is not None]
    if not known:
        return None
    ranges = []
    for name, at, (low, high) in zip(trap.field.coordinates, trap.r_min, reaches, strict=True):
        below, above = low or high or max(known), high or low or max(known)
        start = 0.0 if name in _RADIAL else at - 1.5 * below
        ranges.append((start, at + 1.5 * above))
    return View(trap, energy, tuple(ranges))


def _reach(trap: TrapPlace, place: int, energy: float) -> tuple[float | None, float | None]:
    """How far from the bottom, downwards and upwards, V first rises by an energy or a wall stands; None if never."""
    found: list[float | None] = []
    name = trap.field.coordinates[place]
    for sign in (-1.0, 1.0):
        positions: dict[str, ArrayLike] = dict(zip(trap.field.coordinates, trap.r_min, strict=True))
        positions[name] = trap.r_min[place] + sign * _STEPS
        values = _energies(trap, positions)
        beyond = np.flatnonzero(~(values < energy))
        found.append(float(_STEPS[beyond[0]]) if beyond.size else None)
    return found[0], found[1]


def _energies(trap: TrapPlace, positions: Mapping[str, ArrayLike]) -> NDArray[np.float64]:
    given = {name: np.asarray(x, dtype=float) for name, x in positions.items()}
    shape = np.broadcast_shapes(*(x.shape for x in given.values()))
    values = np.broadcast_to(np.asarray(trap.field.formula.evaluate(given)) - trap.v_min, shape).copy()
    bottom = dict(zip(trap.field.coordinates, trap.r_min, strict=True))
    for wall in trap.field.walls:
        edge = min(
            0.0, float(wall.evaluate(bottom))
        )  # the bottom may lie on a wall, and belongs to the picture
        values[~(np.broadcast_to(np.asarray(wall.evaluate(given)), shape) >= edge)] = np.nan
    return np.asarray(values)
