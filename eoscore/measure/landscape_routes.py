"""The routes between wells: which passes join which minima, and the lowest way out."""

from __future__ import annotations

from itertools import combinations
from typing import TYPE_CHECKING

import numpy as np

from eoscore.measure.landscape_creased_pass import creased_passes
from eoscore.measure.landscape_descent import descend
from eoscore.measure.landscape_pass import Pass, passes_from, walled_passes
from eoscore.measure.landscape_settled import round_about

if TYPE_CHECKING:
    from eoscore.measure.landscape_chart import Array, Chart
    from eoscore.measure.landscape_grid import Grid, Leak

__all__ = ["lowest_way_out"]

OUT = -1
MOST_STARTS = 100
MOST_WELLS = 12
MOST_CREASED = 10
DISTANCES, FEW = 4, 30  # at which passes on walls are looked for, and Newton steps to each
SEEN = 0.02
CLOSE = 0.15  # of the depth: a pass this near the grid's level is the one the grid has seen


def lowest_way_out(chart: Chart, grid: Grid, leak: Leak | None, minima: Array) -> tuple[Pass | None, float]:
    """The highest pass of the lowest way from the first of the minima (n, d) to the outside; None if none is found.

    Each pass found is descended on both sides, so the way is a real one: its energy bounds the escape from above.
    Where the grid has seen a lower one, its nearest pass is given with the share of the depth that may be wrong.
    """
    found: list[Pass] = []
    best = None
    if leak is not None and not leak.at_infinity:
        found = _near(chart, grid, leak)
        best = _through(chart, found, minima)
        if best is not None and abs(best.value - leak.energy) > CLOSE * (leak.energy - leak.bottom):
            best = None
    others = _passes(chart, grid, minima, np.inf if best is None else best.value - 1e-12 * abs(best.value))
    if best is None or others:
        best = _through(chart, _distinct(chart, found + others), minima)
    if best is None and chart.walls:
        found = _distinct(chart, found + others + _along_walls(chart, grid, minima[0]))
        best = _through(chart, found, minima)
    if leak is None:
        return best, 0.0
    # A long chain of wells, some of them unknown: the grid has seen a way, and that this is its highest pass.
    seen = [one for one in found if abs(one.value - leak.energy) < SEEN * (leak.energy - leak.bottom)]
    nearest = min(seen, key=lambda one: abs(one.value - leak.energy), default=None)
    if best is None:
        return nearest, 0.0
    if best.value - leak.energy <= SEEN * (leak.energy - leak.bottom):
        return best, 0.0
    return (best, 0.0) if nearest is None else (nearest, SEEN)


def _through(chart: Chart, passes: list[Pass], minima: Array) -> Pass | None:
    """The same over the passes given: the least highest pass from well to well (Dijkstra's method)."""
    if not passes:
        return None
    wells = list(minima)
    ends = _ends(chart, passes, wells)
    level: dict[int, tuple[float, Pass | None]] = {0: (-np.inf, None)}
    fixed: set[int] = set()
    while True:
        reached = [node for node in level if node not in fixed]
        if not reached:
            return None
        here = min(reached, key=lambda node: level[node][0])
        if here == OUT:
            return level[OUT][1]
        fixed.add(here)
        for through, (one, other) in zip(passes, ends, strict=True):
            if here in (one, other):
                there = other if here == one else one
                highest = max(level[here], (through.value, through), key=lambda way: way[0])
                if there not in level or highest[0] < level[there][0]:
                    level[there] = highest


def _near(chart: Chart, grid: Grid, leak: Leak) -> list[Pass]:
    """Passes near the leak of the grid."""
    radius = grid.spacing(np.array([grid.nearest(leak.point)]))
    found = passes_from(chart, leak.point[None], radius)
    found += walled_passes(chart, leak.point, float(radius[0]))
    return _distinct(chart, found + creased_passes(chart, leak.point, float(radius[0])))


def _passes(chart: Chart, grid: Grid, minima: Array, ceiling: float) -> list[Pass]:
    """Passes below a ceiling from the grid's saddles, and from between the lowest wells."""
    index = grid.saddles(MOST_STARTS)
    index = index[grid.v[tuple(index.T)] < ceiling]
    starts, radius = [grid.points(index)], [grid.spacing(index)]
    for one, other in combinations(minima[:MOST_WELLS], 2):
        line = one + np.linspace(0, 1, 33)[1:-1, None] * (other - one)
        starts.append(line[np.argmax(chart.value(line))][None])
        radius.append(np.array([np.linalg.norm(other - one) / 10]))
    found = passes_from(chart, np.concatenate(starts), np.concatenate(radius))
    for start, reach in zip(starts[0][:MOST_CREASED], radius[0][:MOST_CREASED], strict=True):
        found += creased_passes(chart, start, float(reach))
    return _distinct(chart, [one for one in found if one.value < ceiling])


def _along_walls(chart: Chart, grid: Grid, bottom: Array) -> list[Pass]:
    """Passes on walls reached from all round the bottom, at several distances."""
    ways = round_about(bottom.size)
    reach = np.concatenate([np.abs(axis[axis != 0]) for axis in grid.axes])
    near, far = (max(float(np.quantile(reach, share)), 1e8 * chart.nudge) for share in (0.1, 0.7))
    found: list[Pass] = []
    for distance in np.geomspace(near, far, DISTANCES):
        for way in ways:
            found += walled_passes(chart, bottom + distance * way, float(distance) / 2, FEW)
    return found


def _distinct(chart: Chart, found: list[Pass]) -> list[Pass]:
    """Passes inside the walls, each once, lowest first."""
    kept: list[Pass] = []
    for one_pass in sorted(found, key=lambda p: p.value):
        if _outside(chart, one_pass.point):
            continue
        close = 1e-6 * (np.linalg.norm(one_pass.point) + 1e6 * chart.nudge)
        if not any(np.linalg.norm(one_pass.point - other.point) <= close for other in kept):
            kept.append(one_pass)
    return kept


def _outside(chart: Chart, point: Array) -> bool:
    """Whether a point lies outside a wall by more than rounding."""
    slack = 1e-9 * (np.linalg.norm(point) + 1e3 * chart.nudge)
    jets = (chart.wall_jet(index, point) for index in range(len(chart.walls)))
    return any(margin < -slack * np.linalg.norm(normal) for margin, normal, _ in jets)


def _ends(chart: Chart, passes: list[Pass], wells: list[Array]) -> list[tuple[int, int]]:
    """The wells (or OUT) on both sides of each pass; wells met for the first time are added."""
    points = np.array([p.point for p in passes])
    ways = np.array([p.way for p in passes])
    aside = 1e-5 * (np.linalg.norm(points, axis=1) + 1e7 * chart.nudge)
    starts = np.concatenate([points + aside[:, None] * ways, points - aside[:, None] * ways])
    ends, _ = descend(chart, starts, np.tile(10 * aside, 2))
    nodes = []
    for end in ends:
        if not np.linalg.norm(end) < chart.reach:
            nodes.append(OUT)
            continue
        distance = np.linalg.norm(np.array(wells) - end, axis=1)
        nearest = int(np.argmin(distance))
        if distance[nearest] > 1e-4 * (np.linalg.norm(end) + 1e6 * chart.nudge):
            wells.append(end)
            nearest = len(wells) - 1
        nodes.append(nearest)
    return list(zip(nodes[: len(passes)], nodes[len(passes) :], strict=True))
