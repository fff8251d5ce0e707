"""The sums over energies from which every number of a gas in equilibrium follows."""

from __future__ import annotations

from dataclasses import dataclass, fields
from typing import TYPE_CHECKING

import numpy as np

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from eoscore.state.reading import FloatArray

__all__ = ["Sums"]


@dataclass(frozen=True)
class Sums:
    """Sums over the states of energy E, with x = E/kT, t = x + alpha = (E - mu)/kT and the occupation f(t).

    N = sum f, U = sum E f in J, S = the entropy of the occupations in units of k_B, Y = -J/kT, and with the
    weight w = -df/dt the moments B0 = sum w, B1 = sum w t, B2 = sum w t^2. B is the matrix of second derivatives
    of the grand potential about mu, so no difference of large numbers is ever taken:
    dN/dmu = B0/kT, dN/dT = dS/dmu = B1/T (S in k_B: times k_B), dS/dT = B2/T. One array axis, all alike.
    """

    N: FloatArray
    U: FloatArray
    S: FloatArray
    Y: FloatArray
    B0: FloatArray
    B1: FloatArray
    B2: FloatArray

    def __add__(self, other: Sums) -> Sums:
        return Sums(*(getattr(self, f.name) + getattr(other, f.name) for f in fields(self)))

    def spread(self, where: NDArray[np.bool_]) -> Sums:
        """The sums put at the marked points of a longer array, nan elsewhere."""
        whole = np.full((len(fields(self)), where.size), np.nan)
        for row, f in zip(whole, fields(self), strict=True):
            row[where] = getattr(self, f.name)
        return Sums(*whole)

    def slopes(self, name: str, alpha: FloatArray, kT: FloatArray) -> tuple[FloatArray, FloatArray]:
        """d/dalpha at fixed T and d/dlnT at fixed alpha of N, U (J), S (k_B) or Y."""
        if name == "Y":
            return -self.N, self.U / kT
        a1 = _without_limit(self.B1, alpha, self.B0)
        if name == "N":
            return -self.B0, a1
        of_s = -self.B1, _without_limit(self.B2, alpha, self.B1)
        if name == "S":
            return of_s
        a2 = of_s[1] - np.where(alpha == 0, 0.0, alpha * a1)
        return -kT * a1, kT * a2

    def heat(self) -> tuple[FloatArray, FloatArray]:
        """Heat capacity in k_B at fixed N, and at fixed mu: B2 - B1^2/B0, and B2."""
        with np.errstate(invalid="ignore", divide="ignore"):
            return self.B2 - np.where(np.isinf(self.B0), 0.0, self.B1**2 / self.B0), self.B2


def _without_limit(b: FloatArray, alpha: FloatArray, lower: FloatArray) -> FloatArray:
    """b - alpha * lower, where alpha = 0 kills a lower moment that may be infinite."""
    with np.errstate(invalid="ignore"):
        return b - np.where(alpha == 0, 0.0, alpha * lower)
