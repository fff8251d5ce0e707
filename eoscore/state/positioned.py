"""Quantities at positions: V, density and pressure at a point, and the column density along a line."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.errors import NoAnswerError
from eoscore.state.column import lines_of
from eoscore.state.ensemble import EPS
from eoscore.state.local import local_at
from eoscore.state.positions import at_bottom, height_at, held_height, trap_of
from eoscore.state.reading import Reading, Reason, reading_of
from eoscore.state.table import unit_in

if TYPE_CHECKING:
    from collections.abc import Mapping

    from numpy.typing import ArrayLike

    from eoscore.state.reading import FloatArray
    from eoscore.state.state import State

__all__ = ["read_at"]


def read_at(state: State, name: str, positions: Mapping[str, ArrayLike]) -> Reading:
    """A quantity at positions by coordinate in m, which broadcast with the points of the state.

    Coordinates not given are those of the bottom; the column density is integrated along the one not given. All
    but V are of the non-condensed gas, in the local picture; only held momenta count below an escape energy.
    """
    unit = unit_in(name, state.held.dimension)
    given = {coordinate: np.asarray(x, dtype=float) for coordinate, x in positions.items()}
    shape = np.broadcast_shapes(state.shape, *(x.shape for x in given.values()))
    try:
        _refuse_unknown(state, given)
        with np.errstate(all="ignore"):
            if name == "V_at":
                return _height(state, given, shape, unit)
            if state.held.gas.treatment == "hartree_fock":
                return _in_mean_field(state, name, given, shape, unit)
            read = _column if name == "n_column" else _local
            value, error, route = read(state, name, given, shape)
    except NoAnswerError as fault:
        nothing = np.full(shape, np.nan)
        return reading_of(nothing, nothing, unit, "", [Reason(fault.why, np.ones(shape, dtype=bool))])
    reasons = [Reason(each.words, np.broadcast_to(each.where, shape)) for each in state.reasons]
    lost = ~np.isfinite(value)
    for reason in reasons:
        lost &= ~reason.where
    endless = "the density has no limit where mu has reached V (the gas condenses there)"
    return reading_of(value, error, unit, route, [*reasons, Reason(endless, lost)])


def _refuse_unknown(state: State, given: Mapping[str, FloatArray]) -> None:
    known = trap_of(state.held).field.coordinates
    for name in given:
        if name not in known:
            raise NoAnswerError(f"{state.held.name} has no coordinate {name}; it has {', '.join(known)}")


def _height(state: State, given: Mapping[str, FloatArray], shape: tuple[int, ...], unit: str) -> Reading:
    trap = trap_of(state.held)
    v = np.broadcast_to(height_at(trap, at_bottom(trap, given)), shape)
    error = 8 * EPS * (np.abs(v) + abs(trap.v_min))
    walls = Reason("the point lies behind a wall, where V is infinite", np.isinf(v))
    return reading_of(v, error, unit, "the potential itself", [walls])


def _local(
    state: State, name: str, given: Mapping[str, FloatArray], shape: tuple[int, ...]
) -> tuple[FloatArray, FloatArray, str]:
    trap = trap_of(state.held)
    v = np.broadcast_to(held_height(trap, at_bottom(trap, given)), shape)
    flat = v.ravel()
    alpha, kT, dalpha, dlog = _spread(state, shape)
    part = slice(0, 3) if name == "n_at" else slice(3, 6)
    value, by_alpha, by_log = local_at(state.held, flat, alpha, kT)[part]
    higher = flat + 8 * EPS * (
        flat + abs(trap.v_min)
    )  # as far as V may be off; n has a cusp where mu reaches V
    off = np.abs(local_at(state.held, higher, alpha, kT)[part][0] - value)
    ensemble = state.held.model.local
    own = 4 * EPS if ensemble is None else ensemble.error + 4 * EPS
    error = own * np.abs(value) + off + _lean(by_alpha, dalpha) + np.abs(by_log) * dlog
    route = "local picture" if ensemble is None else f"local picture ({ensemble.route})"
    return value.reshape(shape), error.reshape(shape), route


def _spread(state: State, shape: tuple[int, ...]) -> tuple[FloatArray, FloatArray, FloatArray, FloatArray]:
    """alpha and kT of the states and the bounds of the errors of alpha and ln T, spread over the positions, flat."""
    columns = (state.solution.alpha, state.solution.kT, *state.doubt)
    alpha, kT, dalpha, dlog = (np.broadcast_to(state.shaped(each), shape).ravel() for each in columns)
    return alpha, kT, dalpha, dlog


def _lean(slope: FloatArray, by: FloatArray) -> FloatArray:
    """|slope| times a positive number; 0 where that is 0, however steep."""
    return np.where(by > 0, np.abs(slope) * by, 0.0)


def _column(
    state: State, name: str, given: Mapping[str, FloatArray], shape: tuple[int, ...]
) -> tuple[FloatArray, FloatArray, str]:
    trap = trap_of(state.held)
    if state.held.model.local is None:
        raise NoAnswerError(state.held.why_not_local)
    free = [each for each in trap.field.coordinates if each not in given]
    if len(free) != 1:
        came, wanted = ", ".join(given) or "none", ", ".join(trap.field.coordinates)
        raise NoAnswerError(
            f"{name} is taken along the one coordinate that is not given; of {wanted} came {came}"
        )
    across = np.broadcast_shapes(*(x.shape for x in given.values())) if given else ()
    spread = {each: np.broadcast_to(x, across) for each, x in given.items()}
    alpha, kT, dalpha, dlog = (each.reshape(shape) for each in _spread(state, shape))
    value, error = np.zeros(shape), np.zeros(shape)
    routes: dict[str, None] = {}
    for line in lines_of(state.held, trap, free[0], spread):
        height = np.broadcast_to(line.height, shape)
        here = np.isfinite(height) & np.isfinite(kT)
        if not here.any():
            continue
        depth = height[here] / kT[here]
        sums = line.ensemble.sums(alpha[here] + depth, kT[here])
        by_alpha, by_log = sums.slopes("N", alpha[here] + depth, kT[here])
        by_log = by_log + _lean(by_alpha, depth)  # by_alpha is below 0
        value[here] = sums.N
        off = _lean(by_alpha, dalpha[here]) + np.abs(by_log) * dlog[here]
        error[here] = (line.ensemble.error + 4 * EPS) * sums.N + off
        routes[line.ensemble.route] = None
    return value, error, f"along {free[0]}: {'; '.join(routes) or 'nothing is held on these lines'}"


def _in_mean_field(
    state: State, name: str, given: Mapping[str, FloatArray], shape: tuple[int, ...], unit: str
) -> Reading:
    """From the profile of a Hartree-Fock state, which is that of one state."""
    if name == "n_column":
        raise NoAnswerError(
            "n_column is not counted with treatment hartree_fock; ask for n_at along the line"
        )
    trap = trap_of(state.held)
    places = at_bottom(trap, given)
    profile = state.profile(**places)
    held = np.isfinite(held_height(trap, places))
    value = np.broadcast_to(
        np.where(held, profile.density if name == "n_at" else profile.pressure, 0.0), shape
    )
    return reading_of(value, 1e-8 * np.abs(value), unit, "Hartree-Fock in local density")
