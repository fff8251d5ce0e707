"""A grid cut into chunks, by the question alone: whoever answers them, the numbers are the same to the last bit."""

from __future__ import annotations

from dataclasses import dataclass, replace
from itertools import pairwise, product
from math import ceil, prod
from typing import TYPE_CHECKING

import numpy as np

from eoscore.answer.grid import Grid

if TYPE_CHECKING:
    from collections.abc import Sequence

    from eoscore.language.question import Axis, Question

__all__ = ["Chunk", "chunks_of"]

# Large enough that handing over and keeping a chunk (some ms) stays far below the work in it, small enough that
# little is lost with a chunk, and that its arrays stay in the cache of the processor.
_STATES = 2**15  # points of one trap
_STATES_OF_TRAPS = 2**18  # where every chunk has to hold its traps first
_TRAPS, _SHARES = 32, 64  # traps of a chunk at most; chunks among which traps are shared at least


@dataclass(frozen=True)
class Chunk:
    """A box of a grid: the question by its index, and (start, stop) along each of its axes."""

    question: int
    spans: tuple[tuple[int, int], ...]

    @property
    def box(self) -> tuple[slice, ...]:
        """The place of its points in arrays over the whole grid."""
        return tuple(slice(*span) for span in self.spans)

    @property
    def points(self) -> int:
        """How many points it has."""
        return prod(stop - start for start, stop in self.spans)

    def of(self, question: Question) -> Question:
        """The question over these points only."""
        axes = (_cut(axis, span) for axis, span in zip(question.over, self.spans, strict=True))
        return replace(question, over=tuple(axes))


def chunks_of(index: int, question: Question) -> tuple[Chunk, ...]:
    """The chunks of a question with this index, the first name slowest; one chunk where it has no grid."""
    grid = Grid(question.over)
    stops = prod(axis.points for axis in grid.parameters)
    room = _STATES_OF_TRAPS if grid.parameters else _STATES
    lengths, room = _lengths(grid.conditions, room)
    traps, _ = _lengths(grid.parameters, min(room, _TRAPS, ceil(stops / _SHARES)))
    lengths |= traps
    edges = [_edges(axis.points, lengths[axis.name]) for axis in question.over]
    return tuple(Chunk(index, spans) for spans in product(*(tuple(pairwise(each)) for each in edges)))


def _lengths(axes: Sequence[Axis], room: int) -> tuple[dict[str, int], int]:
    """How long a chunk is along each axis, the fastest filled first, and the room that is left."""
    lengths = {}
    for axis in reversed(axes):
        lengths[axis.name] = min(axis.points, max(1, room))
        room //= lengths[axis.name]
    return lengths, max(1, room)


def _edges(points: int, length: int) -> list[int]:
    count = ceil(points / length)
    return [int(edge) for edge in np.linspace(0, points, count + 1)]


def _cut(axis: Axis, span: tuple[int, int]) -> Axis:
    values = tuple(axis.values[slice(*span)].tolist())
    return replace(axis, kind="list", ends=values, points=len(values))
