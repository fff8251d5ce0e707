"""A condensate of exactly N particles: mean, variance and distribution of its number, by recursion.

With the lowest level at energy 0, the chance that M of N ideal bosons are excited is Z_M over the sum of all Z_M up to
N, Z_M = (1/M) sum_k Z_1(k b) Z_(M-k) the partition function of M particles on the excited levels alone (P. T.
Landsberg, Thermodynamics, 1961; C. Weiss, M. Wilkens, Opt. Express 1, 272 (1997); both from memory).
"""

from __future__ import annotations

from typing import TYPE_CHECKING, NamedTuple

import numpy as np

from eoscore.constants import K_B
from eoscore.errors import NoAnswerError
from eoscore.state.exact import ExactLevels

if TYPE_CHECKING:
    from eoscore.state.held import HeldGas
    from eoscore.state.reading import FloatArray

__all__ = ["MOST", "CondensateStatistics", "condensate_statistics"]

MOST = 20_000  # particles; the time grows as their square
LARGE = 1e100  # weights above are scaled down; what is 1e-400 of them counts as nothing


class CondensateStatistics(NamedTuple):
    """mean and variance of N_0, and the probability of each n = 0 ... N."""

    mean: float
    variance: float
    probability: FloatArray


def condensate_statistics(held: HeldGas, N: int, T: float) -> CondensateStatistics:
    """N ideal bosons at T (K) in a place with `levels exact`.

    NoAnswerError where the levels are not known one by one, or there are more than `MOST` particles.
    """
    if not 1 <= N <= MOST or int(N) != N:
        raise NoAnswerError(f"N came as {N:g}; a fixed number is counted from 1 to {MOST}")
    if not T > 0:
        raise NoAnswerError(f"T came as {T:g} K; it must be above zero")
    excited = np.exp(_logarithms(_partition(held, int(N), K_B * T)))
    probability = (excited / excited.sum())[::-1]
    n = np.arange(N + 1.0)
    mean = float(probability @ n)
    return CondensateStatistics(mean, float(probability @ (n - mean) ** 2), probability)


def _partition(held: HeldGas, count: int, kT: float) -> FloatArray:
    """Z_1(k/kT) of the excited levels, k = 1 ... count."""
    whole = held.model.whole
    if held.gas.statistics != "bose" or held.gas.degeneracy != 1 or not isinstance(whole, ExactLevels):
        raise NoAnswerError(
            "the statistics of a condensate want bosons of one spin state on known levels: add `levels exact`"
        )
    return np.asarray(np.real(whole.partition(np.arange(1.0, count + 1) / kT, kT).z0), dtype=np.float64)


def _logarithms(single: FloatArray) -> FloatArray:
    """ln Z_M, M = 0 ... N, less its largest value."""
    count = single.size
    weights, logs = np.zeros(count + 1), np.zeros(count + 1)
    weights[0], scaled = 1.0, 0.0
    backwards = single[::-1]
    for m in range(1, count + 1):
        weights[m] = backwards[count - m :] @ weights[:m] / m
        with np.errstate(divide="ignore"):
            logs[m] = np.log(weights[m]) + scaled
        if weights[m] > LARGE:
            scaled += np.log(weights[m])
            weights[: m + 1] /= weights[m]
    return np.asarray(logs - logs.max(), dtype=np.float64)
