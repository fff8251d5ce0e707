"""A direction with periodic ends."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from eoscore.state.exact.direction import Sums

if TYPE_CHECKING:
    from numpy.typing import NDArray

__all__ = ["Ring"]

TERMS = 7  # of each sum


@dataclass(frozen=True)
class Ring:
    """gap n^2, n = 0, +-1, +-2, ...: gap = (2 pi hbar/L)^2/2m in J."""

    gap: float
    lowest: float = 0.0

    def error_at(self, kT: float) -> float:  # noqa: ARG002 - none of it comes from the temperature
        """See `Direction`."""
        return 1e-14

    def below(self, energy: float) -> float:
        """See `Direction`."""
        return float(2 * np.sqrt(energy / self.gap))

    def sums(self, beta: NDArray[np.inexact], kT: float) -> Sums:  # noqa: ARG002
        """See `Direction`: one by one where few count, else by Poisson's sum (DLMF 20.7.32)."""
        x = np.asarray(beta) * self.gap
        few = np.abs(x) > np.pi
        z = np.where(few, _one_by_one(np.where(few, x, np.pi)), _dual(np.where(few, np.pi, x)))
        return Sums(z[0], z[1] * self.gap, z[2] * self.gap**2)


def _one_by_one(x: NDArray[np.inexact]) -> NDArray[np.inexact]:
    """2 sum e^(-x n^2) with its derivatives by -x."""
    e = np.arange(1, TERMS) ** 2.0
    with np.errstate(under="ignore"):
        fading = 2 * np.exp(-x[..., None] * e)
    return np.stack([fading @ e**k for k in range(3)])


def _dual(x: NDArray[np.inexact]) -> NDArray[np.inexact]:
    """The same as sqrt(pi/x) sum e^(-pi^2 k^2/x) - 1 over all k."""
    c = np.pi**2 * np.arange(TERMS) ** 2.0
    y = x[..., None]
    with np.errstate(under="ignore"):
        term = np.where(c > 0, 2.0, 1.0) * np.sqrt(np.pi / y) * np.exp(-c / y)
    slope = -1 / (2 * y) + c / y**2
    bend = slope**2 + 1 / (2 * y**2) - 2 * c / y**3
    return np.stack([term.sum(axis=-1) - 1, -(term * slope).sum(axis=-1), (term * bend).sum(axis=-1)])
