"""The partition function of a measure, R(b) = int e^{-bE} dOmega, at real and complex inverse energies."""

from __future__ import annotations

from itertools import pairwise
from typing import TYPE_CHECKING, Protocol

import numpy as np
from numpy.typing import NDArray
from scipy.special import gamma

from eoscore.measure.rules import graded

if TYPE_CHECKING:
    from eoscore.measure.base import FloatArray, Measure, Nodes

__all__ = ["Boltzmann", "boltzmann_of", "thermal_nodes"]

Triple = tuple[NDArray[np.inexact], NDArray[np.inexact], NDArray[np.inexact]]
DIGITS = 42.0  # e^-42 = 6e-19 is dropped


class Boltzmann(Protocol):
    """R, -dR/db and d2R/db2 at inverse energies b in 1/J with positive real part, any shape."""

    def __call__(self, beta: NDArray[np.inexact], /) -> Triple:
        """The three, each of the shape of beta."""
        ...


def boltzmann_of(measure: Measure, kT: FloatArray, mu: FloatArray) -> Boltzmann:
    """R of a measure: closed for untruncated sums of powers, else a sum over nodes.

    The nodes serve states at energies kT and chemical potentials mu (J, 1D arrays).
    """
    terms = measure.powers()
    if terms is not None and measure.top == np.inf:
        return lambda beta: _of_powers(terms, beta)
    v, w = thermal_nodes(measure, kT, mu)
    return lambda beta: _of_atoms(v, w, beta)


def thermal_nodes(measure: Measure, kT: FloatArray, mu: FloatArray) -> tuple[FloatArray, FloatArray]:
    """Energies from 0 and weights for sums of occupations: as far as states at kT and mu (J, 1D) are occupied.

    Above mu = 0, where the occupation is a step, no panel is wider than 2 kT.
    """
    upto = float(np.max(np.maximum(mu, 0.0) + DIGITS * kT))
    return _stepped(measure, float(kT.min()), upto) if np.any(mu > 0) else _atoms(measure.nodes(upto))


def _of_powers(terms: tuple[tuple[float, float], ...], beta: NDArray[np.inexact]) -> Triple:
    """int e^{-bE} d(C E^k) = C Gamma(k + 1) b^-k (DLMF 5.2.1)."""
    parts = [(k, c * gamma(k + 1) * beta**-k) for c, k in terms]
    zero = 0.0 * beta
    return (
        sum((part for _, part in parts), zero),
        sum((k * part / beta for k, part in parts), zero),
        sum((k * (k + 1) * part / beta**2 for k, part in parts), zero),
    )


def _atoms(nodes: Nodes) -> tuple[FloatArray, FloatArray]:
    """The nodes with the foot as atoms: one at 0 for a flat floor, else graded towards 0 once more."""
    foot = nodes.foot
    if foot.exponent == 0:
        return np.append(0.0, nodes.v), np.append(foot.volume, nodes.w)
    t, weight = graded(foot.exponent)
    below = foot.volume * foot.exponent * weight * t ** (foot.exponent - 1)
    return np.append(foot.edge * t, nodes.v), np.append(below, nodes.w)


def _stepped(measure: Measure, kT: float, upto: float) -> tuple[FloatArray, FloatArray]:
    """Atoms up to kT, then panels of at most 2 kT; at a break v runs as a fourth power of the variable."""
    v, w = _atoms(measure.nodes(min(kT, upto)))
    end = min(upto, measure.top)
    edges = [kT, *(b for b in measure.breaks if kT < b < end), end]
    x, weight = np.polynomial.legendre.leggauss(16)
    for lo, hi in pairwise(edges):
        count = max(1, int(np.ceil(1.1 * (hi - lo) / kT)))
        t = ((np.arange(count)[:, None] + (1 + x) / 2) / count).ravel()
        at = lo + (hi - lo) * t**4 * (35 - 84 * t + 70 * t**2 - 20 * t**3)
        slope = (hi - lo) * 140 * (t * (1 - t)) ** 3
        v = np.append(v, at)
        w = np.append(w, np.tile(weight / 2 / count, count) * slope * measure.density(at))
    return v, w


def _of_atoms(v: FloatArray, w: FloatArray, beta: NDArray[np.inexact]) -> Triple:
    fading = np.exp(-beta[..., None] * v)
    return fading @ w, fading @ (w * v), fading @ (w * v * v)
