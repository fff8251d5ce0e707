"""The local quantities, at the bottom of the place."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.errors import NoAnswerError
from eoscore.state.ensemble import EPS
from eoscore.state.reading import Reason

if TYPE_CHECKING:
    from eoscore.state.ensemble import Ensemble
    from eoscore.state.reading import FloatArray, Reading
    from eoscore.state.state import State

__all__ = ["compressibility", "peak_density", "phase_space_density", "pressure", "wavelength"]


def local_of(state: State) -> Ensemble:
    """The ensemble at the bottom; NoAnswerError where the place has no coordinates."""
    local = state.held.model.local
    if local is None:
        raise NoAnswerError(state.held.why_not_local)
    return local


def peak_density(state: State, unit: str) -> Reading:
    """n_peak in m^-d of the non-condensed gas; held momenta only below an escape energy."""
    return _density(state, "n_peak", unit)


def phase_space_density(state: State, unit: str) -> Reading:
    """n_peak lambda_T^d."""
    return _density(state, "PSD", unit)


def _density(state: State, name: str, unit: str) -> Reading:
    local, s, model = local_of(state), state.solution, state.held.model
    endless = model.bosons & (s.alpha == 0) & (not local.condenses)
    value, by_alpha, by_log = model.value(name, s.alpha, s.kT)
    reason = Reason(
        f"the density at the bottom has no limit at mu = 0 ({local.why_not})", _shaped(state, endless)
    )
    return state.read(value, state.bound(local.error, value, by_alpha, by_log), unit, local.route, [reason])


def _shaped(
    state: State, where: FloatArray | np.bool_ | bool
) -> np.ndarray[tuple[int, ...], np.dtype[np.bool_]]:
    return np.broadcast_to(where, state.solution.kT.shape).reshape(state.shape)


def pressure(state: State, unit: str) -> Reading:
    """Pressure in J/m^d, which a condensate of the ideal gas does not change."""
    local, s = local_of(state), state.solution
    sums = state.local_sums
    value = s.kT * sums.Y
    error = state.bound(local.error, value, -s.kT * sums.N, value + sums.U)
    return state.read(value, error, unit, local.route)


def compressibility(state: State, unit: str) -> Reading:
    """kappa_T = (dn/dmu)/n^2 in m^d/J."""
    local, s = local_of(state), state.solution

    def kappa(alpha: FloatArray, kT: FloatArray) -> FloatArray:
        sums = local.sums(alpha, kT)
        return sums.B0 / (kT * sums.N**2)

    value, error = state.numeric_bound(2 * local.error, kappa)
    words = "kappa_T of the ideal gas diverges where mu has reached the lowest level"
    bosons = state.held.model.bosons
    return state.read(
        value, error, unit, local.route, [Reason(words, _shaped(state, bosons & (s.alpha == 0)))]
    )


def wavelength(state: State, unit: str) -> Reading:
    """lambda_T = (h^d / int d^dp e^{-E/kT})^{1/d} in m."""
    local_of(state)
    kT, dlog = state.kT
    free, d = state.held.model.free, state.held.dimension
    cold = Reason("T must be above zero", state.shaped(kT <= 0))
    kT = np.where(kT > 0, kT, np.nan)
    value = np.full_like(kT, np.nan)
    some = np.isfinite(kT)
    value[some] = state.held.model.wavelength_volume(kT[some]) ** (1 / d)
    mean = np.zeros_like(kT)
    if free is not None and some.any():
        mean[some] = free.boltzmann(kT[some])[1]
    error = value / d * ((free.error if free is not None else 0.0) + 8 * EPS + mean * dlog)
    return state.read(value, error, unit, local_of(state).route, [cold])
