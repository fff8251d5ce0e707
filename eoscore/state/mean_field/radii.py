"""How far a condensate reaches: where V equals its edge, along the principal axes of the bottom."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np
from scipy.optimize import brentq

from eoscore.errors import NoAnswerError
from eoscore.place.trap import TrapPlace

if TYPE_CHECKING:
    from collections.abc import Callable, Iterator

    from eoscore.state.held import HeldGas
    from eoscore.state.reading import FloatArray

__all__ = ["radii"]

SPHERE = {"rho": 2, "r": 3}


def radii(held: HeldGas, edge: float) -> FloatArray:
    """Half the width of V - V_min < edge (J) along each of three axes through the bottom, m.

    In the order of the coordinates where these are the principal axes, else by ascending frequency.
    NoAnswerError where the place has no potential.
    """
    place = held.place
    if edge <= 0:
        raise NoAnswerError(
            "the place is flat: the condensate ends at the walls, and has no radius of its own"
        )
    if not isinstance(place, TrapPlace):
        raise NoAnswerError("the place has no potential, and so no edge of the condensate")
    return np.array([_half(place, axis, edge) for axis in _axes(place)])


def _axes(place: TrapPlace) -> Iterator[FloatArray]:
    """Directions in the coordinates of the field, rho twice and r three times."""
    hessian = np.asarray(place.bottom.hessian)
    if np.all(np.isfinite(hessian)) and np.any(hessian - np.diag(np.diag(hessian))):
        directions = np.linalg.eigh(hessian)[1].T
    else:
        directions = np.eye(len(place.field.coordinates))
    for direction, name in zip(directions, place.field.coordinates, strict=True):
        for _ in range(SPHERE.get(name, 1)):
            yield direction


def _half(place: TrapPlace, axis: FloatArray, edge: float) -> float:
    def above(distance: float) -> float:
        point = {
            name: np.array([abs(x) if name in SPHERE else x])
            for name, x in zip(
                place.field.coordinates, np.asarray(place.r_min) + distance * axis, strict=True
            )
        }
        if any(float(wall.evaluate(point)[0]) <= 0 for wall in place.field.walls):
            return np.inf
        return float(place.field.formula.evaluate(point)[0]) - place.v_min - edge

    return (_first(above) + _first(lambda distance: above(-distance))) / 2


def _first(above: Callable[[float], float]) -> float:
    """The smallest distance, to a fraction of the way, at which the function is not below 0."""
    step = 1e-9
    while above(step) < 0 and step < 1e9:
        step *= 1.2
    low, high = step / 1.2, step
    if not np.isfinite(above(high)):  # a wall: by bisection
        for _ in range(60):
            middle = (low + high) / 2
            low, high = (middle, high) if above(middle) < 0 else (low, middle)
        return high
    return float(brentq(above, low, high, rtol=1e-14)) if above(low) < 0 else low
