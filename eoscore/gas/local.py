"""Local density and pressure of an ideal gas, from the measure of its momenta alone."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np
from scipy.special import expit, gamma

from eoscore.constants import K_B
from eoscore.errors import NoAnswerError
from eoscore.gas.bose_function import bose
from eoscore.gas.fermi_function import fermi
from eoscore.gas.rest import thermal_nodes

if TYPE_CHECKING:
    from collections.abc import Callable

    from numpy.typing import ArrayLike

    from eoscore.measure.base import FloatArray, Measure

__all__ = ["local_density", "local_pressure", "occupation"]

BLOCK = 256  # states summed at a time


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
    mu, kT = _states(mu, T, statistics)
    terms = measure.powers()
    if terms is not None and measure.top == np.inf:
        return _of_powers(terms, mu, kT, statistics, 0)
    number = _of_nodes(measure, mu, kT, statistics, occupation)
    return np.where((mu == 0) & (statistics == "bose") & (measure.exponent <= 1), np.inf, number)


def local_pressure(measure: Measure, mu: ArrayLike, T: ArrayLike, statistics: str) -> FloatArray:
    """-+ kT int ln(1 -+ e^{-(E - mu)/kT}) dOmega, in J times the unit of Omega; mu, T as in `local_density`."""
    mu, kT = _states(mu, T, statistics)
    terms = measure.powers()
    if terms is not None and measure.top == np.inf:
        return kT * _of_powers(terms, mu, kT, statistics, 1)
    return kT * _of_nodes(measure, mu, kT, statistics, _logarithm)


def _states(mu: ArrayLike, T: ArrayLike, statistics: str) -> tuple[FloatArray, FloatArray]:
    mu, kT = np.broadcast_arrays(np.asarray(mu, dtype=float), K_B * np.asarray(T, dtype=float))
    if statistics == "bose" and np.any(mu > 0):
        raise NoAnswerError("mu came above the least energy; a Bose gas has mu at or below it")
    return mu, kT


def _of_powers(
    terms: tuple[tuple[float, float], ...], mu: FloatArray, kT: FloatArray, statistics: str, step: int
) -> FloatArray:
    """Sum of C Gamma(k + 1) (kT)^k Li_{k + step}(z), or its Fermi or classical fellow (DLMF 25.12.11, 25.12.14)."""
    eta, total = mu / kT, np.zeros(mu.shape)
    for c, k in terms:
        if statistics == "classical":
            function = np.exp(eta)
        else:
            function = bose(k + step, -eta) if statistics == "bose" else fermi(k + step, eta)
        total = total + c * gamma(k + 1) * kT**k * function
    return total


def _of_nodes(
    measure: Measure,
    mu: FloatArray,
    kT: FloatArray,
    statistics: str,
    function: Callable[[FloatArray, str], FloatArray],
) -> FloatArray:
    flat, heat, total = mu.ravel(), kT.ravel(), np.empty(mu.size)
    stepped = (flat > 0) & (statistics == "fermi")
    groups = [
        np.flatnonzero(~stepped),
        *np.flatnonzero(stepped)[:, None],
    ]  # each Fermi step has its own panels
    for at in groups:
        if at.size == 0:
            continue
        v, w = thermal_nodes(measure, heat[at], flat[at] if stepped[at[0]] else np.zeros(at.size))
        for some in np.array_split(at, 1 + at.size // BLOCK):
            with np.errstate(under="ignore", over="ignore", divide="ignore"):
                total[some] = function((v - flat[some, None]) / heat[some, None], statistics) @ w
    return total.reshape(mu.shape)
