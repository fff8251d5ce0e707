"""The levels of V(r) in space or V(rho) in a plane: one radial problem for each angular momentum."""

from __future__ import annotations

from math import inf
from typing import TYPE_CHECKING, NamedTuple

import numpy as np

from eoscore.constants import HBAR
from eoscore.errors import NoAnswerError
from eoscore.measure.kinks import kinks_of
from eoscore.measure.landscape import survey
from eoscore.state.ensemble import EPS
from eoscore.state.exact.angular import ALL, Plane, Space
from eoscore.state.exact.direction import END, REACH, Atoms, OnAtoms, some
from eoscore.state.exact.fading import SEEN, TURNED
from eoscore.state.exact.orbit import Orbits, Well
from eoscore.state.exact.spectral import converged
from eoscore.state.exact.tail import ladder

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from eoscore.formula.field import Field
    from eoscore.state.exact.angular import Momenta
    from eoscore.state.reading import FloatArray

__all__ = ["Radial", "radial_levels"]

LEVELS = 16  # found one by one for each angular momentum
MOST = 32  # where these do not do
DECAY = 10.0  # e-foldings of the wave beyond its turning points
GOOD = 1e-5
PANELS = 20
BESIDE = 1e-9  # relative, next to a kink


class Shells(NamedTuple):
    """Some angular momenta: their weights in a sum over all states, and their levels, J from the bottom."""

    weight: FloatArray
    orbits: Orbits
    energies: FloatArray


class Radial(OnAtoms):
    """Levels of V(r), or of V(rho) in its plane, for each angular momentum; solved as far as a temperature asks."""

    def __init__(self, field: Field, mass: float) -> None:
        landscape = survey(field)
        if not landscape.holds or landscape.bottom is None or landscape.depth < inf:
            raise NoAnswerError(
                "`levels exact` wants a trap that holds at every energy: a leaky one has no true levels"
            )
        super().__init__()
        (name,) = field.coordinates
        self.momenta: Momenta = Plane() if name == "rho" else Space()
        bottom, slope = landscape.bottom.value, field.formula.derivative(name)

        def potential(r: FloatArray) -> FloatArray:
            return np.asarray(np.broadcast_to(field.formula.evaluate({name: r}), np.shape(r)) - bottom)

        def rise(r: FloatArray) -> FloatArray:
            return np.asarray(np.broadcast_to(slope.evaluate({name: r}), np.shape(r)))

        self.rough = bool(kinks_of(field.formula, name, 0.0))

        def kinks(far: float) -> tuple[float, ...]:
            return kinks_of(field.formula, name, 0.0, far)

        self.well = Well(potential, rise, kinks, mass, _wall(field, landscape.bottom.position[0]))
        self.shells = [self._shell(0)]
        first = self.shells[0].energies
        self.lowest = float(first[0, 0])
        self.gap = float(min(first[0, 1], first[1, 0])) - self.lowest

    def below(self, energy: float) -> float:
        """See `Direction`."""
        return self.shells[0].orbits.take(slice(0, 1)).volume(energy + self.lowest, self.momenta.states)

    def refined(self, reach: float) -> bool:
        """See `OnAtoms`."""
        before = self.shells
        self.shells = [self._finer(panel, reach + self.lowest) for panel in range(len(before))]
        return any(new is not old for new, old in zip(self.shells, before, strict=True))

    def _finer(self, panel: int, reach: float) -> Shells:
        shells = self.shells[panel]
        count = shells.energies.shape[1]
        return self._shell(panel, 2 * count) if count < MOST and shells.energies[0, 0] < reach else shells

    def made(self, top: float, *, coarse: bool) -> Atoms:
        """See `OnAtoms`."""
        while self.shells[-1].energies[-1, 0] - self.lowest < top:
            if len(self.shells) > PANELS:
                raise NoAnswerError(
                    f"angular momenta beyond {ALL * 2**PANELS:.0e} count at this temperature, where sums over levels "
                    "end: V rises too slowly far out; lower T or N, or give the trap a wall (`where`)"
                )
            self.shells.append(self._shell(len(self.shells)))
        parts = [self._part(shells, top + self.lowest, coarse=coarse) for shells in self.shells]
        e, w = (np.concatenate([part[k] for part in parts]) for k in range(2))
        return Atoms(e[1:] - self.lowest, w[1:])  # the first one is the lowest level

    def _apart(self, kT: float) -> float:
        """With what kinks above the known levels may do to those that reach them; that turns from row to row."""
        squares = 0.0
        for shells in self.shells if self.rough else ():
            orbits, known = shells.orbits, shells.energies[:, -1] - shells.orbits.floor
            far = float(orbits.turning(shells.energies[:, -1:] + 2 * REACH * kT)[1].max())
            for r in self.well.kinks(far):
                height = self.well.turned(np.full_like(orbits.squared, r * (1 + BESIDE)), orbits.squared)
                unseen = (height - orbits.floor > SEEN * known) & (r > orbits.center)
                level = np.exp(-np.minimum((height - self.lowest) / kT, END)) * shells.weight
                squares += float((level[unseen] ** 2).sum())
        if not squares:
            return super()._apart(kT)
        e, w = self._as_far(kT, coarse=False)
        whole = 1 + float((np.exp(-np.minimum(e / kT, END)) * w).sum())
        return super()._apart(kT) + TURNED * float(np.sqrt(squares)) / whole

    def _part(self, shells: Shells, top: float, *, coarse: bool) -> tuple[FloatArray, FloatArray]:
        orbits, walls = shells.orbits, None
        if self.well.wall < inf:
            at_wall = np.full_like(orbits.squared, self.well.wall)
            walls = np.maximum(self.well.turned(at_wall, orbits.squared), orbits.floor)[:, None]
        e, w = ladder(some(shells.energies, coarse=coarse), orbits.count, orbits.floor, top, walls=walls)
        return e.ravel(), (w * shells.weight[:, None]).ravel()

    def _shell(self, panel: int, count: int = LEVELS) -> Shells:
        """The levels of the first angular momenta, or of those of a panel."""
        angular, weight = self.momenta.panel(panel)
        squared, smooth = self.momenta.squared(angular), self.momenta.smooth(angular)
        orbits = Orbits(self.well, smooth, self._centers(smooth))
        low, high = self._ends(orbits, _energies(orbits, float(count)))

        def turned(r: FloatArray, which: NDArray[np.intp]) -> FloatArray:
            return self.well.turned(r, squared[which, None]) - orbits.floor[which, None]

        kinetic, noise = HBAR**2 / (2 * self.well.mass), 16 * EPS * float(angular.max())
        kinks, planar = self.well.kinks(float(high.max())), self.momenta.planar
        energies, error = converged(
            turned, low, high, kinetic, count, planar=planar, noise=noise, kinks=kinks
        )
        if not error < GOOD:
            raise NoAnswerError(
                f"the levels of angular momentum {angular[0]:.0f} have not converged (relative difference {error:.1e} "
                "of two grids): the potential varies on too many scales, or has too many kinks, for the spectral method"
            )
        self._known = max(self._known, error)
        return Shells(weight, orbits, energies + orbits.floor[:, None])

    def _centers(self, squared: FloatArray) -> FloatArray:
        """Where each effective potential is least, to a part in a thousand: the turning points need no more."""
        well, far = self.well, self.well.wall
        if far == inf:
            far = (HBAR**2 / (2 * well.mass * 1e-30)) ** 0.5 * 1e-3
            most = 1e3 * HBAR**2 * (float(squared.max()) + 10) / well.mass
            while float(well.potential(np.array([far]))[0]) * far**2 < most:
                far *= 1.3
        r = far * np.geomspace(1e-5, 1, 12_000)[:-1]
        own = well.potential(r)
        return np.array([r[np.argmin(own + HBAR**2 * x / (2 * well.mass) / r**2)] for x in squared])

    def _ends(self, orbits: Orbits, top: FloatArray) -> tuple[FloatArray, FloatArray]:
        """Where waves of energy `top` have died out on both sides, or 0 and the wall."""
        inner, outer = orbits.turning(top[:, None])
        low = self._died(orbits, top, inner * np.linspace(1, 0, 400)[:-1])
        if self.well.wall < inf:
            return np.nan_to_num(low, nan=0.0), np.full_like(low, self.well.wall)
        high = self._died(orbits, top, outer * np.geomspace(1, 30, 4000))
        return np.nan_to_num(low, nan=0.0), np.where(np.isnan(high), 30 * outer[:, 0], high)

    def _died(self, orbits: Orbits, top: FloatArray, r: FloatArray) -> FloatArray:
        """The first of the radii (rows, any) beyond which the wave has died out; nan where it has on none."""
        excess = np.maximum(self.well.turned(r, orbits.squared[:, None]) - top[:, None], 0.0)
        step = np.sqrt(2 * self.well.mass * excess[:, 1:]) * np.abs(np.diff(r, axis=1))
        beyond = np.cumsum(step, axis=1) > DECAY * HBAR
        first = r[np.arange(top.size), 1 + np.argmax(beyond, axis=1)]
        return np.where(beyond.any(axis=1), first, np.nan)


