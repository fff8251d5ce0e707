"""Integrals of the local density over the place."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np
from scipy.special import roots_jacobi

from eoscore.state.ensembles import ensemble_of
from eoscore.state.rule import smooth_rule

if TYPE_CHECKING:
    from collections.abc import Callable

    from eoscore.measure import Foot
    from eoscore.state.held import HeldGas
    from eoscore.state.reading import FloatArray
    from eoscore.state.state import State

__all__ = ["RULE", "mean_density", "over_place"]

RULE = (
    2e-12  # relative error of the rule below: ln v takes the cone that n has at the bottom of a saturated gas
)


def mean_density(state: State) -> tuple[FloatArray, FloatArray]:
    """int n^2 dV / int n dV of the non-condensed gas in m^-d, and the bound of its error."""
    held, s = state.held, state.solution
    if held.position is None:
        sums = state.local_sums
        by_alpha, by_log = sums.slopes("N", s.alpha, s.kT)
        return sums.N, state.bound(held.model.whole.error_at(s.kT), sums.N, by_alpha, by_log)
    some = np.flatnonzero(s.known)
    value = np.full(s.kT.shape, np.nan)
    first, second = over_place(held, s.alpha[some], s.kT[some], lambda n, _: (n, n * n))
    value[some] = second / first
    dalpha, dlog = state.doubt
    lean = dalpha * np.maximum(1.0, 1 / np.where(s.alpha > 0, s.alpha, 1.0)) + 2 * dlog
    return value, value * (held.model.whole.error_at(s.kT) + RULE + lean)


def over_place(
    held: HeldGas,
    alpha: FloatArray,
    kT: FloatArray,
    functions: Callable[[FloatArray, FloatArray], tuple[FloatArray, ...]],
) -> tuple[FloatArray, ...]:
    """Integrals over the place of functions of the local density n and of -dn/dalpha, for a gas in a potential.

    Over the nodes of the measure of V; below an escape energy the momenta of each node have their own top.
    """
    if held.position is None or not kT.size:
        return functions(np.zeros_like(kT), np.zeros_like(kT))
    if not np.isfinite(kT).any():  # no state, no density
        return functions(kT, kT)
    hottest = float(np.nanmax(kT))
    rule = smooth_rule(held.position.eased(hottest), float(np.nanmin(kT)), hottest)
    low, mass = _in_foot(rule.foot)
    energies, weights = np.concatenate([low, rule.v]), np.concatenate([mass, rule.w])
    local = held.model.local
    total: tuple[FloatArray, ...] = ()
    for v, w in zip(energies, weights, strict=True):
        if np.isfinite(held.top):
            local = ensemble_of(held.gas, held.momentum.cut(held.top - v))
        if local is None:
            break
        parts = functions(*local.count(alpha + v / kT, kT))
        total = tuple(t + w * p for t, p in zip(total or (0.0,) * len(parts), parts, strict=True))
    return total


def _in_foot(foot: Foot) -> tuple[FloatArray, FloatArray]:
    """Nodes in the foot for functions of sqrt(v), as the density of a saturated gas is."""
    if foot.exponent == 0:
        return np.zeros(1), np.array([foot.volume])
    x, w = roots_jacobi(6, 0.0, 2 * foot.exponent - 1)
    return foot.edge * ((1 + x) / 2) ** 2, foot.volume * w / w.sum()
