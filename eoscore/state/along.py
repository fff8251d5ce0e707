"""alpha at a given temperature, from any one further condition."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.state.degeneracy import alpha_of_number
from eoscore.state.ensemble import EPS
from eoscore.state.root import rising_root

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from eoscore.state.ensemble import Ensemble
    from eoscore.state.model import Model
    from eoscore.state.reading import FloatArray

__all__ = ["alpha_along"]

BOUND = 700.0
AT_LIMIT = (
    64 * EPS
)  # a number within rounding of saturation counts as saturated: at T_c the condensed side is told


def alpha_along(model: Model, name: str, value: FloatArray, kT: FloatArray) -> FloatArray:
    """alpha where a condition holds at kT; 0 where a Bose gas is saturated before it reaches the value.

    A value that no state has gives the alpha of the nearest one, or nan: the caller compares.
    """
    if name == "mu":
        return -value / kT
    if name == "fugacity":
        return -np.log(value)
    if name == "N":
        return _below_saturation(model.whole, value, kT)
    if name in ("n_peak", "PSD") and model.local is not None:
        number = value if name == "n_peak" else value / model.wavelength_volume(kT)
        return _below_saturation(model.local, number, kT)
    return _searched(model, name, value, kT)


def _below_saturation(ensemble: Ensemble, number: FloatArray, kT: FloatArray) -> FloatArray:
    alpha = np.full_like(kT, np.nan)
    sensible = (number > 0) & (number < ensemble.capacity)
    if ensemble.statistics == "bose" and ensemble.condenses:
        full = number >= ensemble.saturated(kT) * (1 - AT_LIMIT)
        alpha[full & sensible] = 0.0
        sensible &= ~full
    if sensible.any():
        alpha[sensible] = alpha_of_number(ensemble, number[sensible], kT[sensible])
    return alpha


def _searched(model: Model, name: str, value: FloatArray, kT: FloatArray) -> FloatArray:
    """S or U against y, with alpha = ln(1 + e^-y) for bosons and -y for others.

    Where S has passed its maximum (a dense classical gas, a band more than half full) the thinner gas is meant.
    """
    bosons = model.bosons

    def work(y: FloatArray, which: NDArray[np.intp]) -> tuple[FloatArray, FloatArray]:
        alpha = np.logaddexp(0.0, -y) if bosons else -y
        held, by_alpha, _ = model.value(name, alpha, kT[which])
        lean = np.expm1(-alpha) if bosons else -1.0
        with np.errstate(divide="ignore", invalid="ignore"):
            ratio = np.log(held / value[which])
            return np.where((held <= 0) | (by_alpha >= 0), 1.0, ratio), by_alpha * lean / held

    wide = np.full_like(kT, BOUND)
    y = rising_root(work, -wide, wide, np.zeros_like(kT))
    return np.logaddexp(0.0, -y) if bosons else -y
