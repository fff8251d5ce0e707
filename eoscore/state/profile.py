"""Density and pressure against position."""

from __future__ import annotations

from typing import TYPE_CHECKING, NamedTuple

import numpy as np

from eoscore.errors import NoAnswerError
from eoscore.place import TrapPlace
from eoscore.state.ensembles import ensemble_of

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
    held, place = state.held, state.held.place
    if not isinstance(place, TrapPlace) or held.model.local is None:
        raise NoAnswerError(f"{held.name} has no coordinates along which a profile could run")
    field = place.field
    if set(positions) != set(field.coordinates):
        came, wanted = ", ".join(positions) or "none", ", ".join(field.coordinates)
        raise NoAnswerError(f"a profile wants the coordinates {wanted}; came {came}")
    if state.solution.kT.size != 1 or not state.solution.known.all():
        raise NoAnswerError("a profile wants one state; came several, or none: " + "; ".join(_words(state)))
    given = {name: np.asarray(x, dtype=float) for name, x in positions.items()}
    shape = np.broadcast_shapes(*(x.shape for x in given.values()))
    v = np.broadcast_to(np.asarray(field.formula.evaluate(given)) - place.v_min, shape).ravel()
    inside = np.ones(v.shape, dtype=bool)
    for wall in field.walls:
        inside &= np.broadcast_to(np.asarray(wall.evaluate(given)) > 0, shape).ravel()
    v = np.where(inside, np.maximum(v, 0.0), np.inf)
    density, pressure = _local(state, v)
    return Profile(v.reshape(shape), density.reshape(shape), pressure.reshape(shape))


def _words(state: State) -> list[str]:
    return [words for words, _ in state.solution.missing] or ["give one N and one T"]


def _local(state: State, v: FloatArray) -> tuple[FloatArray, FloatArray]:
    held, s = state.held, state.solution
    density, pressure = np.zeros_like(v), np.zeros_like(v)
    some = np.flatnonzero(v < held.top)
    alpha, kT = s.alpha + v / s.kT, np.broadcast_to(s.kT, v.shape)
    finite = np.isfinite(held.top)
    for part in np.array_split(some, max(some.size, 1)) if finite else [some]:
        if part.size:
            ensemble = (
                ensemble_of(held.gas, held.momentum.cut(held.top - v[part[0]]))
                if finite
                else held.model.local
            )
            if ensemble is not None:
                sums = ensemble.sums(alpha[part], kT[part])
                density[part], pressure[part] = sums.N, kT[part] * sums.Y
    return density, pressure
