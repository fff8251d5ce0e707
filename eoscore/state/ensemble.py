"""The grand-canonical ensemble of one gas over one measure: what the evaluators have in common."""

from __future__ import annotations

from abc import ABC, abstractmethod
from math import inf
from typing import TYPE_CHECKING

import numpy as np

from eoscore.state.sums import Sums

if TYPE_CHECKING:
    from collections.abc import Callable, Iterator

    from numpy.typing import NDArray

    from eoscore.state.reading import FloatArray

__all__ = ["BLOCK", "EPS", "Ensemble"]

if TYPE_CHECKING:
    Counter = Callable[[FloatArray, NDArray[np.intp]], tuple[FloatArray, FloatArray]]

EPS = float(np.finfo(float).eps)
BLOCK = 125_000  # numbers held at a time by the evaluators that sum over nodes: the allocator keeps arrays of 1 MB


class Ensemble(ABC):
    """Sums over a spectrum at alpha = -mu/kT and kT (J): arrays of one axis, of the same length.

    Laws: N and U fall with alpha, B0 = -dN/dalpha, and the true relative error of every sum is at most `error`.
    Bosons are asked at alpha >= 0 alone, and at alpha = 0 for N, S, U, Y where `condenses` holds.
    """

    statistics: str
    route: str
    top: float = inf
    capacity: float = inf  # the most that N can be
    highest: float = inf  # alpha ends here (a gas with antiparticles holds N = 0 there at zero temperature)

    @property
    @abstractmethod
    def error(self) -> float:
        """Bound of the relative error of every sum, at every kT asked so far."""

    def error_at(self, kT: FloatArray) -> FloatArray:
        """The same at each kT (J) alone: energies that the gas hardly reaches count little."""
        return np.full(kT.shape, self.error)

    @property
    def condenses(self) -> bool:
        """Whether N stays finite as mu reaches the lowest level, for bosons."""
        return False

    @property
    def why_not(self) -> str:
        """The words where the gas does not condense."""
        return f"{self.statistics} particles do not condense"

    @abstractmethod
    def all_sums(self, alpha: FloatArray, kT: FloatArray) -> Sums:
        """All sums, of finite alpha and kT > 0."""

    def number(self, alpha: FloatArray, kT: FloatArray) -> tuple[FloatArray, FloatArray]:
        """N and -dN/dalpha, where an evaluator knows a cheaper way than all sums; finite alpha and kT > 0."""
        sums = self.all_sums(alpha, kT)
        return sums.N, sums.B0

    def sums(self, alpha: FloatArray, kT: FloatArray) -> Sums:
        """All sums; nan where alpha or kT is."""
        some = np.isfinite(alpha) & (kT > 0)
        if some.all() and some.size:
            return self.all_sums(alpha, kT)
        if not some.any():
            return Sums(*np.full((7, kT.size), np.nan))
        return self.all_sums(alpha[some], kT[some]).spread(some)

    def count(self, alpha: FloatArray, kT: FloatArray) -> tuple[FloatArray, FloatArray]:
        """N and -dN/dalpha; nan where alpha or kT is."""
        some = np.isfinite(alpha) & (kT > 0)
        if some.all() and some.size:
            return self.number(alpha, kT)
        whole = np.full((2, kT.size), np.nan)
        if some.any():
            whole[:, some] = self.number(alpha[some], kT[some])
        return whole[0], whole[1]

    @abstractmethod
    def below(self, number: FloatArray) -> FloatArray:
        """The energy (J) below which `number` states lie, roughly: where a search for a temperature starts."""

    def counters(self, kT: FloatArray) -> Iterator[tuple[NDArray[np.intp], Counter]]:
        """Blocks of the states, each with N and -dN/dalpha as a function of (alpha, some of the block's indices)."""
        yield np.arange(kT.size), lambda alpha, which: self.count(alpha, kT[which])

    def saturated(self, kT: FloatArray) -> FloatArray:
        """N at alpha = 0; inf where the gas does not condense."""
        if not self.condenses:
            return np.full_like(kT, np.inf)
        return self.count(np.zeros_like(kT), kT)[0]

    def alpha_of(self, number: FloatArray, kT: FloatArray) -> FloatArray | None:
        """alpha at N in closed form, N = Z e^-alpha for a classical gas; None where it has to be searched."""
        return np.log(self.boltzmann(kT)[0] / number) if self.statistics == "classical" else None

    def saturated_kT(self, number: FloatArray) -> FloatArray | None:  # noqa: ARG002 - a default
        """kT at which N(alpha = 0) = number in closed form; None where it has to be searched."""
        return None

    def largest_alpha(self, kT: FloatArray) -> FloatArray:
        """Where alpha ends at each kT."""
        return self.highest / kT

    @abstractmethod
    def boltzmann(self, kT: FloatArray) -> tuple[FloatArray, FloatArray]:
        """Z = sum e^{-E/kT} over the spectrum, and the mean of E/kT."""
