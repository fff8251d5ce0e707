"""Density and pressure against position."""

from __future__ import annotations

from typing import TYPE_CHECKING, NamedTuple

import numpy as np

from eoscore.errors import NoAnswerError
from eoscore.state.local import local_at
from eoscore.state.positions import height_at, held_height, trap_of

if TYPE_CHECKING:
    from collections.abc import Mapping

    from numpy.typing import ArrayLike

    from eoscore.state.reading import FloatArray
    from eoscore.state.state import State

__all__ = ["Profile", "profile"]


class Profile(NamedTuple):
    """V - V_min in J (inf behind walls), density in m^-d and pressure in J/m^d of the non-condensed gas."""

    potential: FloatArray
    density: FloatArray
    pressure: FloatArray


def profile(state: State, positions: Mapping[str, ArrayLike]) -> Profile:
    """The local picture n(mu - V(r)), P(mu - V(r)) at positions by coordinate in m, arrays broadcast.

    Of one state of a gas in a trap. Below an escape energy only held momenta count, and nothing lies above it. The
    condensate of an ideal gas has no width in this picture and is left out. Raises NoAnswerError for a place without
    coordinates, for coordinates that it does not have, and for more than one state.
    """
    held, trap = state.held, trap_of(state.held)
    if set(positions) != set(trap.field.coordinates):
        came, wanted = ", ".join(positions) or "none", ", ".join(trap.field.coordinates)
        raise NoAnswerError(f"a profile wants the coordinates {wanted}; came {came}")
    s = state.solution
    if s.kT.size != 1 or not s.known.all():
        raise NoAnswerError("a profile wants one state; came several, or none: " + "; ".join(_words(state)))
    given = {name: np.asarray(x, dtype=float) for name, x in positions.items()}
    v = height_at(trap, given)
    flat = held_height(trap, given).ravel()
    local = local_at(held, flat, np.broadcast_to(s.alpha, flat.shape), np.broadcast_to(s.kT, flat.shape))
    return Profile(v, local.density.reshape(v.shape), local.pressure.reshape(v.shape))


def _words(state: State) -> list[str]:
    return [words for words, _ in state.solution.missing] or ["give one N and one T"]
