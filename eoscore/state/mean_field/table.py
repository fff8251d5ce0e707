"""The quantities of a Hartree-Fock state; those not named here are the same as for the ideal gas."""

from __future__ import annotations

from dataclasses import replace
from math import pi
from typing import TYPE_CHECKING

import numpy as np

from eoscore.constants import K_B
from eoscore.errors import NoAnswerError
from eoscore.state.mean_field import critical, local
from eoscore.state.mean_field.precision import ROUNDING
from eoscore.state.mean_field.radii import radii
from eoscore.state.mean_field.state import ROUTE
from eoscore.state.reading import Reading, Reason
from eoscore.state.shifts import is_flat

if TYPE_CHECKING:
    from collections.abc import Callable

    from eoscore.state.mean_field.filling import Filled
    from eoscore.state.mean_field.state import MeanFieldState
    from eoscore.state.reading import FloatArray

__all__ = ["READ"]

ATTRACTED = (
    "a_s is negative: the condensate is held open by its kinetic energy, which the Thomas-Fermi limit leaves out, so "
    "that its energy and density are not told; N_0, f_0, mu, S and n_peak are, and all of it above T_c or with a_s > 0"
)
IDEAL = (
    "a_s is 0: an ideal condensate has the size of the lowest level, which a semiclassical gas does not know"
)
STEP = 5e-4  # in ln T, of the heat capacity


def _read(state: MeanFieldState, value: FloatArray, unit: str, error: FloatArray | None = None) -> Reading:
    # at fixed N a wrong N shows in mu, and by that in everything: U and S go with N^2 at the most
    error = 3 * state.relative * np.abs(value) if error is None else error
    return state.read(value, error, unit, ROUTE)


def _of(read: Callable[[Filled], float]) -> Callable[[MeanFieldState, str], Reading]:
    return lambda state, unit: _read(state, state.each(read), unit)


def _shapeless(
    read: Callable[[MeanFieldState, str], Reading], *, ideal: bool
) -> Callable[[MeanFieldState, str], Reading]:
    """No number where a condensate stands beside the cloud: it has no Thomas-Fermi limit without repulsion.

    `ideal`: nor where there is no interaction at all.
    """

    def reading(state: MeanFieldState, unit: str) -> Reading:
        found = read(state, unit)
        attracted = state.filling.setting.coupling < 0
        where = state.shaped(state.each(lambda fill: fill.beside) > 0)
        if not (attracted or ideal) or not np.any(where):
            return found
        none = Reason(ATTRACTED if attracted else IDEAL, where)
        value, error = (np.where(where, np.nan, x) for x in (found.value, found.error))
        return replace(found, value=value, error=error, reasons=(*found.reasons, none))

    return reading


def _not_uniform(state: MeanFieldState, word: str) -> None:
    if state.held.uniform:
        raise NoAnswerError(
            f"a uniform gas has no {word}: it has no end; hold it in a trap with `volume = ...`"
        )


def _extensive(word: str, read: Callable[[Filled], float]) -> Callable[[MeanFieldState, str], Reading]:
    def reading(state: MeanFieldState, unit: str) -> Reading:
        _not_uniform(state, word)
        return _read(state, state.each(read), unit)

    return reading


def _energy(fill: Filled) -> float:
    cloud = fill.cloud
    return cloud.kinetic + cloud.potential + cloud.interaction


def _potential(state: MeanFieldState, unit: str) -> Reading:
    """mu from the bottom of V."""
    value = state.each(lambda fill: fill.cloud.mu)
    return _read(state, value, unit, 3 * state.relative * (np.abs(value) + state.kT[0]))


def _fraction(state: MeanFieldState, unit: str) -> Reading:
    value = state.each(lambda fill: fill.condensate) / state.number[0]
    return _read(state, value, unit, np.where(value > 0, 3 * state.relative, 0.0))


def _condensate(state: MeanFieldState, unit: str) -> Reading:
    _not_uniform(state, "condensate number")
    value = state.each(lambda fill: fill.condensate)
    return _read(state, value, unit, np.where(value > 0, 3 * state.relative * state.number[0], 0.0))


