"""What an error is judged by where a quantity passes through zero: f_0 by 1, N_0 by N, mu by kT."""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING

import numpy as np

if TYPE_CHECKING:
    from collections.abc import Callable

    from eoscore.state.reading import FloatArray, Reading
    from eoscore.state.state import State

__all__ = ["with_scale"]

_SCALES: dict[str, Callable[[State], FloatArray]] = {
    "f_0": lambda state: np.ones(state.solution.kT.shape),
    "N_0": lambda state: state.number[0],
    "mu": lambda state: state.kT[0],
}


def with_scale(state: State, name: str, reading: Reading) -> Reading:
    """The reading with the scale of its quantity, where that is not the value itself.

    Of a position it is the component that is farthest from zero.
    """
    if name == "r_min":
        return replace(reading, scale=np.abs(reading.value).max(axis=-1, keepdims=True) + 0.0 * reading.value)
    if name not in _SCALES or bool(np.all(reading.missing)):
        return reading
    with np.errstate(all="ignore"):
        return replace(reading, scale=state.shaped(np.abs(_SCALES[name](state))))
