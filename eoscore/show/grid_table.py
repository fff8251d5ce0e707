"""A grid of answers as one table, and as rows for other formats; the first name runs slowest."""

from __future__ import annotations

import math
from dataclasses import replace
from typing import TYPE_CHECKING

import numpy as np

from eoscore.show.prefix import fitting, written
from eoscore.show.table import columns

if TYPE_CHECKING:
    from collections.abc import Iterator

    from numpy.typing import NDArray
    from rich.table import Table

    from eoscore.answer.record import FoundAnswer, Interval

__all__ = ["Column", "grid_columns", "grid_rows", "grid_tables", "hidden_rows"]

_GAP = 3  # blanks between columns
_ROWS = 40  # more rows than this are cut in the middle


class Column:
    """One column of a grid in long form: a head, an SI unit and a number per point (nan for none).

    `sigma` is the standard deviation at every point, `interval` the sampled one, as flat as the values.
    """

    def __init__(
        self,
        name: str,
        unit: str,
        values: NDArray[np.float64],
        sigma: NDArray[np.float64] | None = None,
        interval: Interval | None = None,
    ) -> None:
        self.name, self.unit, self.values = name, unit, values
        self.sigma, self.interval = sigma, interval


def grid_columns(answer: FoundAnswer) -> Iterator[Column]:
    """The axes, then the quantities, flattened in C order; `freq` and `r_min` give a column per entry."""
    shape = tuple(values.size for values in answer.over.values())
    meshes = np.meshgrid(*answer.over.values(), indexing="ij")
    for name, mesh in zip(answer.over, meshes, strict=True):
        yield Column(name, answer.over_units[name], mesh.reshape(-1))
    for name, finding in answer.found.items():
        flat = finding.value.reshape(int(np.prod(shape)), -1)
        sigma = None if finding.sigma is None else finding.sigma.reshape(flat.shape)
        for entry in range(flat.shape[1]):
            label = name if finding.value.ndim == len(shape) else f"{name}_{entry + 1}"
            part = None if sigma is None else sigma[:, entry]
            yield Column(
                label, finding.unit, flat[:, entry], part, _flat(finding.interval, flat.shape, entry)
            )


def _flat(interval: Interval | None, shape: tuple[int, ...], entry: int) -> Interval | None:
    """The sampled interval of one entry, a number per point."""
    if interval is None:
        return None
    low, high, answered = (
        each.reshape(shape)[:, entry] for each in (interval.low, interval.high, interval.answered)
    )
    return replace(interval, low=low, high=high, answered=answered)


def grid_tables(answer: FoundAnswer, width: int) -> Iterator[Table]:
    """The grid for a screen: one prefix per column, cut in the middle where it is long.

    Where its columns do not stand side by side in `width` characters, further tables repeat the names of the grid.
    """
    heads, rows = grid_rows(answer)
    sizes = [max(map(len, column)) + _GAP for column in zip(heads, *rows, strict=True)]
    for shown in _side_by_side(sizes, len(answer.over), width):
        table = columns(*(heads[place] for place in shown))
        for column in table.columns:
            column.justify = "right"
        for row in rows:
            table.add_row(*(row[place] for place in shown))
        yield table


def _side_by_side(sizes: list[int], names: int, width: int) -> Iterator[list[int]]:
    """Columns that fit a width, each time after those of the names; one at least."""
    axes = list(range(names))
    shown = axes.copy()
    for place in range(names, len(sizes)):
        if len(shown) > names and sum(sizes[each] for each in (*shown, place)) > width:
            yield shown
            shown = axes.copy()
        shown.append(place)
    yield shown


def grid_rows(answer: FoundAnswer) -> tuple[tuple[str, ...], list[tuple[str, ...]]]:
    """The heads and the rows of the table as texts, with a row of dots where rows are left out."""
    parts = list(grid_columns(answer))
    shown = _shown(parts[0].values.size)
    heads, texts = zip(*(each for part in parts for each in _written_columns(part, shown)), strict=True)
    rows = list(zip(*texts, strict=True))
    if hidden_rows(answer):
        rows.insert(_ROWS // 2, ("…",) * len(heads))
    return heads, rows


def hidden_rows(answer: FoundAnswer) -> int:
    """How many rows of a grid its table leaves out."""
    rows = math.prod(values.size for values in answer.over.values())
    return rows - 2 * (_ROWS // 2) if rows > _ROWS else 0


def _shown(rows: int) -> NDArray[np.intp]:
    """The rows of a table that are written: all, or the first and the last ones."""
    half = _ROWS // 2
    return np.arange(rows) if rows <= _ROWS else np.r_[:half, rows - half : rows]


def _written_columns(part: Column, shown: NDArray[np.intp]) -> Iterator[tuple[str, list[str]]]:
    """The head and the texts, and those of a sampled interval; the prefix fits the whole, whatever is shown of it."""
    finite = np.abs(part.values[np.isfinite(part.values) & (part.values != 0.0)])
    factor, unit = fitting(float(np.median(finite)), part.unit) if finite.size else (1.0, part.unit)
    sigmas = [None] * shown.size if part.sigma is None else (part.sigma[shown] / factor).tolist()
    rest = "" if unit == "1" else f" ({unit})"
    pairs = zip((part.values[shown] / factor).tolist(), sigmas, strict=True)
    yield f"{part.name}{rest}", [written(value, sigma) for value, sigma in pairs]
    if part.interval is not None:
        for end, values in (("low", part.interval.low), ("high", part.interval.high)):
            yield (
                f"{end} {part.name}{rest}",
                [written(x, digits=4) for x in (values[shown] / factor).tolist()],
            )
