"""Readings of all stops of a grid, put together to one finding per quantity."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.answer.record import Finding, Points, Reason

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence

    from numpy.typing import NDArray

    from eoscore.answer.grid import Grid
    from eoscore.state import Reading

__all__ = ["assembled", "values_of"]


def values_of(grid: Grid, readings: Sequence[Reading], part: str = "value") -> NDArray[np.float64]:
    """The values (or the `error`s, or the `scale`s) of one quantity at all stops, shaped like the grid."""
    entries, own = _entries(grid, readings), len(grid.conditions)
    arrays = [np.abs(r.value) if (array := getattr(r, part)) is None else array for r in readings]
    if entries:  # a stop without a number has no entries of its own
        arrays = [array[..., None] if array.ndim == own else array for array in arrays]
    return np.asarray(grid.assemble(arrays, entries))


def assembled(grid: Grid, readings: Sequence[Reading]) -> Finding:
    """One quantity over the whole grid; its uncertainty is added later."""
    routes = dict.fromkeys(reading.route for reading in readings)
    return Finding(
        value=values_of(grid, readings),
        unit=readings[0].unit,
        error=values_of(grid, readings, "error"),
        route="; ".join(routes),
        reasons=tuple(_reasons(grid, readings)),
        scale=None if all(r.scale is None for r in readings) else values_of(grid, readings, "scale"),
    )


def _entries(grid: Grid, readings: Sequence[Reading]) -> tuple[int, ...]:
    """The length of the last axis that a quantity has beyond those of the grid."""
    own = [r.value.shape[len(grid.conditions) :] for r in readings if r.value.ndim > len(grid.conditions)]
    return max(own, default=())


def _reasons(grid: Grid, readings: Sequence[Reading]) -> Iterator[Reason]:
    """Every reason once, with its points in the order of the grid's names."""
    none = np.zeros(tuple(axis.points for axis in grid.conditions), dtype=bool)
    words = dict.fromkeys(reason.words for reading in readings for reason in reading.reasons)
    for text in words:
        marks = [
            np.logical_or.reduce(
                [none, *(reason.where for reason in reading.reasons if reason.words == text)]
            )
            for reading in readings
        ]
        points = np.argwhere(grid.assemble(marks))
        yield Reason(text, Points(points))
