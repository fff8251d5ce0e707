"""The potential at positions, for density profiles."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.errors import NoAnswerError
from eoscore.place.trap import TrapPlace

if TYPE_CHECKING:
    from collections.abc import Mapping

    from numpy.typing import ArrayLike, NDArray

    from eoscore.state.held import HeldGas
    from eoscore.state.reading import FloatArray

__all__ = ["energies_at"]


def energies_at(held: HeldGas, coordinates: Mapping[str, ArrayLike]) -> tuple[FloatArray, NDArray[np.bool_]]:
    """V from the bottom in J, and where a point lies beyond a wall; coordinates in m, broadcast."""
    place = held.place
    if not isinstance(place, TrapPlace):
        raise NoAnswerError("the place has no potential: its density is the same everywhere")
    if set(coordinates) != set(place.field.coordinates):
        wanted = ", ".join(place.field.coordinates)
        raise NoAnswerError(f"{', '.join(coordinates)} came; the potential has the coordinates {wanted}")
    arrays = np.broadcast_arrays(*(np.asarray(x, dtype=float) for x in coordinates.values()))
    point = dict(zip(coordinates, arrays, strict=True))
    shape = arrays[0].shape
    outside = np.zeros(shape, dtype=bool)
    for wall in place.field.walls:
        outside |= np.broadcast_to(wall.evaluate(point) <= 0, shape)
    energies = np.broadcast_to(place.field.formula.evaluate(point), shape) - place.v_min
    return np.maximum(energies, 0.0), outside
