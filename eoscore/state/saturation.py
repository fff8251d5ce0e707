"""Where the gas saturates: T_c, N_c, n_c and the exponent."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.constants import K_B
from eoscore.errors import NoAnswerError
from eoscore.state.bottom import local_of
from eoscore.state.critical import saturated_kT
from eoscore.state.ensemble import EPS
from eoscore.state.reading import Reason

if TYPE_CHECKING:
    from eoscore.state.ensemble import Ensemble
    from eoscore.state.reading import FloatArray, Reading
    from eoscore.state.state import State

__all__ = ["critical_density", "critical_number", "critical_temperature", "exponent"]


def _condensing(ensemble: Ensemble) -> Ensemble:
    if not ensemble.condenses:
        raise NoAnswerError(ensemble.why_not)
    return ensemble


def _at_zero(ensemble: Ensemble, kT: FloatArray) -> tuple[FloatArray, FloatArray]:
    """N at alpha = 0 and dN/dlnT there."""
    alpha = np.zeros_like(kT)
    sums = ensemble.sums(alpha, kT)
    return sums.N, sums.slopes("N", alpha, kT)[1]


def critical_temperature(state: State, unit: str) -> Reading:
    """T_c in K of N particles (or of the density n in a uniform gas)."""
    whole = _condensing(state.held.model.whole)
    number, of_number = state.number
    kT = np.full_like(number, np.nan)
    sensible = number > 0
    kT[sensible] = saturated_kT(whole, "N", number[sensible])
    held, slope = _at_zero(whole, np.where(sensible, kT, 1.0))
    error = kT * ((whole.error_at(kT) + 8 * EPS) * held + of_number) / slope
    label = "n" if state.held.uniform else "N"
    reason = Reason(f"{label} must be above zero", state.shaped(~sensible))
    return state.read(kT / K_B, error / K_B, unit, "", [reason], of="N")


def _temperature(state: State) -> tuple[FloatArray, FloatArray, Reason]:
    kT, dlog = state.kT
    sensible = kT > 0
    reason = Reason("T must be above zero", state.shaped(kT <= 0))
    return np.where(sensible, kT, np.nan), dlog, reason


def critical_number(state: State, unit: str) -> Reading:
    """N_c: the most that the excited states hold at T."""
    if state.held.uniform:
        raise NoAnswerError("a uniform gas has no critical number: it has no end; ask for n_c")
    whole = _condensing(state.held.model.whole)
    kT, dlog, reason = _temperature(state)
    held, slope = _at_zero(whole, kT)
    return state.read(held, (whole.error_at(kT) + 4 * EPS) * held + slope * dlog, unit, "", [reason], of="T")


def critical_density(state: State, unit: str) -> Reading:
    """n_c in m^-d: the density at the bottom at which the gas saturates there."""
    local = local_of(state)
    if not local.condenses:
        raise NoAnswerError(local.why_not.replace("no condensation", "no critical density at the bottom"))
    kT, dlog, reason = _temperature(state)
    held, slope = _at_zero(local, kT)
    return state.read(
        held, (local.error + 4 * EPS) * held + slope * dlog, unit, local.route, [reason], of="T"
    )


def exponent(state: State, unit: str) -> Reading:
    """d ln N_c / d ln T at T."""
    whole = _condensing(state.held.model.whole)
    kT, dlog, reason = _temperature(state)
    held, slope = _at_zero(whole, kT)
    value = slope / held
    further = _at_zero(whole, kT * 1.0001)
    drift = np.abs(further[1] / further[0] - value) * 1e4 * dlog
    return state.read(value, (2 * whole.error_at(kT) + 8 * EPS) * value + drift, unit, "", [reason], of="T")
