"""A potential that is a sum over independent coordinates: its landscape from theirs."""

from __future__ import annotations

from dataclasses import replace
from functools import reduce
from typing import TYPE_CHECKING

import numpy as np

from eoscore.formula import constant
from eoscore.formula.field import Field
from eoscore.formula.structure import additive_parts
from eoscore.measure.landscape_record import Escape, Kind, Landscape, Minimum

if TYPE_CHECKING:
    from collections.abc import Sequence

    from eoscore.formula import Formula

__all__ = ["independent_parts", "together"]

MOST_MINIMA = 1000


def independent_parts(field: Field) -> list[Field]:
    """The field as a sum of fields of fewer coordinates; walls hold together what they join."""
    names = field.coordinates
    summands = additive_parts(field.formula, names)
    groups: list[tuple[set[str], Formula]] = [(set(reach), part) for reach, part in summands if reach]
    rest = sum((part for reach, part in summands if not reach), constant(0))
    seen = set().union(*(group for group, _ in groups))
    groups += [({name}, constant(0)) for name in names if name not in seen]
    for wall in field.walls:
        joined = [group for group in groups if group[0] & wall.variables]
        if len(joined) > 1:
            whole = set().union(*(group for group, _ in joined)), sum((f for _, f in joined), constant(0))
            groups = [whole, *(group for group in groups if not group[0] & wall.variables)]
    groups.sort(key=lambda group: min(map(names.index, group[0])))
    groups[0] = (groups[0][0], groups[0][1] + rest)
    return [
        Field(
            tuple(name for name in names if name in group),
            formula,
            tuple(wall for wall in field.walls if wall.variables <= group),
        )
        for group, formula in groups
    ]


def together(coordinates: tuple[str, ...], parts: Sequence[Landscape]) -> Landscape:
    """The landscape of the sum: the bottoms add, and the easiest way out of any part is the way out."""
    order = [[name for part in parts for name in part.coordinates].index(name) for name in coordinates]
    failed = [part.why for part in parts if not part.holds]
    bottoms = [part.bottom for part in parts if part.bottom is not None]
    if len(bottoms) < len(parts):
        return Landscape(coordinates, None, why=failed[0])
    bottom = _sum(bottoms, order)
    leaky = [part for part in parts if part.escape is not None]
    if not leaky:
        return Landscape(coordinates, bottom, _minima(parts, order, np.inf), why="".join(failed[:1]))
    way = min(leaky, key=lambda part: part.depth)
    escape = _escape(coordinates, way, parts, order)
    escape = replace(escape, energy=bottom.value + way.depth)
    minima = _minima(parts, order, escape.energy)
    return Landscape(coordinates, bottom, minima, escape, "".join(failed[:1]), max(p.error for p in parts))


def _escape(
    coordinates: tuple[str, ...], way: Landscape, parts: Sequence[Landscape], order: list[int]
) -> Escape:
    found = way.escape
    if found is None or way.bottom is None:
        message = "the way out has no escape"
        raise ValueError(message)
    position, direction = [], []
    for part in parts:
        if part is way:
            position += list(found.position or way.bottom.position)
            direction += list(found.direction)
        elif part.bottom is not None:
            position += list(part.bottom.position)
            direction += [0.0] * len(part.coordinates)
    place = None if found.position is None else tuple(position[i] for i in order)
    return Escape(coordinates, way.depth, place, tuple(direction[i] for i in order))


def _minima(parts: Sequence[Landscape], order: list[int], ceiling: float) -> tuple[Minimum, ...]:
    """The sums of the parts' minima below the ceiling, the bottom first, then the lowest."""
    shelves = [part.minima[:MOST_MINIMA] for part in parts]
    while np.prod([len(shelf) for shelf in shelves], dtype=float) > 1e6:
        longest = max(range(len(shelves)), key=lambda i: len(shelves[i]))
        shelves[longest] = shelves[longest][: len(shelves[longest]) // 2]
    values = [np.array([minimum.value for minimum in shelf]) for shelf in shelves]
    sums = reduce(np.add.outer, values)
    below = np.flatnonzero(sums.ravel() < ceiling)
    lowest = below[np.argsort(sums.ravel()[below], kind="stable")][:MOST_MINIMA]
    chosen = zip(*np.unravel_index(lowest[lowest > 0], sums.shape), strict=True)
    bottom = _sum([shelf[0] for shelf in shelves], order)
    return (bottom, *(_sum([shelf[i] for shelf, i in zip(shelves, at, strict=True)], order) for at in chosen))


def _sum(minima: Sequence[Minimum], order: list[int]) -> Minimum:
    position = [x for minimum in minima for x in minimum.position]
    size = len(position)
    hessian, start = np.zeros((size, size)), 0
    for minimum in minima:
        end = start + len(minimum.position)
        hessian[start:end, start:end] = minimum.hessian
        start = end
    kinds = [minimum.kind for minimum in minima]
    ranked: tuple[Kind, ...] = ("other", "wall", "cone", "sphere", "ring", "flat", "quadratic")
    curvatures = None
    if all(minimum.curvatures is not None for minimum in minima):
        curvatures = tuple(sorted(c for minimum in minima for c in minimum.curvatures or ()))
    return Minimum(
        tuple(position[i] for i in order),
        sum(minimum.value for minimum in minima),
        next(kind for kind in ranked if kind in kinds),
        hessian[np.ix_(order, order)],
        curvatures,
    )
