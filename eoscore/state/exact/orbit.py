"""Classical radial motion in one well: turning points, action, period. Their quantum numbers count levels smoothly."""

from __future__ import annotations

from math import pi
from typing import TYPE_CHECKING

import numpy as np

from eoscore.constants import HBAR
from eoscore.measure.rules import legendre

if TYPE_CHECKING:
    from collections.abc import Callable

    from eoscore.state.reading import FloatArray

__all__ = ["Orbit"]

NODES = 96
BISECTIONS = 52


class Orbit:
    """Energies E (J) in a well V(r), r in m, that falls up to `center` and rises beyond it, up to a wall if finite.

    The wave of each level vanishes at the turning points, and at a wall: N(E) = 1/(pi hbar) int p dr.
    """

    breaks: tuple[float, ...] = ()

    def __init__(
        self, potential: Callable[[FloatArray], FloatArray], mass: float, center: float, wall: float
    ) -> None:
        self.potential, self.mass, self.center, self.wall = potential, mass, center, wall

    def turning(self, energy: FloatArray) -> tuple[FloatArray, FloatArray]:
        """The inner and the outer turning point; 0 and the wall where there is none."""
        inner = self._root(energy, np.zeros_like(energy), np.full_like(energy, self.center))
        far = np.full_like(energy, 2 * self.center if self.wall == np.inf else self.wall)
        while self.wall == np.inf and np.any(self.potential(far) < energy):
            far = far * 1.5
        return inner, self._root(energy, far, np.full_like(energy, self.center))

    def _root(self, energy: FloatArray, outside: FloatArray, inside: FloatArray) -> FloatArray:
        for _ in range(BISECTIONS):
            middle = (outside + inside) / 2
            above = self.potential(middle) > energy
            outside, inside = np.where(above, middle, outside), np.where(above, inside, middle)
        return inside

    def _rule(self, energy: FloatArray) -> tuple[FloatArray, FloatArray, FloatArray]:
        """r, dr and p of nodes between the turning points, as r = a + (b - a) (3 s^2 - 2 s^3): both roots smooth."""
        inner, outer = self.turning(energy)
        s, w = legendre(NODES)
        width = (outer - inner)[:, None]
        r = inner[:, None] + width * s**2 * (3 - 2 * s)
        dr = width * 6 * s * (1 - s) * w
        p = np.sqrt(np.maximum(2 * self.mass * (energy[:, None] - self.potential(r)), 0.0))
        return r, dr, p

    def volume(self, energy: FloatArray) -> FloatArray:
        """N(E)."""
        _, dr, p = self._rule(np.atleast_1d(np.asarray(energy, dtype=float)))
        return np.asarray((p * dr).sum(axis=1) / (pi * HBAR))

    def density(self, energy: FloatArray) -> FloatArray:
        """dN/dE in 1/J: the period over 2 pi hbar."""
        _, dr, p = self._rule(np.atleast_1d(np.asarray(energy, dtype=float)))
        with np.errstate(divide="ignore", invalid="ignore"):
            slow = np.where(p > 0, dr / p, 0.0)
        return np.asarray(self.mass * slow.sum(axis=1) / (pi * HBAR))
