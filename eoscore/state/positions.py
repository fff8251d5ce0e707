"""Positions in a trap: where V stands there, and the straight lines along one coordinate."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.errors import NoAnswerError
from eoscore.formula import call, variable
from eoscore.formula.field import Field
from eoscore.place import TrapPlace
from eoscore.place.region import joined

if TYPE_CHECKING:
    from collections.abc import Mapping

    from numpy.typing import ArrayLike

    from eoscore.state.held import HeldGas
    from eoscore.state.reading import FloatArray

__all__ = ["at_bottom", "height_at", "height_in", "held_height", "line_along", "trap_of"]

RADII = ("r", "rho")  # on the other side of the centre where they are negative


def trap_of(held: HeldGas) -> TrapPlace:
    """The trap of a gas; NoAnswerError where the place has no coordinates."""
    place = held.place
    if not isinstance(place, TrapPlace):
        raise NoAnswerError(f"{held.name} has no coordinates along which a profile could run")
    return place


def at_bottom(trap: TrapPlace, positions: Mapping[str, ArrayLike]) -> dict[str, FloatArray]:
    """Positions by coordinate in m; those that are not given are that of the bottom."""
    bottom = dict(zip(trap.field.coordinates, trap.r_min, strict=True))
    given = bottom | dict(positions)
    return {name: np.asarray(x, dtype=float) for name, x in given.items()}


def height_at(trap: TrapPlace, positions: Mapping[str, FloatArray]) -> FloatArray:
    """V from the bottom in J where every coordinate is given; inf behind walls. Arrays broadcast."""
    return height_in(trap.field, positions) - trap.v_min


def height_in(field: Field, positions: Mapping[str, ArrayLike], *, walled: bool = True) -> FloatArray:
    """V of a field in J where each of its coordinates is given; inf behind walls. Arrays broadcast."""
    given = {name: np.abs(x) if name in RADII else np.asarray(x) for name, x in positions.items()}
    shape = np.broadcast_shapes(*(x.shape for x in given.values()))
    v = np.broadcast_to(np.asarray(field.formula.evaluate(given)), shape)
    inside = np.ones(shape, dtype=bool)
    for wall in field.walls if walled else ():
        inside &= np.broadcast_to(np.asarray(wall.evaluate(given)) > 0, shape)
    return np.where(inside, v, np.inf)


def held_height(trap: TrapPlace, positions: Mapping[str, FloatArray]) -> FloatArray:
    """The same within the region of the trap, at least 0; inf outside, where it holds nothing."""
    v = height_at(trap, positions)
    columns = [np.broadcast_to(positions[name], v.shape).ravel() for name in trap.field.coordinates]
    inside = joined(trap, np.stack(columns, axis=-1), v.ravel()).reshape(v.shape)
    return np.where(inside, np.maximum(v, 0.0), np.inf)


def line_along(trap: TrapPlace, name: str, others: Mapping[str, float]) -> Field:
    """V along one coordinate, the others given in m; a radius runs through the centre to the other side."""
    x = variable("x")
    here = {each: abs(value) if each in RADII else value for each, value in others.items()}
    along = here | {name: call("abs", x) if name in RADII else x}
    field = trap.field
    return Field(
        ("x",), field.formula.substitute(along), tuple(wall.substitute(along) for wall in field.walls)
    )