def radial_levels(field: Field, mass: float) -> Radial:
    """All levels of V(r) or V(rho), J from its bottom. NoAnswerError where they do not converge."""
    return Radial(field, mass)


def _wall(field: Field, start: float) -> float:
    if not field.walls:
        return inf

    def inside(r: float) -> bool:
        point = {field.coordinates[0]: np.array([r])}
        return all(float(np.ravel(wall.evaluate(point))[0]) > 0 for wall in field.walls)

    low, high = max(start, 1e-12), max(start, 1e-12)
    while inside(high):
        low, high = high, 2 * high
        if high > 1e6:
            return inf
    for _ in range(200):
        middle = (low + high) / 2
        low, high = (middle, high) if inside(middle) else (low, middle)
    return high


def _energies(orbits: Orbits, number: float) -> FloatArray:
    """The energy of each row below which so many levels lie, to a percent and not below it."""
    row = 1.2 ** np.arange(48.0)
    step = (
        HBAR**2 / (orbits.well.mass * float(orbits.center.max()) ** 2) * np.tile(row, (orbits.floor.size, 1))
    )
    while True:
        counted = orbits.count(orbits.floor[:, None] + step)
        if np.all(counted[:, -1] >= number):
            break
        step = step * row[-1]
    logs = [np.interp(np.log(number), np.log(n), np.log(s)) for n, s in zip(counted, step, strict=True)]
    return np.asarray(orbits.floor + 1.005 * np.exp(np.array(logs)))
