"""Exact sums over oscillator levels, combined with what is left free.

A state has the energy n_1 q_1 + ... + n_j q_j + E with n_i = 0, 1, 2, ... quanta q_i in the directions held as
levels and E in the others, counted by the measure of the rest. One particle at inverse temperature b has the
partition function Z(b) = R(b) prod_i 1/(1 - e^{-b q_i}), R(b) = int e^{-bE} dOmega, and every statistics is a
sum of it at multiples of b (`eoscore.gas.multiples`), so no level is ever listed: kT may be 10^-3 or 10^6 quanta.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from eoscore.constants import K_B
from eoscore.errors import NoAnswerError
from eoscore.gas.multiples import fermi_rules, multiples_of
from eoscore.gas.rest import boltzmann_of

if TYPE_CHECKING:
    from collections.abc import Iterable

    from numpy.typing import ArrayLike, NDArray

    from eoscore.gas.multiples import Rule
    from eoscore.gas.rest import Boltzmann
    from eoscore.measure.base import FloatArray, Measure

__all__ = ["LevelMoments", "OscillatorLevels"]

BLOCK = 32  # states summed together: 32 x some hundred multiples stay in the cache


@dataclass(frozen=True)
class LevelMoments:
    """Sums over states of energy e with t = (e - mu)/kT and occupation f(t), all of the shape of mu and T.

    N = sum f; U = sum e f in J; S = the entropy in units of k_B; Y = -J/kT, J the grand potential; and with the
    weight w = -df/dt the moments B0 = sum w, B1 = sum w t, B2 = sum w t^2: dN/dmu = B0/kT, dN/dT = B1/T,
    dS/dT = B2/T. Relative accuracy 1e-13; a Fermi gas at large eta = mu/kT loses a factor eta in S and B1, eta^2
    in B2, because they are small differences there.
    """

    N: FloatArray
    U: FloatArray
    S: FloatArray
    Y: FloatArray
    B0: FloatArray
    B1: FloatArray
    B2: FloatArray


@dataclass(frozen=True)
class OscillatorLevels:
    """Oscillator quanta in J, the combined measure of everything else (degeneracy included), the statistics.

    Where every direction is held as levels, the rest is a flat floor: `Powers(((degeneracy, 0),))`. Energies and
    mu are counted from the lowest state.
    """

    quanta: tuple[float, ...]
    rest: Measure
    statistics: str

    def moments(self, mu: ArrayLike, T: ArrayLike) -> LevelMoments:
        """The sums over all states with at least one quantum in a held direction; mu in J, T in K, broadcast.

        The states without a quantum are those of the rest alone: the caller adds them as for any other measure,
        or leaves them out where they are the one lowest level in which a condensate sits. An error in T or mu
        is told in words (NoAnswerError): bosons need mu <= 0 and every gas T > 0.
        """
        mu, T = np.broadcast_arrays(np.asarray(mu, dtype=float), np.asarray(T, dtype=float))
        self._check(mu, T)
        kT, flat = K_B * T.ravel(), mu.ravel()
        step = 1 if self.statistics == "fermi" else BLOCK  # the line of a Fermi gas depends on mu/kT
        blocks = [self._block(flat[i : i + step], kT[i : i + step]) for i in range(0, flat.size, step)]
        sums = np.concatenate(blocks, axis=1) if blocks else np.zeros((7, 0))
        return LevelMoments(*(each.reshape(mu.shape) for each in sums))

    def _check(self, mu: FloatArray, T: FloatArray) -> None:
        if not np.all(T > 0):
            raise NoAnswerError("level sums were asked at T <= 0; they need a temperature above zero")
        if self.statistics == "bose" and np.any(mu > 0):
            raise NoAnswerError("mu came above the lowest level; a Bose gas has mu at or below it")

    def _block(self, mu: FloatArray, kT: FloatArray) -> FloatArray:
        """The seven sums, shape (7, points), of points that share their rules."""
        rest = boltzmann_of(self.rest, kT, mu)
        alpha = -mu / kT
        y, n, x, b0, x1, x2 = total = np.zeros((6, mu.size))
        for rule in self._rules(alpha, kT):
            beta = rule.at / kT[:, None]
            with np.errstate(under="ignore"):
                weight = rule.weight * np.exp(-rule.at * alpha[:, None])
                z0, z1, z2 = self._partition(beta, rest, kT[:, None])
                for row, (power, z) in enumerate(((-1, z0), (0, z0), (0, z1), (1, z0), (1, z1), (1, z2))):
                    total[row] += np.real((weight * rule.at**power * z).sum(axis=1))
        b1, b2 = x1 + alpha * b0, x2 + 2 * alpha * x1 + alpha**2 * b0
        return np.stack([n, kT * x, y + x + alpha * n, y, b0, b1, b2])

    def _rules(self, alpha: FloatArray, kT: FloatArray) -> Iterable[Rule]:
        if self.statistics == "fermi":
            return fermi_rules(-float(alpha[0]))
        return multiples_of(self.statistics, float(np.min(alpha + min(self.quanta) / kT)))

    def _partition(
        self, beta: NDArray[np.inexact], rest: Boltzmann, kT: FloatArray
    ) -> tuple[NDArray[np.inexact], ...]:
        """Z of the states with a quantum, -dZ/db / kT and d2Z/db2 / kT^2 at inverse energies b."""
        r0, r1, r2 = rest(beta)
        log_levels, mean, variance = 0.0 * beta, 0.0 * beta, 0.0 * beta
        for quantum in self.quanta:
            fading, lost = np.exp(-beta * quantum), -np.expm1(-beta * quantum)
            occupied = fading / lost
            # each form where it keeps its digits: many levels, or hardly one
            log_levels = log_levels - np.where(np.abs(fading) > 0.5, np.log(lost), np.log1p(-fading))
            mean = mean + quantum * occupied
            variance = variance + quantum**2 * occupied * (1 + occupied)
        excited = np.expm1(log_levels)
        b0 = excited + 1
        b1, b2 = b0 * mean, b0 * (mean**2 + variance)
        return (
            excited * r0,
            (b1 * r0 + excited * r1) / kT,
            (b2 * r0 + 2 * b1 * r1 + excited * r2) / kT**2,
        )