def _heat_capacity(state: MeanFieldState, unit: str) -> Reading:
    """dU/dT at fixed N by central differences over 0.05 % and 0.1 % of T; their difference is the error."""
    _not_uniform(state, "heat capacity")
    filling, number, kT = state.filling, state.number[0], state.kT[0]

    def slope(fill: Filled | None, count: float, at: float, step: float) -> float:
        if fill is None:
            return np.nan
        up, down = (_energy(filling.holding(count, at * (1 + s))) for s in (step, -step))
        return K_B * (up - down) / (2 * step * at)

    points = list(zip(state.fills, number, kT, strict=True))
    near, far = (np.array([slope(*p, step) for p in points]) for step in (STEP, 2 * STEP))
    value = (4 * near - far) / 3
    # the error of the place is the same on both sides, that of the sums is not
    return _read(
        state, value, unit, np.abs(near - far) + (3 * state.relative + ROUNDING / STEP) * np.abs(value)
    )


def _radii(state: MeanFieldState, unit: str) -> Reading:
    """Thomas-Fermi radii along the principal axes of the bottom."""
    edges = state.each(lambda fill: fill.cloud.edge if fill.cloud.condensate > 0 else np.nan)
    rows = [np.full(3, np.nan) if np.isnan(e) else radii(state.held, float(e)) for e in edges]
    value = np.reshape(np.array(rows), (*state.shape, 3))
    words = "there is no Thomas-Fermi condensate in this state"
    none = Reason(words, state.shaped(np.isnan(edges) & state.solution.known))
    reasons = tuple(reason for reason in (*state.reasons, none) if np.any(reason.where))
    relative = np.reshape(3 * state.relative + 1e-12, (*state.shape, 1))
    return Reading(value, relative * np.abs(value), unit, ROUTE, reasons)


def _collisions(state: MeanFieldState, unit: str) -> Reading:
    """As for the ideal gas, with the density of the thermal part."""
    gas = state.held.gas
    a_s, mass = gas.a_s or 0.0, gas.mass or np.nan

    def density(fill: Filled) -> float:
        thermal = fill.cloud.densities[1]
        return fill.cloud.over(thermal * thermal) / fill.cloud.over(thermal)

    speed = 8 * pi * a_s**2 * np.sqrt(16 * state.kT[0] / (pi * mass))
    return _read(state, speed * state.each(density), unit)


def _density(state: MeanFieldState, unit: str) -> Reading:
    held = state.held
    if not is_flat(held) or (held.position is not None):
        raise NoAnswerError(
            "n is the density of a gas in a `volume` or in `uniform`; in a trap ask for n_peak"
        )
    return _read(state, state.number[0] / (held.volume or 1.0), unit)


READ: dict[str, Callable[[MeanFieldState, str], Reading]] = {
    "T_c": critical.temperature,
    "N_c": critical.number,
    "exponent": critical.exponent,
    "shift_int": critical.shift,
    "N": _extensive("number", lambda fill: fill.number),
    "n": _density,
    "mu": _potential,
    "fugacity": _of(lambda fill: float(np.exp(fill.cloud.mu / fill.cloud.fluid.kT))),
    "S": _extensive("entropy", lambda fill: K_B * fill.cloud.entropy),
    "U": _shapeless(_extensive("energy", _energy), ideal=False),
    "U_int": _shapeless(_extensive("energy", lambda fill: fill.cloud.interaction), ideal=False),
    "E_release": _shapeless(
        _extensive("energy", lambda fill: fill.cloud.kinetic + fill.cloud.interaction), ideal=False
    ),
    "N_0": _condensate,
    "f_0": _fraction,
    "n_peak": _of(local.thermal_peak),
    "n_0_peak": _shapeless(_of(local.condensate_peak), ideal=True),
    "PSD": lambda state, unit: _read(state, state.each(local.phase_space_density), unit),
    "pressure": _of(local.pressure),
    "kappa_T": _shapeless(_of(local.compressibility), ideal=True),
    "R_TF": _radii,
    "C_N": _shapeless(_heat_capacity, ideal=False),
    "rate_coll": _collisions,
}
