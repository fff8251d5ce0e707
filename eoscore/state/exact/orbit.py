"""Classical radial motion in wells: turning points and action, which count levels smoothly."""

from __future__ import annotations

from itertools import pairwise
from math import pi
from typing import TYPE_CHECKING

import numpy as np

from eoscore.constants import HBAR
from eoscore.measure.rules import legendre
from eoscore.state.root import rising_root

if TYPE_CHECKING:
    from collections.abc import Callable

    from numpy.typing import NDArray

    from eoscore.state.reading import FloatArray

__all__ = ["Orbits", "Well"]

NODES = 64


class Well:
    """V(r) with its slope, J from the bottom at r in m; its kinks up to an r, and a wall (m; inf if there is none)."""

    def __init__(
        self,
        potential: Callable[[FloatArray], FloatArray],
        slope: Callable[[FloatArray], FloatArray],
        kinks: Callable[[float], tuple[float, ...]],
        mass: float,
        wall: float,
    ) -> None:
        self.potential, self.slope, self.kinks, self.mass, self.wall = potential, slope, kinks, mass, wall

    def turned(self, r: FloatArray, squared: FloatArray) -> FloatArray:
        """V + hbar^2 squared/(2 m r^2)."""
        with np.errstate(divide="ignore", over="ignore", invalid="ignore"):
            return np.asarray(self.potential(r) + HBAR**2 * squared / (2 * self.mass) / r**2)


class Orbits:
    """Orbits of angular momenta hbar sqrt(squared), (rows,), about `center`, (rows,), where each well is least.

    N(E) = 1/(pi hbar) int p dr between the turning points, or up to the wall.
    """

    def __init__(self, well: Well, squared: FloatArray, center: FloatArray) -> None:
        self.well, self.squared, self.center = well, squared, center
        self.floor = well.turned(center, squared)

    def take(self, rows: slice) -> Orbits:
        """Some of the rows."""
        return Orbits(self.well, self.squared[rows], self.center[rows])

    def count(self, energy: FloatArray) -> FloatArray:
        """N(E) of (rows, any) energies, J."""
        inner, outer = self.turning(energy)
        edges = [inner, *(np.clip(k, inner, outer) for k in self.well.kinks(float(outer.max()))), outer]
        return sum((self._action(energy, *ends) for ends in pairwise(edges)), np.zeros_like(energy))

    def _action(self, energy: FloatArray, inner: FloatArray, outer: FloatArray) -> FloatArray:
        """The part of N(E) between two radii."""
        s, w = legendre(NODES)
        width = (outer - inner)[..., None]
        r = inner[..., None] + width * s**2 * (3 - 2 * s)  # both roots of p become smooth
        left = energy[..., None] - self.well.turned(r, self.squared[:, None, None])
        p = np.sqrt(2 * self.well.mass * np.maximum(left, 0.0))
        return np.asarray((p * (6 * s * (1 - s) * w)).sum(axis=-1) * (outer - inner) / (pi * HBAR))

    def volume(self, energy: float, states: Callable[[FloatArray, FloatArray], FloatArray]) -> float:
        """int states(r, p/hbar) dr of the first row at one energy, J: those of all angular momenta, roughly."""
        inner, outer = (float(r[0, 0]) for r in self.turning(np.array([[energy]])))
        s, w = legendre(NODES)
        r = inner + (outer - inner) * s
        left = np.maximum(energy - self.well.potential(r), 0.0)
        p = np.sqrt(2 * self.well.mass * left) / HBAR
        return float((outer - inner) * (w * states(r, p)).sum())

    def turning(self, energy: FloatArray) -> tuple[FloatArray, FloatArray]:
        """The inner and the outer turning point, m; the wall where it comes first."""
        center = np.broadcast_to(self.center[:, None], energy.shape)
        squared = np.broadcast_to(self.squared[:, None], energy.shape)
        least = HBAR * np.sqrt(squared / (2 * self.well.mass * energy))  # V itself is not below 0
        inner = self._root(energy, squared, np.minimum(least, center), center, least, -1.0)
        far = self._far(float(energy.max()))
        outer = self._root(energy, squared, center, np.full_like(center, far), center * 1.5, 1.0)
        return inner, outer

    def _far(self, energy: float) -> float:
        """A radius beyond the outer turning point."""
        if self.well.wall < np.inf:
            return self.well.wall
        far = 2 * float(self.center.max())
        while float(self.well.potential(np.array([far]))[0]) < energy:
            far *= 1.5
        return far

    def _root(
        self,
        energy: FloatArray,
        squared: FloatArray,
        low: FloatArray,
        high: FloatArray,
        start: FloatArray,
        sign: float,
    ) -> FloatArray:
        """r between low and high at which the well is as high as the energy, on a side where it rises with sign r."""
        goal, turn = energy.ravel(), squared.ravel()

        def work(x: FloatArray, which: NDArray[np.intp]) -> tuple[FloatArray, FloatArray]:
            r = np.exp(sign * x)
            push = HBAR**2 * turn[which] / self.well.mass / r**2
            rise = self.well.potential(r) + push / 2 - goal[which]
            return rise, np.maximum(sign * (self.well.slope(r) * r - push), 0.0)

        ends = (np.log(low).ravel() * sign, np.log(high).ravel() * sign)
        x = rising_root(work, np.minimum(*ends), np.maximum(*ends), np.log(start).ravel() * sign)
        return np.asarray(np.exp(sign * x).reshape(energy.shape))
