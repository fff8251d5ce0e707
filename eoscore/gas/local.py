"""Local density and pressure of an ideal gas, from the measure of its momenta alone."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np
from scipy.special import expit

from eoscore.constants import K_B
from eoscore.errors import NoAnswerError
from eoscore.gas.rest import thermal_nodes

if TYPE_CHECKING:
    from collections.abc import Callable

    from numpy.typing import ArrayLike

    from eoscore.measure.base import FloatArray, Measure

__all__ = ["local_density", "local_pressure", "occupation"]


def occupation(y: FloatArray, statistics: str) -> FloatArray:
    """Mean number in a state at y = (e - mu)/kT."""
    if statistics == "classical":
        return np.exp(-y)
    return expit(-y) if statistics == "fermi" else 1 / np.expm1(y)


def _logarithm(y: FloatArray, statistics: str) -> FloatArray:
    """-J/kT of a state at y = (e - mu)/kT."""
    if statistics == "classical":
        return np.exp(-y)
    if statistics == "fermi":
        return np.logaddexp(0.0, -y)
    return -np.where(y > 0.5, np.log1p(-np.exp(-y)), np.log(-np.expm1(-y)))  # each where it keeps its digits


def local_density(measure: Measure, mu: ArrayLike, T: ArrayLike, statistics: str) -> FloatArray:
    """int f dOmega, in the unit of Omega; mu in J from the bottom, T in K, broadcast.

    Inf where it diverges (bosons at mu = 0 over a measure of exponent at most 1). NoAnswerError for bosons at
    mu > 0.
    """
    number = _summed(measure, mu, T, statistics, occupation)
    endless = (np.asarray(mu) == 0) & (statistics == "bose") & (measure.exponent <= 1)
    return np.where(endless, np.inf, number)


def local_pressure(measure: Measure, mu: ArrayLike, T: ArrayLike, statistics: str) -> FloatArray:
    """-+ kT int ln(1 -+ e^{-(E - mu)/kT}) dOmega, in J times the unit of Omega; mu, T as in `local_density`."""
    return K_B * np.asarray(T) * _summed(measure, mu, T, statistics, _logarithm)


def _summed(
    measure: Measure,
    mu: ArrayLike,
    T: ArrayLike,
    statistics: str,
    function: Callable[[FloatArray, str], FloatArray],
) -> FloatArray:
    mu, T = np.broadcast_arrays(np.asarray(mu, dtype=float), np.asarray(T, dtype=float))
    if statistics == "bose" and np.any(mu > 0):
        raise NoAnswerError("mu came above the least energy; a Bose gas has mu at or below it")
    total = np.empty(mu.size)
    for i, (level, kT) in enumerate(zip(mu.ravel(), K_B * T.ravel(), strict=True)):
        v, w = thermal_nodes(measure, float(kT), float(level))
        with np.errstate(under="ignore", over="ignore"):
            total[i] = w @ function((v - level) / kT, statistics)
    return total.reshape(mu.shape)
