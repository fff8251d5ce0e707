"""What a coordinate is worth: the space that lies below a value of it."""

from __future__ import annotations

from math import inf, pi
from typing import TYPE_CHECKING

import numpy as np

if TYPE_CHECKING:
    from eoscore.formula.field import Field
    from eoscore.measure.base import FloatArray

__all__ = ["between", "content", "dimension", "inside", "least", "weight"]

RADIAL = {"rho": (pi, 2), "r": (4 * pi / 3, 3)}  # volume factor and power of the disc and the ball


def least(name: str) -> float:
    """The least value of a coordinate: 0 for a distance, -inf else."""
    return 0.0 if name in RADIAL else -inf


def content(name: str, x: FloatArray) -> FloatArray:
    """Length, area or volume up to x: x, pi rho^2, 4/3 pi r^3."""
    factor, power = RADIAL.get(name, (1.0, 1))
    return np.asarray(factor * x**power)


def between(name: str, start: FloatArray, end: FloatArray, step: FloatArray | None = None) -> FloatArray:
    """Length, area or volume between two values of a coordinate, without a difference of nearly equal numbers.

    step: their distance, where it is known better than from the two.
    """
    step = np.abs(end - start) if step is None else step
    if name not in RADIAL:
        return step
    factor, power = RADIAL[name]
    if power == 2:
        return np.asarray(factor * step * (start + end))
    return np.asarray(factor * step * (start**2 + start * end + end**2))


def weight(name: str, x: FloatArray) -> FloatArray:
    """The derivative of `content`."""
    factor, power = RADIAL.get(name, (1.0, 1))
    return np.asarray(factor * power * x ** (power - 1))


def dimension(field: Field) -> int:
    """Dimension of the space of a field."""
    return sum(RADIAL.get(name, (1.0, 1))[1] for name in field.coordinates)


def inside(field: Field, points: dict[str, FloatArray]) -> np.ndarray[tuple[int, ...], np.dtype[np.bool_]]:
    """Whether points lie inside all walls."""
    from eoscore.formula import evaluate_many

    shape = np.broadcast_shapes(*(np.shape(x) for x in points.values()))
    if not field.walls:
        return np.ones(shape, dtype=bool)
    walls = evaluate_many(field.walls, points)
    return np.asarray(np.logical_and.reduce([np.broadcast_to(wall > 0, shape) for wall in walls]))
