"""The thermodynamic quantities of the whole gas."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.constants import K_B
from eoscore.errors import NoAnswerError
from eoscore.state.ensemble import EPS

if TYPE_CHECKING:
    from eoscore.state.reading import FloatArray, Reading
    from eoscore.state.state import State

__all__ = [
    "condensate",
    "density",
    "energy",
    "entropy",
    "fraction",
    "fugacity",
    "heat_capacity",
    "number",
    "potential",
    "temperature",
]

WHOLE = "a uniform gas has no {}: it has no end; ask for {}, or hold it in a trap with `volume = ...`"


def temperature(state: State, unit: str) -> Reading:
    """T in K."""
    kT, dlog = state.kT
    return state.read(kT / K_B, kT / K_B * dlog, unit)


def potential(state: State, unit: str) -> Reading:
    """mu in J from the lowest single-particle energy."""
    s = state.solution
    mu = np.where(s.alpha == 0, 0.0, -s.alpha * s.kT)
    if "mu" in state.given:
        mu = np.where(s.known, state.given["mu"], np.nan)
        return state.read(mu, 2 * EPS * np.abs(mu), unit)
    dalpha, dlog = state.doubt
    return state.read(mu, s.kT * dalpha + np.abs(mu) * (dlog + 4 * EPS), unit)


def fugacity(state: State, unit: str) -> Reading:
    """exp(mu/kT)."""
    s = state.solution
    z = np.exp(-s.alpha)
    return state.read(z, z * (state.doubt[0] + 2 * EPS * (1 + np.abs(s.alpha))), unit)


def number(state: State, unit: str) -> Reading:
    """N."""
    if state.held.uniform:
        raise NoAnswerError(WHOLE.format("number", "its density n"))
    return state.read(*_number(state), unit)


def density(state: State, unit: str) -> Reading:
    """n = N/V of a gas in a volume, or of a uniform gas."""
    held = state.held
    if not held.uniform and held.volume is None:
        raise NoAnswerError(
            "n is the density of a gas in a `volume` or in `uniform`; in a trap ask for n_peak"
        )
    value, error = _number(state)
    volume = held.volume or 1.0
    return state.read(value / volume, error / volume, unit)


def _number(state: State) -> tuple[FloatArray, FloatArray]:
    if len(state.given) == 2:
        _ = state.solution  # points that have no state have no number either
    return state.number


def energy(state: State, unit: str) -> Reading:
    """U in J."""
    return _extensive(state, "U", "energy", unit)


def entropy(state: State, unit: str) -> Reading:
    """S in J/K."""
    return _extensive(state, "S", "entropy", unit)


def _extensive(state: State, name: str, word: str, unit: str) -> Reading:
    if state.held.uniform:
        raise NoAnswerError(WHOLE.format(word, "pressure"))
    return state.read(*state.of_sums(name), unit)


def condensate(state: State, unit: str) -> Reading:
    """N_0; 0 where the gas cannot condense."""
    if state.held.uniform:
        raise NoAnswerError(WHOLE.format("condensate number", "f_0"))
    return state.read(*_condensate(state), unit)


def _condensate(state: State) -> tuple[FloatArray, FloatArray]:
    s = state.solution
    if "N_0" in state.given:
        return s.condensate, 2 * EPS * s.condensate
    if "T" in state.given and "N" in state.given:  # no sums are needed for what N and N_c already tell
        error = (state.held.model.whole.error_at(s.kT) + 40 * EPS) * (state.given["N"] - s.condensate)
    else:
        _, error = state.of_sums("N")
    return s.condensate, np.where(s.condensed, error + 4 * EPS * s.condensate, 0.0)


def fraction(state: State, unit: str) -> Reading:
    """f_0 = N_0/N; 0 where the gas cannot condense."""
    n0, error = _condensate(state)
    total, of_total = state.number
    value = np.where(n0 > 0, n0 / total, 0.0)
    value = np.where(state.solution.known, value, np.nan)
    return state.read(value, np.where(n0 > 0, (error + value * of_total) / total, error / total), unit)


def heat_capacity(state: State, unit: str) -> Reading:
    """C_N in J/K at fixed N in the fixed trap; at T_c itself the value of the condensed side.

    Below T_c it is dU/dT at mu = 0, since the condensate has no energy.
    """
    if state.held.uniform:
        raise NoAnswerError(WHOLE.format("heat capacity", "pressure"))
    s, whole = state.solution, state.held.model.whole

    def heat(alpha: FloatArray, kT: FloatArray) -> FloatArray:
        fixed_n, fixed_mu = whole.sums(alpha, kT).heat()
        return K_B * np.where(s.condensed, fixed_mu, fixed_n)

    value, error = state.numeric_bound(2 * whole.error_at(s.kT), heat)
    sums = state.sums
    cancelled = np.where(s.condensed, 0.0, whole.error_at(s.kT) * K_B * sums.B2)
    return state.read(value, error + cancelled, unit)
