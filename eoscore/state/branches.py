"""Particles together with their antiparticles: the conserved number is their difference."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.state.ensemble import EPS, Ensemble
from eoscore.state.sums import Sums

if TYPE_CHECKING:
    from eoscore.state.reading import FloatArray

__all__ = ["WithAntiparticles"]


class WithAntiparticles(Ensemble):
    """Two ensembles, the second of antiparticles with mu' = -mu - gap (J), which feel the same place.

    N is the difference of their numbers; U counts the gap for each antiparticle, so that dU = T dS + mu dN. N = 0
    lies at mu = -gap/2, where alpha ends.
    """

    def __init__(self, particles: Ensemble, antiparticles: Ensemble, gap: float) -> None:
        self.particles, self.antiparticles, self.gap = particles, antiparticles, gap
        self.statistics = particles.statistics
        self.route = f"{particles.route}, less antiparticles"
        self.top = particles.top
        self.highest = gap / 2

    @property
    def error(self) -> float:
        """See `Ensemble.error`."""
        return self.particles.error + self.antiparticles.error + 4 * EPS

    @property
    def condenses(self) -> bool:
        """See `Ensemble.condenses`."""
        return self.particles.condenses

    @property
    def why_not(self) -> str:
        """See `Ensemble.why_not`."""
        return self.particles.why_not

    def number(self, alpha: FloatArray, kT: FloatArray) -> tuple[FloatArray, FloatArray]:
        """See `Ensemble.number`."""
        n, b = self.particles.count(alpha, kT)
        n2, b2 = self.antiparticles.count(self.gap / kT - alpha, kT)
        return n - n2, b + b2

    def all_sums(self, alpha: FloatArray, kT: FloatArray) -> Sums:
        """See `Ensemble.all_sums`."""
        one = self.particles.sums(alpha, kT)
        two = self.antiparticles.sums(self.gap / kT - alpha, kT)
        charged = Sums(-two.N, two.U + self.gap * two.N, two.S, two.Y, two.B0, -two.B1, two.B2)
        return one + charged

    def below(self, number: FloatArray) -> FloatArray:
        """See `Ensemble.below`."""
        return self.particles.below(number)

    def boltzmann(self, kT: FloatArray) -> tuple[FloatArray, FloatArray]:
        """See `Ensemble.boltzmann`: of the particles, an upper bound of the difference."""
        return self.particles.boltzmann(kT)

    def alpha_of(self, number: FloatArray, kT: FloatArray) -> FloatArray | None:
        """See `Ensemble.alpha_of`: the classical gas alone is known, N = Z (e^-alpha - e^(alpha - gap/kT))."""
        if self.statistics != "classical":
            return None
        z, _ = self.particles.boltzmann(kT)
        half = self.gap / (2 * kT)
        with np.errstate(over="ignore"):
            return half - np.arcsinh(number / (2 * z) * np.exp(half))
