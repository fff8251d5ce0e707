"""A field of several coordinates as numbers: V, its derivatives and its walls at arrays of points."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import NDArray

from eoscore.formula import gradient, hessian
from eoscore.formula.interval import bounds
from eoscore.formula.tape import tape_of
from eoscore.measure.landscape_crease import Creases

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence

    from eoscore.formula import Formula
    from eoscore.formula.field import Field

__all__ = ["Array", "Chart", "Index", "split_wall"]

Array = NDArray[np.float64]
Index = NDArray[np.intp]
RADIAL = frozenset({"rho", "r", "p"})


class Chart:
    """V(x) for points of shape (n, d); radial coordinates are followed through 0 as even functions.

    `nudge` is a length far below all structure: where a derivative is not defined (the tip of a cone, the axis
    of a formula with 0/0), it is taken that far away. `reach` is a length beyond all structure.
    """

    def __init__(self, field: Field) -> None:
        self.names = field.coordinates
        self.dimension = len(self.names)
        self.radial = np.array([name in RADIAL for name in self.names])
        self.formula = field.formula
        self.walls = tuple(part for wall in field.walls for part in split_wall(wall))
        upper = [entry for i, row in enumerate(hessian(self.formula, self.names)) for entry in row[i:]]
        self._value = tape_of(self.formula, *self.walls)
        self._slopes = tape_of(self.formula, *gradient(self.formula, self.names))
        self._jet = tape_of(self.formula, *gradient(self.formula, self.names), *upper)
        self._wall_jets = [
            tape_of(wall, *gradient(wall, self.names), *sum(hessian(wall, self.names), ()))
            for wall in self.walls
        ]
        self.creases = Creases(self.formula, self.names)
        self._upper = np.triu_indices(self.dimension)
        self.nudge, self.reach = 0.0, np.inf

    def at(self, points: Array) -> dict[str, Array]:
        """Points as values of the coordinates, radial ones by their size."""
        columns = enumerate(self.names)
        return {name: np.abs(points[..., i]) if self.radial[i] else points[..., i] for i, name in columns}

    def sides(self, points: Array) -> Array:
        """The sign of each radial coordinate, 1 for the others and at 0."""
        return np.where(self.radial & (points < 0), -1.0, 1.0)

    def value(self, points: Array) -> Array:
        """V at points (..., d), inf outside the walls and where it is not defined."""
        return self.value_at(self.at(points))

    def value_at(self, values: dict[str, Array]) -> Array:
        """V at coordinates that broadcast, inf outside the walls and where it is not defined."""
        v, *walls = self._value.run(values)
        outside = np.isnan(v)
        for wall in walls:
            outside |= ~(wall >= 0)
        return np.where(outside, np.inf, v)

    def slopes(self, points: Array) -> Array:
        """First derivatives, shape (..., d)."""
        return np.stack(self._slopes.run(self.at(points))[1:], axis=-1) * self.sides(points)

    def jet(self, points: Array) -> tuple[Array, Array, Array]:
        """V without walls (n,), gradient (n, d), Hessian (n, d, d)."""
        values = self._jet.run(self.at(points))
        lost = ~np.isfinite(sum(values[1:]))
        if lost.any() and self.nudge:
            aside = points[lost] + self.nudge * np.sqrt(np.arange(2.0, 2.0 + self.dimension))
            for value, better in zip(values[1:], self._jet.run(self.at(aside))[1:], strict=True):
                value[lost] = better
        d = self.dimension
        curvature = np.empty((*values[0].shape, d, d))
        for entry, i, j in zip(values[1 + d :], *self._upper, strict=True):
            curvature[..., i, j] = curvature[..., j, i] = entry
        sides = self.sides(points)
        curvature *= sides[..., :, None] * sides[..., None, :]
        return values[0], np.stack(values[1 : 1 + d], axis=-1) * sides, curvature

    def wall_jet(self, index: int, point: Array) -> tuple[float, Array, Array]:
        """A wall function at one point: value, gradient (d,), Hessian (d, d)."""
        values = np.array([float(v) for v in self._wall_jets[index].run(self.at(point))])
        if self.nudge and not np.all(np.isfinite(values)):
            aside = point + self.nudge * np.sqrt(np.arange(2.0, 2.0 + self.dimension))
            values[1:] = [float(v) for v in self._wall_jets[index].run(self.at(aside))[1:]]
        d = self.dimension
        sides = self.sides(point)
        bend = values[1 + d :].reshape(d, d) * np.outer(sides, sides)
        return float(values[0]), values[1 : 1 + d] * sides, bend

    def unresolved(self, points: Array, others: Array) -> NDArray[np.bool_]:
        """Whether V at points differs from V at others by rounding alone."""
        values = self.at(points)
        low, high = bounds(self.formula, {name: (x, x) for name, x in values.items()})
        rise = self._value.run(values)[0] - self._value.run(self.at(others))[0]
        return np.asarray(np.abs(rise) <= high - low)

    def wall_slopes(self, points: Array) -> Iterator[tuple[Array, Array]]:
        """Each wall function (...) and its gradient (..., d) at points."""
        for tape in self._wall_jets:
            margin, *normal = tape.run(self.at(points))[: 1 + self.dimension]
            yield margin, np.stack(normal, axis=-1) * self.sides(points)

    def margins(self, points: Array) -> Array:
        """The wall functions, shape (walls, ...)."""
        return np.array(self._value.run(self.at(points))[1:])


def split_wall(wall: Formula) -> Sequence[Formula]:
    """A wall that is the least of several, as several."""
    parts, waiting = [], [wall]
    while waiting:
        f = waiting.pop()
        if f.op == "min":
            waiting.extend(f.operands)
        else:
            parts.append(f)
    return parts
