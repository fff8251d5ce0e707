"""A density of single-particle states given directly: by a formula, or by an exponent and a measured point."""

from __future__ import annotations

from math import gamma
from typing import TYPE_CHECKING

import numpy as np

from eoscore.constants import K_B
from eoscore.errors import NoAnswerError
from eoscore.formula.structure import scaling_powers, summands
from eoscore.measure import Measure, Powers, Sampled
from eoscore.place.base import Place

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from eoscore.formula import Formula

__all__ = ["StatesPlace", "anchored"]

DECADES = 10.0 ** np.arange(-60, -5.0, 0.5)  # J: all energies that a trapped gas may have
PANELS = 48  # halvings of the energy towards 0
ORDER = 16  # Gauss-Legendre nodes in each


class StatesPlace(Place):
    """rho(E) in 1/J, E from the lowest state: its measure is the number of states below E."""

    dimension = 0

    def __init__(self, name: str, measure: Measure) -> None:
        self.name, self._measure = name, measure

    @property
    def measure(self) -> Measure:
        """The number of states below E."""
        return self._measure

    @classmethod
    def of_density(cls, name: str, density: Formula) -> StatesPlace:
        """From rho(E), a formula of E. NoAnswerError where it is negative or not integrable at E = 0."""
        values = density.evaluate({"E": DECADES})
        if np.any(values < 0) or not np.any(values > 0):
            raise NoAnswerError(f"{name}: rho(E) must be positive, in 1/J")
        terms = [_power(term) for term in summands(density)]
        known = [term for term in terms if term is not None]
        slope = _slope(density)
        if slope[0] <= -1 + 1e-9:
            why = (
                f"{name}: rho(E) grows like E^{slope[0]:.4g} towards E = 0: the number of states is infinite"
            )
            raise NoAnswerError(why)
        if len(known) == len(terms) and all(coefficient > 0 for coefficient, _ in known):
            return cls(name, Powers([(c / (p + 1), p + 1) for c, p in known], route="powers of E"))
        return cls(name, _summed(density, slope))


def anchored(name: str, exponent: float, number: float, temperature: float) -> StatesPlace:
    """Number of states below E: A E^a / a, with N_c = A Gamma(a) zeta(a) (k T)^a at the measured point.

    temperature in K. NoAnswerError for exponents up to 1, which have no N_c.
    """
    if exponent <= 1:
        why = f"{name}: with the exponent {exponent:.6g} (up to 1) there is no condensation, and so no N_c"
        raise NoAnswerError(why)
    from scipy.special import zeta

    scale = number / (gamma(exponent + 1) * float(zeta(exponent)) * (K_B * temperature) ** exponent)
    return StatesPlace(name, Powers(((scale, exponent),), route="power of E through a measured point"))


def _power(term: Formula) -> tuple[float, float] | None:
    """(A, p) where the term is A E^p."""
    if term.op == "constant":
        return term.value, 0.0
    found = scaling_powers(term, ("E",))
    if found is None or not found["E"]:
        return None
    power = float(1 / found["E"])
    at = 1e-30
    return float(term.evaluate({"E": at})) / at**power, power


def _slope(density: Formula) -> NDArray[np.float64]:
    """d ln rho / d ln E at the decades."""
    with np.errstate(all="ignore"):
        slope = DECADES * density.derivative("E").evaluate({"E": DECADES}) / density.evaluate({"E": DECADES})
    return slope[np.isfinite(slope)]


def _summed(density: Formula, slope: NDArray[np.float64]) -> Measure:
    """The number of states by Gauss-Legendre panels that halve towards E = 0."""
    nodes, weights = np.polynomial.legendre.leggauss(ORDER)
    edges = 2.0 ** -np.arange(PANELS + 1.0)
    u = (edges[1:, None] + (edges[:-1] - edges[1:])[:, None] * (nodes + 1) / 2).ravel()
    w = ((edges[:-1] - edges[1:])[:, None] * weights / 2).ravel()
    power = float(slope[0]) + 1

    def number(energies: NDArray[np.float64]) -> NDArray[np.float64]:
        rho = density.evaluate({"E": energies[:, None] * u})
        rest = density.evaluate({"E": energies * edges[-1]}) * edges[-1] / power
        return np.asarray(energies * (rho @ w + rest))

    bent = np.flatnonzero(np.abs(slope - slope[0]) > 0.01)
    scale = float(DECADES[bent[0]]) if bent.size else 1e-30
    return Sampled(number, power, scale=scale, error=1e-13, route="quadrature of rho(E)")
