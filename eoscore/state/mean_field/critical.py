"""Where a gas with a mean field begins to condense."""

from __future__ import annotations

from math import exp, log, nan
from typing import TYPE_CHECKING

import numpy as np
from scipy.optimize import brentq

from eoscore.constants import K_B
from eoscore.errors import NoAnswerError
from eoscore.state import saturation, shifts
from eoscore.state.critical import saturated_kT
from eoscore.state.mean_field.cloud import HOTTEST
from eoscore.state.mean_field.precision import ROUNDING, relative_error
from eoscore.state.reading import Reason
from eoscore.state.shifts import is_flat

if TYPE_CHECKING:
    from eoscore.state.mean_field.state import MeanFieldState
    from eoscore.state.reading import FloatArray, Reading

__all__ = ["exponent", "number", "shift", "temperature"]

ROUTE = "Hartree-Fock in local density"
STEP = 5e-4
FULL = (
    "at no temperature do just N particles begin to condense: the mean field fills the place up to its escape energy "
    "before; take fewer particles, a smaller a_s or a deeper trap"
)


def temperature(state: MeanFieldState, unit: str) -> Reading:
    """T_c in K: where N particles just begin to condense at the bottom; in a flat place that of the ideal gas."""
    if is_flat(state.held):
        return saturation.critical_temperature(state, unit)
    count, _ = state.number
    value = np.array([_onset(state, n) / K_B if n > 0 else np.nan for n in count])
    reasons = [
        Reason("N must be above zero", state.shaped(~(count > 0))),
        Reason(FULL, state.shaped((count > 0) & np.isnan(value))),
    ]
    return state.read(value, _precision(state, K_B * value) * value, unit, ROUTE, reasons, of="N")


def _onset(state: MeanFieldState, count: float) -> float:
    """kT (J) at which so many particles begin to condense; nan where the place is full before."""
    setting = state.filling.setting
    hottest = log(HOTTEST * setting.top)

    def excess(x: float) -> float:
        return log(max(setting.at_onset(exp(x)).number, 1e-300) / count)

    start = min(log(float(saturated_kT(state.held.model.whole, "N", np.array([count]))[0])), hottest - 1e-3)
    low, high = start - 0.05, min(start + 0.05, hottest)
    while excess(low) > 0:
        low -= 0.5
    while excess(high) < 0:
        if high == hottest:
            return nan
        high = min(high + 0.5, hottest)
    return exp(brentq(excess, low, high, xtol=1e-14))


def number(state: MeanFieldState, unit: str) -> Reading:
    """N_c: the most particles without a condensate."""
    if is_flat(state.held):
        return saturation.critical_number(state, unit)
    return _told(state, _numbers(state, 0.0), unit, _precision(state, state.kT[0]))


def exponent(state: MeanFieldState, unit: str) -> Reading:
    """d ln N_c/d ln T, by central differences over 0.05 % and 0.1 % of T; their difference is the error."""
    if is_flat(state.held):
        return saturation.exponent(state, unit)
    near, far = (
        np.log(_numbers(state, s) / _numbers(state, -s)) / log((1 + s) / (1 - s)) for s in (STEP, 2 * STEP)
    )
    error = np.abs(near - far) + ROUNDING / STEP + 3 * _precision(state, state.kT[0])
    return _told(state, (4 * near - far) / 3, unit, error)


def _numbers(state: MeanFieldState, shifted: float) -> FloatArray:
    kT = state.kT[0] * (1 + shifted)
    setting = state.filling.setting
    return np.array([setting.at_onset(float(x)).number if x > 0 else np.nan for x in kT])


def _precision(state: MeanFieldState, kT: FloatArray) -> FloatArray:
    """Bound of the relative error of N at the onset."""
    setting = state.filling.setting
    return np.array([relative_error(setting.at_onset(float(x))) if x > 0 else np.nan for x in kT])


def _told(state: MeanFieldState, value: FloatArray, unit: str, relative: FloatArray) -> Reading:
    none = Reason("T must be above zero", state.shaped(~(state.kT[0] > 0)))
    return state.read(value, relative * np.abs(value), unit, ROUTE, [none], of="T")


def shift(state: MeanFieldState, unit: str) -> Reading:
    """To first order as for the ideal gas; none in a flat place, where a mean field alone moves nothing.

    G. Baym et al., Eur. Phys. J. B 24, 107 (2001): at fixed density the mean field does not shift T_c.
    """
    if not is_flat(state.held):
        return shifts.of_interactions(state, unit)
    if not np.all(state.number[0] > 0):
        raise NoAnswerError("N must be above zero")
    zero = np.zeros_like(state.number[0])
    return state.read(zero, zero, unit, "mean field alone, at fixed density: none", of="N")
