"""Bose and Fermi gases over sums of powers: every sum is a Bose or Fermi function.

With Omega(E) = sum C E^k, M = C Gamma(k + 1) (kT)^k and G_s the function of order s (DLMF 25.12):
N = M G_k, U = kT k M G_{k+1}, Y = M G_{k+1}, S = M ((k + 1) G_{k+1} + alpha G_k), and since dG_s/dalpha = -G_{s-1},
B0 = M G_{k-1}, B1 = k M G_k + alpha B0, B2 = M (k (k + 1) G_{k+1} + 2 alpha k G_k) + alpha^2 B0.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np
from scipy.special import gamma

from eoscore.gas.bose_function import bose
from eoscore.gas.fermi_function import fermi
from eoscore.state.ensemble import EPS, Ensemble
from eoscore.state.sums import Sums

if TYPE_CHECKING:
    from collections.abc import Iterator

    from eoscore.measure.base import Measure
    from eoscore.state.reading import FloatArray

__all__ = ["ClosedBose", "ClosedFermi", "named", "scale_of", "weights_of"]


def weights_of(measure: Measure) -> tuple[tuple[float, float], ...]:
    """The terms of a sum of powers as (e, k) with C E^k = (E/e)^k, so that no power of a tiny energy is formed.

    A flat floor has k = 0 and e = C itself.
    """
    terms = measure.powers()
    if terms is None:
        raise ValueError(f"{measure!r} is no sum of powers")
    return tuple((c ** (-1 / k) if k else c, k) for c, k in terms)


def scale_of(e: float, k: float, kT: FloatArray) -> FloatArray:
    """M = Gamma(k + 1) (kT/e)^k."""
    return gamma(k + 1) * (kT / e) ** k if k else np.full_like(kT, e)


def named(way: str, measure: Measure) -> str:
    """A route: the way of the sums, and the route of the measure where that is another."""
    return way if measure.route == "closed form" else f"{way} ({measure.route})"


class _Closed(Ensemble):
    """What Bose and Fermi share: the sums above, with their own function."""

    def __init__(self, measure: Measure) -> None:
        self.measure = measure
        self.weights = weights_of(measure)
        self.exponent = measure.exponent
        self.route = named("closed form", measure)

    @property
    def error(self) -> float:
        """See `Ensemble.error`."""
        return self.measure.error + 40 * EPS * (1 + self.weights[-1][1])

    def _function(self, order: float, alpha: FloatArray) -> FloatArray:
        raise NotImplementedError

    def _parts(self, kT: FloatArray) -> Iterator[tuple[float, FloatArray]]:
        for e, k in self.weights:
            yield k, scale_of(e, k, kT)

    def number(self, alpha: FloatArray, kT: FloatArray) -> tuple[FloatArray, FloatArray]:
        """See `Ensemble.number`."""
        pairs = [(m * self._function(k, alpha), m * self._function(k - 1, alpha)) for k, m in self._parts(kT)]
        return sum((n for n, _ in pairs), np.zeros_like(kT)), sum((b for _, b in pairs), np.zeros_like(kT))

    def all_sums(self, alpha: FloatArray, kT: FloatArray) -> Sums:
        """See `Ensemble.all_sums`."""
        return _added([self._term(k, m, alpha, kT) for k, m in self._parts(kT)])

    def _term(self, k: float, m: FloatArray, alpha: FloatArray, kT: FloatArray) -> Sums:
        above, here, below = (m * self._function(order, alpha) for order in (k + 1, k, k - 1))
        with np.errstate(invalid="ignore"):
            lean = np.where(alpha == 0, 0.0, alpha * here)
            steep = np.where(alpha == 0, 0.0, alpha * below)
        return Sums(
            N=here,
            U=kT * k * above,
            S=(k + 1) * above + lean,
            Y=above,
            B0=below,
            B1=k * here + steep,
            B2=k * (k + 1) * above + 2 * k * lean + alpha * steep,
        )

    def below(self, number: FloatArray) -> FloatArray:
        """See `Ensemble.below`."""
        energies = [e * number ** (1 / k) for e, k in self.weights if k]
        return np.min(energies, axis=0) if energies else np.zeros_like(number)

    def boltzmann(self, kT: FloatArray) -> tuple[FloatArray, FloatArray]:
        """See `Ensemble.boltzmann`."""
        parts = [(k, scale_of(e, k, kT)) for e, k in self.weights]
        z = sum((m for _, m in parts), np.zeros_like(kT))
        return z, sum((k * m for k, m in parts), np.zeros_like(kT)) / z


class ClosedBose(_Closed):
    """Bosons over a sum of powers without top."""

    statistics = "bose"

    @property
    def condenses(self) -> bool:
        """See `Ensemble.condenses`."""
        return self.exponent > 1

    @property
    def why_not(self) -> str:
        """See `Ensemble.why_not`."""
        return diverges(self.exponent)

    def _function(self, order: float, alpha: FloatArray) -> FloatArray:
        return bose(order, alpha)

    def saturated(self, kT: FloatArray) -> FloatArray:
        """See `Ensemble.saturated`."""
        if not self.condenses:
            return np.full_like(kT, np.inf)
        return sum((m * float(bose(k, 0.0)) for k, m in self._parts(kT)), np.zeros_like(kT))

    def saturated_kT(self, number: FloatArray) -> FloatArray | None:
        """See `Ensemble.saturated_kT`."""
        if len(self.weights) > 1:
            return None
        ((e, k),) = self.weights
        return e * (number / (gamma(k + 1) * float(bose(k, 0.0)))) ** (1 / k)


class ClosedFermi(_Closed):
    """Fermions over a sum of powers without top, at alpha >= -20; S and the heat lose digits below."""

    statistics = "fermi"

    def _function(self, order: float, alpha: FloatArray) -> FloatArray:
        return fermi(order, -alpha)


def diverges(exponent: float) -> str:
    """The words where the number of excited bosons has no limit at mu -> 0."""
    return (
        f"no condensation: the states below E grow as E^a with a = {exponent:.6g}, and the excited number stays "
        "finite as mu reaches the bottom only for a > 1"
    )


def _added(parts: list[Sums]) -> Sums:
    total = parts[0]
    for part in parts[1:]:
        total = total + part
    return total
