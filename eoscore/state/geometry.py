"""What the place alone tells: depth, frequencies, the bottom."""

from __future__ import annotations

from math import inf
from typing import TYPE_CHECKING

import numpy as np

from eoscore.errors import NoAnswerError
from eoscore.state.ensemble import EPS
from eoscore.state.reading import Reading, Reason

if TYPE_CHECKING:
    from eoscore.state.reading import FloatArray
    from eoscore.state.state import State

__all__ = ["bottom_energy", "depth", "eta", "frequencies", "position"]

SURVEYED = "survey of the potential"


def _depth(state: State) -> tuple[float, float]:
    """The depth in J and its error."""
    value, error = state.held.depth
    if value == inf:
        raise NoAnswerError("the depth is infinite: the place holds at every energy")
    return value, error


def depth(state: State, unit: str) -> Reading:
    """From the bottom to the lowest escape, in J."""
    value, error = _depth(state)
    return _fixed(state, np.array(value), np.array(error), unit)


def eta(state: State, unit: str) -> Reading:
    """depth/kT."""
    value, error = _depth(state)
    kT, dlog = state.kT
    ratio = np.where(kT > 0, value / kT, np.nan)
    reason = Reason("T must be above zero", state.shaped(kT <= 0).astype(bool))
    return state.read(ratio, ratio * (error / value + dlog + 2 * EPS), unit, SURVEYED, [reason])


def frequencies(state: State, unit: str) -> Reading:
    """Principal frequencies of the bottom in Hz, ascending, one for each dimension."""
    values = state.held.frequencies()
    return _fixed(state, values, 1e-12 * np.max(values, initial=0.0) * np.ones_like(values), unit)


def position(state: State, unit: str) -> Reading:
    """The bottom, in the coordinates of the potential."""
    values = state.held.bottom()
    return _fixed(state, values, np.full_like(values, 1e-8 * np.max(np.abs(values))), unit)


def bottom_energy(state: State, unit: str) -> Reading:
    """V at the bottom, J."""
    value = state.held.bottom_energy()
    return _fixed(state, np.array(value), np.array(1e-14 * abs(value)), unit)


def _fixed(state: State, value: FloatArray, error: FloatArray, unit: str) -> Reading:
    """A number of the place alone, the same at every point of the question."""
    shape = state.shape + value.shape
    return Reading(np.broadcast_to(value, shape).copy(), np.broadcast_to(error, shape).copy(), unit, SURVEYED)
