"""The density averaged over the particles: int n^2 / int n."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.state.ensembles import ensemble_of

if TYPE_CHECKING:
    from eoscore.measure.base import Measure
    from eoscore.state.reading import FloatArray
    from eoscore.state.state import State

__all__ = ["mean_density"]

RULE = (
    2e-12  # relative error of the rule below: ln v takes the cone that n has at the bottom of a saturated gas
)


def mean_density(state: State) -> tuple[FloatArray, FloatArray]:
    """int n^2 dV / int n dV of the non-condensed gas in m^-d, and the bound of its error."""
    held, s = state.held, state.solution
    if held.position is None:
        sums = state.local_sums
        by_alpha, by_log = sums.slopes("N", s.alpha, s.kT)
        return sums.N, state.bound(held.model.whole.error, sums.N, by_alpha, by_log)
    some = np.flatnonzero(s.known)
    value = np.full(s.kT.shape, np.nan)
    value[some] = _over_place(state, held.position, s.alpha[some], s.kT[some])
    dalpha, dlog = state.doubt
    lean = dalpha * np.maximum(1.0, 1 / np.where(s.alpha > 0, s.alpha, 1.0)) + 2 * dlog
    return value, value * (held.model.whole.error + RULE + lean)


def _over_place(state: State, position: Measure, alpha: FloatArray, kT: FloatArray) -> FloatArray:
    """The two integrals over the nodes of the measure of V; below a top each node has its own."""
    rule = position.nodes(45.0 * float(kT.max()))
    k, foot = rule.foot.exponent, rule.foot
    v = np.append(foot.edge * k / (k + 1), rule.v)
    w = np.append(foot.volume, rule.w)
    momentum = state.held.momentum
    first, second = np.zeros((2, kT.size))
    local = state.held.model.local
    for energy, weight in zip(v, w, strict=True):
        if np.isfinite(state.held.top):
            local = ensemble_of(state.held.gas, momentum.cut(state.held.top - energy))
        if local is not None:
            n, _ = local.count(alpha + energy / kT, kT)
            first += weight * n
            second += weight * n * n
    return second / first
