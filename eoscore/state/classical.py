"""The classical gas: every sum from Z = sum e^{-E/kT} and its first two moments."""

from __future__ import annotations

from math import inf
from typing import TYPE_CHECKING

import numpy as np
from scipy.special import gammainc

from eoscore.state.closed import named, scale_of, weights_of
from eoscore.state.ensemble import EPS
from eoscore.state.nodes import OverNodes
from eoscore.state.sums import Sums

if TYPE_CHECKING:
    from eoscore.measure.base import Measure, Nodes
    from eoscore.state.reading import FloatArray

__all__ = ["Classical"]


class Classical(OverNodes):
    """A classical gas over any measure; sums of powers in closed form, below a top as incomplete Gamma functions.

    Z_j = sum e^{-x} x^j of Omega = C E^k is M (k)_j P(k + j, top/kT), with M of `eoscore.state.closed`.
    """

    statistics = "classical"

    def __init__(self, measure: Measure) -> None:
        super().__init__(measure)
        self.weights = weights_of(measure) if measure.powers() is not None else None
        if self.weights is not None:
            kind = "closed form" if measure.top == inf else "closed form up to the escape energy"
            self.route = named(kind, measure)

    def _moments(self, kT: FloatArray) -> tuple[FloatArray, FloatArray, FloatArray]:
        if self.weights is None:
            first, second, third = self._over(_moments, np.zeros_like(kT), kT)
            return first, second, third
        z0, z1, z2 = np.zeros_like(kT), np.zeros_like(kT), np.zeros_like(kT)
        for e, k in self.weights:
            m = scale_of(e, k, kT)
            z0 += m * _regular(k, self.top / kT)
            z1 += m * k * _regular(k + 1, self.top / kT)
            z2 += m * k * (k + 1) * _regular(k + 2, self.top / kT)
        return z0, z1, z2

    def all_sums(self, alpha: FloatArray, kT: FloatArray) -> Sums:
        """See `Ensemble.all_sums`."""
        with np.errstate(over="ignore", under="ignore"):
            n, a1, a2 = (np.exp(-alpha) * z for z in self._moments(kT))
        b1 = a1 + alpha * n
        return Sums(N=n, U=kT * a1, S=n + b1, Y=n, B0=n, B1=b1, B2=a2 + 2 * alpha * a1 + alpha**2 * n)

    def alpha_of(self, number: FloatArray, kT: FloatArray) -> FloatArray | None:
        """See `Ensemble.alpha_of`."""
        with np.errstate(divide="ignore"):
            return np.log(self._moments(kT)[0] / number)

    def boltzmann(self, kT: FloatArray) -> tuple[FloatArray, FloatArray]:
        """See `Ensemble.boltzmann`."""
        z0, z1, _ = self._moments(kT)
        return z0, z1 / z0

    @property
    def error(self) -> float:
        """See `Ensemble.error`."""
        return self.measure.error + 500 * EPS


def _regular(k: float, x: FloatArray) -> FloatArray:
    return np.asarray(gammainc(k, x), dtype=float) if k else np.ones_like(x)


def _moments(_: FloatArray, kT: FloatArray, rule: Nodes) -> tuple[FloatArray, ...]:
    x = rule.v / kT[:, None]
    weight = rule.w * np.exp(-x)
    k, mass, edge = rule.foot.exponent, rule.foot.volume, rule.foot.edge / kT
    lever = mass * edge * k
    second = mass * edge**2 * k
    return (
        weight.sum(axis=1) + mass - lever / (k + 1),
        (weight * x).sum(axis=1) + lever / (k + 1),
        (weight * x * x).sum(axis=1) + second / (k + 2),
    )
