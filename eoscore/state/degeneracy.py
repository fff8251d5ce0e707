"""alpha = -mu/kT of a gas with N particles at T."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.state.root import rising_root

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from eoscore.state.ensemble import Counter, Ensemble
    from eoscore.state.reading import FloatArray

__all__ = ["alpha_of_number"]

LEAST = -700.0  # ln alpha of the least alpha told from 0


def alpha_of_number(ensemble: Ensemble, number: FloatArray, kT: FloatArray) -> FloatArray:
    """alpha where N(alpha, kT) = number; number > 0 must be below saturation, or below the capacity of fermions."""
    known = ensemble.alpha_of(number, kT)
    if known is not None:
        return known
    if ensemble.statistics == "fermi":
        return _of_fermions(ensemble, number, kT)
    alpha = np.empty_like(kT)
    for part, count in ensemble.counters(kT):
        alpha[part] = _of_bosons(ensemble, number[part], kT[part], count)
    return alpha


def _of_bosons(ensemble: Ensemble, number: FloatArray, kT: FloatArray, count: Counter) -> FloatArray:
    """Far from saturation ln N against s = ln(e^alpha - 1): a straight line for one level, concave for others.

    Since N <= Z e^-s with the classical Z, s = ln(Z/N) lies above the root, and Newton's method comes down from it.
    Close to saturation ln(N_c - N) against ln alpha, which is nearly straight there.
    """
    full = ensemble.saturated(kT)
    z, mean = ensemble.boltzmann(kT)
    last = ensemble.largest_alpha(kT)
    near = number > 0.6 * full
    alpha = np.empty_like(kT)
    far = np.flatnonzero(~near)
    bounded = np.isfinite(ensemble.highest)

    def from_one_level(s: FloatArray, which: NDArray[np.intp]) -> tuple[FloatArray, FloatArray]:
        here = far[which]
        a = np.logaddexp(0.0, s)
        n, b = count(a, here)
        lean = b * -np.expm1(-a)
        wanted = number[here]
        with np.errstate(divide="ignore", invalid="ignore"):
            if bounded:  # N has a zero where alpha ends, and ln N a pole there
                return 2 * (wanted - n) / (wanted + np.abs(n)), 4 * wanted * lean / (wanted + np.abs(n)) ** 2
            return np.log(wanted / n), lean / n

    start = _second_order(number[far] / z[far], mean[far])
    top = np.minimum(np.maximum(np.log(z[far] / number[far]), 0.0) + 2.0, _s_of(last[far]))
    s = rising_root(from_one_level, np.full(far.shape, LEAST), top, np.minimum(start, top))
    alpha[far] = np.logaddexp(0.0, s)
    close = np.flatnonzero(near)

    def from_saturation(log: FloatArray, which: NDArray[np.intp]) -> tuple[FloatArray, FloatArray]:
        here = close[which]
        a = np.exp(log)
        n, b = count(a, here)
        gap = np.maximum(full[here] - n, 1e-17 * full[here])
        return np.log(gap / np.maximum(full[here] - number[here], 1e-300 + 0 * a)), a * b / gap

    begin = np.log(np.maximum(1 - number[close] / full[close], 1e-300))
    high = np.log(np.minimum(last[close], 700.0))
    log = rising_root(from_saturation, np.full(close.shape, LEAST), high, np.minimum(begin, high))
    alpha[close] = np.where(number[close] < full[close], np.exp(log), 0.0)
    return alpha


def _second_order(ratio: FloatArray, mean: FloatArray) -> FloatArray:
    """s from N/Z = z + c z^2 + ..., c = 2^-(E/kT) as for a pure power."""
    c = 2.0**-mean
    z = np.minimum(2 * ratio / (1 + np.sqrt(1 + 4 * c * ratio)), 0.97)
    return np.asarray(np.log1p(-z) - np.log(z))


def _s_of(alpha: FloatArray) -> FloatArray:
    """ln(e^alpha - 1) without overflow."""
    with np.errstate(divide="ignore", over="ignore"):
        return np.where(alpha > 30, alpha, np.log(np.expm1(np.minimum(alpha, 30))))


def _of_fermions(ensemble: Ensemble, number: FloatArray, kT: FloatArray) -> FloatArray:
    """ln N against ln ln(1 + e^eta), eta = mu/kT: slope 1 in the thin gas, the exponent in the degenerate one.

    Beyond half filling below a top, the same for the empty states seen from the top.
    """
    holes = number > ensemble.capacity / 2
    top = ensemble.top if np.isfinite(ensemble.top) else 0.0
    sign = np.where(holes, -1.0, 1.0)
    away = np.where(holes, top / kT, 0.0)  # eta = away + sign * y
    wanted = np.where(holes, ensemble.capacity - number, number) if np.any(holes) else number

    def work(u: FloatArray, which: NDArray[np.intp]) -> tuple[FloatArray, FloatArray]:
        g = np.exp(u)
        y = np.where(g > 30, g, np.log(np.expm1(np.minimum(g, 30.0))))
        n, b = ensemble.count(-(away[which] + sign[which] * y), kT[which])
        some = np.where(holes[which], ensemble.capacity - n, n) if np.any(holes) else n
        with np.errstate(divide="ignore", invalid="ignore"):
            ratio = np.log(np.maximum(some, 1e-300) / wanted[which])
            return ratio, b / some * g / -np.expm1(-g)

    energy = ensemble.below(wanted)
    z, _ = ensemble.boltzmann(kT)
    thin = np.log(np.log1p(wanted / z))
    with np.errstate(divide="ignore"):
        start = np.where(wanted > z, np.log(np.maximum(energy / kT, 1.0)), thin)
    u = rising_root(work, np.minimum(start, thin) - 20.0, np.maximum(start, np.log(800.0)) + 5.0, start)
    g = np.exp(u)
    return np.asarray(-(away + sign * np.where(g > 30, g, np.log(np.expm1(np.minimum(g, 30.0))))))
