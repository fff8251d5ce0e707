"""The landscape of two or three coordinates that do not part."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.measure.landscape_axes import axes_of
from eoscore.measure.landscape_bottom import minimum_at
from eoscore.measure.landscape_chart import Chart
from eoscore.measure.landscape_descent import descend, distinct
from eoscore.measure.landscape_grid import Grid, Leak, grid_of
from eoscore.measure.landscape_pass import pass_near
from eoscore.measure.landscape_record import Escape, Landscape, Minimum, sense

if TYPE_CHECKING:
    from eoscore.formula.field import Field
    from eoscore.measure.landscape_axes import Axis
    from eoscore.measure.landscape_chart import Array

__all__ = ["survey_space"]

MOST_STARTS = 300
FAR = 14  # decades beyond all structure at which the grid ends


def survey_space(field: Field) -> Landscape:
    """The landscape of a field whose coordinates do not part."""
    chart = Chart(field)
    axes = axes_of(chart)
    chart.nudge = 10.0 ** (min(axis.least for axis in axes) - 9)
    grid = _grid(chart, axes)
    points, values, scales = _minima(chart, grid, axes)
    if not values.size:
        return Landscape(field.coordinates, None, why=_nothing(chart, grid))
    bottom = minimum_at(chart, points[0], float(values[0]), float(scales[0]))
    leak = grid.leak(points[0])
    if leak is None:
        escape, error = None, 1e-12
    else:
        escape, error = _escape(chart, grid, leak, points[0], bottom.value)
    minima = _joined(chart, grid, points, values, scales, bottom, escape)
    why = ""
    if escape is not None and escape.energy - bottom.value <= 1e-13 * abs(bottom.value):
        why = f"V stays at its least value without end ({escape.words}): this potential holds nothing"
    return Landscape(field.coordinates, bottom, minima, escape, why, error)


def _grid(chart: Chart, axes: list[Axis]) -> Grid:
    """The finest grid of a fair number of points."""
    most = {2: 60_000, 3: 60_000}[chart.dimension]
    lines = [axis.points(4.0, FAR) for axis in axes]
    for density in (3.0, 2.0, 1.5, 1.0):
        if np.prod([line.size for line in lines], dtype=float) <= most:
            break
        lines = [axis.points(density, FAR) for axis in axes]
    return grid_of(chart, lines, np.zeros(chart.dimension), np.eye(chart.dimension))


def _minima(chart: Chart, grid: Grid, axes: list[Axis]) -> tuple[Array, Array, Array]:
    """All local minima found, lowest first, with a length over which V is resolved near each."""
    index = grid.minima(MOST_STARTS)
    if not index.size:
        return np.zeros((0, chart.dimension)), np.zeros(0), np.zeros(0)
    radius = grid.spacing(index)
    points, values = descend(chart, grid.points(index), radius)
    reach = 10.0 ** (max(axis.most for axis in axes) + 3)
    values = np.where(np.linalg.norm(points, axis=1) < reach, values, np.inf)
    least = 10.0 ** min(axis.least for axis in axes)
    kept = distinct(points, values, 1e-3 * least)
    kept = _nearest_first(points, values, kept)
    return points[kept], values[kept], np.full(len(kept), least)


def _nearest_first(points: Array, values: Array, kept: list[int]) -> list[int]:
    """Of equally low minima the one nearest the origin comes first, then the one at positive coordinates."""
    if not kept:
        return kept
    spread = abs(values[kept[-1]] - values[kept[0]])
    low = [k for k in kept if values[k] - values[kept[0]] <= 1e-12 * (abs(values[kept[0]]) + spread)]
    first = min(low, key=lambda k: (round(float(np.linalg.norm(points[k])), 12), *(-points[k]).tolist()))
    return [first, *(k for k in kept if k != first)]


def _escape(chart: Chart, grid: Grid, leak: Leak, bottom: Array, low: float) -> tuple[Escape, float]:
    """The leak of the grid made exact: the pass near it, or the limit at infinity."""
    out = leak.outward / np.linalg.norm(leak.outward)
    if leak.at_infinity:
        return Escape(chart.names, leak.energy, None, tuple(out.tolist())), 1e-12
    spacing = float(grid.spacing(np.array([grid.nearest(leak.point)]))[0])
    found = pass_near(chart, leak.point, spacing)
    close = [p for p in found if abs(p.value - leak.energy) <= 0.5 * (leak.energy - low)]
    if not close:
        return Escape(chart.names, leak.energy, tuple(leak.point.tolist()), tuple(out.tolist())), 0.1
    best = min(close, key=lambda p: abs(p.value - leak.energy))
    way = best.way if best.way @ (best.point - bottom) >= 0 else -best.way
    return Escape(chart.names, best.value, tuple(best.point.tolist()), tuple(way.tolist())), 1e-12


def _joined(
    chart: Chart, grid: Grid, points: Array, values: Array, scales: Array, bottom: Minimum, escape: Escape | None
) -> tuple[Minimum, ...]:
    """The bottom and the other minima of its region below the escape."""
    ceiling = escape.energy if escape else np.inf
    region = grid.region(points[0], ceiling)
    level = bottom.kind in ("flat", "ring", "sphere")
    found = [bottom]
    for point, value, scale in zip(points[1:], values[1:], scales[1:], strict=True):
        same = level and value - bottom.value <= 1e-9 * abs(float(np.ptp(values)) + abs(bottom.value))
        if value < ceiling and not same and region[grid.nearest(point)]:
            found.append(minimum_at(chart, point, float(value), float(scale)))
    return tuple(found)


def _nothing(chart: Chart, grid: Grid) -> str:
    """Why there is no minimum."""
    if not np.any(np.isfinite(grid.v)):
        return "no point lies inside all walls"
    low = grid.points(np.argwhere(grid.v == np.min(grid.v))[:1])[0]
    return f"V has no local minimum (it falls along {sense(chart.names, low.tolist())}): this potential holds nothing"
