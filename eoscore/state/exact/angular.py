"""Angular momenta in three dimensions and in two: their barriers, and their sums."""

from __future__ import annotations

from math import pi
from typing import TYPE_CHECKING, Protocol

import numpy as np

from eoscore.measure.rules import legendre
from eoscore.state.exact.integers import joined

if TYPE_CHECKING:
    from eoscore.state.reading import FloatArray

__all__ = ["ALL", "Momenta", "Plane", "Space"]

ALL = 25  # angular momenta below are taken one by one; above, as an integral on panels that double
NODES = 8


class Momenta(Protocol):
    """planar: whether waves are those of a plane, f(r) e^(i m phi), and not u(r)/r Y_lm."""

    planar: bool

    def squared(self, angular: FloatArray) -> FloatArray:
        """The barrier that waves feel, hbar^2 squared/(2 m r^2)."""
        ...

    def smooth(self, angular: FloatArray) -> FloatArray:
        """The barrier with which a smooth count of levels is right near r = 0."""
        ...

    def panel(self, number: int) -> tuple[FloatArray, FloatArray]:
        """Angular momenta with weights of a sum over all states: the first ones, then panels of an integral."""
        ...

    def states(self, r: FloatArray, k: FloatArray) -> FloatArray:
        """States per m of radius below a wave number k (1/m), roughly: those of all directions."""
        ...


class Space:
    """l = 0, 1, 2, ..., each (2 l + 1)-fold."""

    planar = False

    def squared(self, angular: FloatArray) -> FloatArray:
        """See `Momenta`."""
        return angular * (angular + 1)

    def smooth(self, angular: FloatArray) -> FloatArray:
        """See `Momenta`: by R. E. Langer, Phys. Rev. 51, 669 (1937)."""
        return (angular + 0.5) ** 2

    def panel(self, number: int) -> tuple[FloatArray, FloatArray]:
        """See `Momenta`."""
        if number == 0:
            return np.arange(ALL + 0.0), (2 * np.arange(ALL) + 1.0) * joined(ALL)
        half, weight = _doubling(ALL - 0.5, number)  # l + 1/2
        return half - 0.5, weight * 2 * half

    def states(self, r: FloatArray, k: FloatArray) -> FloatArray:
        """See `Momenta`."""
        return 2 * r**2 * k**3 / (3 * pi)


class Plane:
    """m = 0, and each m = 1, 2, ... twice."""

    planar = True

    def squared(self, angular: FloatArray) -> FloatArray:
        """See `Momenta`."""
        return angular**2

    def smooth(self, angular: FloatArray) -> FloatArray:
        """See `Momenta`; not just 0, where there would be no inner turning point."""
        return np.maximum(angular**2, 1e-12)

    def panel(self, number: int) -> tuple[FloatArray, FloatArray]:
        """See `Momenta`."""
        if number == 0:
            weight = 2 * joined(ALL)
            weight[0] -= 1
            return np.arange(ALL + 0.0), weight
        angular, weight = _doubling(ALL - 1.0, number)
        return angular, 2 * weight

    def states(self, r: FloatArray, k: FloatArray) -> FloatArray:
        """See `Momenta`."""
        return r * k**2 / 2


def _doubling(start: float, number: int) -> tuple[FloatArray, FloatArray]:
    """Nodes and weights between `start` 2^(number - 1) and twice that."""
    x, w = legendre(NODES)
    low = start * 2.0 ** (number - 1)
    return low * (1 + x), low * w
