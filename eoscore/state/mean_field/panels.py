"""Nodes of a place for functions that turn sharply at an energy: the edge of a condensate."""

from __future__ import annotations

from itertools import pairwise
from typing import TYPE_CHECKING

import numpy as np

from eoscore.measure.rules import legendre

if TYPE_CHECKING:
    from eoscore.measure import Measure
    from eoscore.state.reading import FloatArray

__all__ = ["NODES", "panels"]

RATIO = 4.0  # of neighbouring panels: a singular point at the end of the row costs 3^-32 with 16 nodes
NODES = 16
FINEST = 2.0**-46  # of the energies in play: below, the bottom counts as one
AT_BREAK = 2.0**-30  # of a stretch beside a break of the measure


def panels(
    measure: Measure, edge: float, sharp: float, end: float, order: int = NODES
) -> tuple[FloatArray, FloatArray]:
    """Energies v (J) and weights dOmega up to `end`, panels shrinking towards 0, the breaks of the measure and `edge`.

    Each panel has `order` nodes. At the edge (none where it is not above 0) functions change over energies of the
    order of `sharp`.
    """
    end = min(end, measure.top)
    first = FINEST * min(end, edge if edge > 0 else end)
    marks = {first: first, end: AT_BREAK * end}
    marks |= {b: AT_BREAK * b for b in measure.breaks if first < b < end}
    if first < edge < end:
        marks[edge] = min(sharp, edge / 2)
    edges = np.concatenate([_row(a, b, marks[a], marks[b]) for a, b in pairwise(sorted(marks))])
    edges = np.unique(edges)
    x, w = legendre(order)
    width = np.diff(edges)
    v = (edges[:-1, None] + width[:, None] * x).ravel()
    dv = (width[:, None] * w).ravel()
    weights = dv * measure.density(v)
    return np.concatenate([[0.0], v]), np.concatenate([[float(measure.volume(first))], weights])


def _row(a: float, b: float, near_a: float, near_b: float) -> FloatArray:
    """Edges from a to b, the panels at the ends as narrow as these, each next one wider."""
    half = (b - a) / 2
    up, down = (half / RATIO ** np.arange(_count(half, near)) for near in (near_a, near_b))
    return np.concatenate([[a], a + up[::-1], (b - down)[1:], [b]])


def _count(half: float, near: float) -> int:
    return 1 + max(int(np.ceil(np.log(half / max(near, 1e-300)) / np.log(RATIO))), 1)
