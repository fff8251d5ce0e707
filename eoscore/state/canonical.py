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
from eoscore.state.exact.direction import Oscillator

if TYPE_CHECKING:
    from eoscore.state.held import HeldGas
    from eoscore.state.reading import FloatArray

__all__ = ["MOST", "CondensateStatistics", "chances", "condensate_statistics", "levels_of", "logarithms"]

MOST = 20_000  # particles; the time grows as their square
LARGE = 1e100  # weights above are scaled down; what is 1e-400 of them counts as nothing


class CondensateStatistics(NamedTuple):
    """mean and variance of N_0, and the probability of each n = 0 ... N."""

    mean: float
    variance: float
    probability: FloatArray


def condensate_statistics(held: HeldGas, N: int, T: float) -> CondensateStatistics:
    """N ideal bosons at T (K) in a place with `levels exact`, or on the levels of their dispersion.

    NoAnswerError where the levels are not known one by one, or there are more than `MOST` particles.
    """
    if not 1 <= N <= MOST or int(N) != N:
        raise NoAnswerError(f"N came as {N:g}; a fixed number is counted from 1 to {MOST}")
    if not T > 0:
        raise NoAnswerError(f"T came as {T:g} K; it must be above zero")
    probability = chances(logarithms(levels_of(held), int(N), K_B * T))
    n = np.arange(N + 1.0)
    mean = float(probability @ n)
    return CondensateStatistics(mean, float(probability @ (n - mean) ** 2), probability)


def levels_of(held: HeldGas) -> ExactLevels:
    """The levels over which a fixed number is spread; NoAnswerError where they are not known one by one."""
    gas = held.gas
    if gas.statistics == "bose" and gas.degeneracy == 1:
        if held.place is None:
            return ExactLevels(tuple(Oscillator(each) for each in gas.quanta), "bose", 1.0)
        whole = held.model.whole if held.place.levels == "exact" else None
        if isinstance(whole, ExactLevels):
            return whole
    raise NoAnswerError(
        "the statistics of a condensate want bosons of one spin state on known levels: add `levels exact`"
    )


def logarithms(levels: ExactLevels, count: int, kT: float) -> FloatArray:
    """ln Z_M of M = 0 ... `count` particles on the excited levels, less the largest."""
    single = np.asarray(np.real(levels.partition(np.arange(1.0, count + 1) / kT, kT).z0), dtype=np.float64)
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


def chances(logs: FloatArray) -> FloatArray:
    """The probability of each n = 0 ... N in the lowest level, from ln Z_M, M = 0 ... N."""
    excited = np.exp(logs - logs.max())
    return np.asarray((excited / excited.sum())[::-1])
