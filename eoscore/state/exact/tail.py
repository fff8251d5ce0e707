"""Levels above the known ones, as a smooth density.

A smooth count N(E) of levels (phase space, or the action of an orbit) is N(E_n) = n + 1/2 + q + d_n at the levels of
one row: q is 0, or 1/4 for each wall that the orbit reaches, and d_n falls as 1/n far up. It is measured at three known
levels, and continued as (a + b n + c n^2)^(-1/2).
"""

from __future__ import annotations

from functools import cache
from typing import TYPE_CHECKING

import numpy as np

from eoscore.measure.rules import legendre
from eoscore.state.exact.integers import joined

if TYPE_CHECKING:
    from collections.abc import Callable

    from eoscore.state.reading import FloatArray

__all__ = ["NODES", "WALL", "edges_of", "ladder", "slopes_of"]

NODES = 14  # of a panel; the energies of the next one are twice as high
WALL = 0.25  # of a level is lost where an orbit reaches a wall


def ladder(
    energies: FloatArray,
    count: Callable[[FloatArray], FloatArray],
    floor: FloatArray,
    top: float,
    breaks: tuple[float, ...] = (),
    walls: FloatArray | None = None,
) -> tuple[FloatArray, FloatArray]:
    """Energies and weights (rows, any) that stand for all levels of each row up to `top`, J.

    energies: the known levels (rows, n), ascending from n = 0; `count`: N(E) of (rows, any) energies; floor: (rows,),
    the energy at which N vanishes; breaks: energies where N is not smooth; walls: (rows, any), where orbits come to
    reach a wall.
    """
    last = energies[:, -1:]
    edges = edges_of(last, floor[:, None], max(top, float(last.min())), breaks)
    x, w = legendre(NODES)
    width = np.diff(edges)[:, :, None]
    e = edges[:, :-1, None] + width * x
    rows = e.shape[0]
    number = _numbers(energies, count, e.reshape(rows, -1)).reshape(e.shape)
    dn = (w * (number @ slopes_of().T)).reshape(rows, -1)
    parts = [
        (energies, np.broadcast_to(joined(energies.shape[1]), energies.shape)),
        (e.reshape(rows, -1), dn),
    ]
    if walls is not None:
        above = walls > last
        parts.append((np.where(above, walls, last), np.where(above, -WALL, 0.0)))
    return np.concatenate([p for p, _ in parts], axis=1), np.concatenate([q for _, q in parts], axis=1)


def edges_of(last: FloatArray, floor: FloatArray, top: float, breaks: tuple[float, ...]) -> FloatArray:
    """From the last known level to `top` by steps of a ratio of at most two above the floor; empty beyond `top`."""
    ratio = np.maximum((top - floor) / (last - floor), 1.0)
    panels = max(int(np.ceil(np.log2(ratio.max()))), 1)
    edges = floor + (last - floor) * ratio ** (np.arange(panels + 1) / panels)
    edges[:, :1] = last
    marks = np.array([b for b in breaks if b < top])
    return (
        np.sort(np.concatenate([edges, np.clip(marks, last, edges[:, -1:])], axis=1)) if marks.size else edges
    )


def _numbers(energies: FloatArray, count: Callable[[FloatArray], FloatArray], e: FloatArray) -> FloatArray:
    """The count less q + d at energies of the tail."""
    final = energies.shape[1] - 1
    step = final // 3
    fixed = final - step * np.arange(3)
    every = count(np.concatenate([energies[:, fixed], e], axis=1))
    excess = every[:, :3] - (fixed + 0.5)
    left = excess - np.round(excess[:, :1] / WALL) * WALL
    with np.errstate(divide="ignore", invalid="ignore"):
        one, two = np.nan_to_num((left[:, :1] / left[:, 1:]).T ** 2, nan=1.0, posinf=1.0)[:, :, None]
    slope, bend = np.maximum((3 - 4 * one + two) / 2, 0.0), np.maximum(1 - 2 * one + two, 0.0)
    tail = every[:, 3:]
    t = np.maximum(tail - every[:, :1], 0.0) / step
    return np.asarray(tail - left[:, :1] / np.sqrt(1 + slope * t + bend * t * t / 2))


@cache
def slopes_of() -> FloatArray:
    """The derivative at the nodes of the polynomial through values there."""
    x, _ = legendre(NODES)
    gap = x[:, None] - x
    np.fill_diagonal(gap, 1.0)
    own = 1 / gap.prod(axis=1)
    matrix = own / (own[:, None] * gap)
    np.fill_diagonal(matrix, 0.0)
    np.fill_diagonal(matrix, -matrix.sum(axis=1))
    return np.asarray(matrix)
