"""A gas as physics sees it: statistics, spin states, mass, and how one particle's energy depends on momentum."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from eoscore.constants import K_B
from eoscore.errors import NoAnswerError
from eoscore.gas.inline import Inline
from eoscore.measure.powers import Powers

if TYPE_CHECKING:
    from numpy.typing import ArrayLike

    from eoscore.gas.dispersion import Branch, Dispersion
    from eoscore.language.facts import GasFacts
    from eoscore.measure.base import FloatArray, Measure

__all__ = ["Gas", "gas_of"]


@dataclass(frozen=True)
class Gas:
    """One kind of particle. Mass in kg, scattering length a_s in m; None where it has none."""

    name: str
    statistics: str
    degeneracy: float
    mass: float | None
    a_s: float | None
    dispersion: Dispersion
    treatment: str | None = None

    def __post_init__(self) -> None:
        if not self.degeneracy > 0:
            raise NoAnswerError(
                f"degeneracy = {self.degeneracy:g} came; a gas has a positive number of spin states"
            )

    @property
    def branches(self) -> tuple[Branch, ...]:
        """Particles, and antiparticles where the dispersion has them."""
        return self.dispersion.branches

    @property
    def quanta(self) -> tuple[float, ...]:
        """hbar omega in J of each direction that is held as oscillator levels."""
        return self.dispersion.quanta

    def momentum_measure(self, d: int) -> Measure:
        """States per m^d of place below an energy (J, from the least), all spin states counted.

        With d = 0, where every direction is held as levels, it is the flat floor of one state per spin state.
        NoAnswerError where the energy does not fit d dimensions, or has infinitely many states below some energy.
        """
        if d == 0 and self.quanta:
            return Powers(((self.degeneracy, 0.0),), route="levels")
        left = 3 - len(self.quanta)
        if not 1 <= d <= left:
            held = f"{self.name} holds {len(self.quanta)} directions as levels, which leaves {left}"
            raise NoAnswerError(
                f"{held}; the place has {d} coordinates: change the levels or the coordinates"
            )
        measure = self.dispersion.measure(d)
        return measure if self.degeneracy == 1 else measure.scaled(self.degeneracy)

    def thermal_wavelength(self, T: ArrayLike, d: int) -> FloatArray:
        """(h^d / int d^dp e^{-E/kT})^{1/d} in m, of the shape of T in K; h/sqrt(2 pi m kT) for a free particle."""
        if d == 0:
            raise NoAnswerError("every direction is held as levels: there is no thermal wavelength")
        T = np.asarray(T, dtype=float)
        return self.dispersion.partition(1 / (K_B * T), d) ** (-1 / d)

    def local_density(self, mu: ArrayLike, T: ArrayLike, d: int) -> FloatArray:
        """Conserved particles per m^d at mu (J, from the least energy) and T (K), broadcast."""
        total = np.zeros(())
        for branch in self.branches:
            own = branch.charge * np.asarray(mu, dtype=float) - branch.gap
            total = total + branch.charge * self.dispersion.local_density(own, T, d, self.statistics)
        return self.degeneracy * total

    def local_pressure(self, mu: ArrayLike, T: ArrayLike, d: int) -> FloatArray:
        """Pressure in J/m^d at mu (J, from the least energy) and T (K), broadcast."""
        total = np.zeros(())
        for branch in self.branches:
            own = branch.charge * np.asarray(mu, dtype=float) - branch.gap
            total = total + self.dispersion.local_pressure(own, T, d, self.statistics)
        return self.degeneracy * total


def gas_of(facts: GasFacts) -> Gas:
    """The gas that a file declares; NoAnswerError where a value makes no sense, PluginError for a bad plugin."""
    return Gas(
        name=facts.name,
        statistics=facts.statistics,
        degeneracy=facts.degeneracy,
        mass=facts.mass,
        a_s=facts.a_s,
        dispersion=_dispersion_of(facts),
        treatment=facts.treatment,
    )


def _dispersion_of(facts: GasFacts) -> Dispersion:
    if facts.energy is not None:
        return Inline(facts.mass, facts.energy)
    from eoscore.gas.registry import dispersion

    return dispersion(facts.dispersion)(facts.mass, facts.parameters)
