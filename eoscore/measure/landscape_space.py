"""The landscape of two or three coordinates that do not part."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.measure.landscape_axes import axes_of
from eoscore.measure.landscape_bottom import minimum_at
from eoscore.measure.landscape_chart import Chart
from eoscore.measure.landscape_descent import along_walls, descend, held_walls
from eoscore.measure.landscape_distinct import distinct
from eoscore.measure.landscape_grid import Grid, Leak
from eoscore.measure.landscape_record import Escape, Landscape, Minimum, sense
from eoscore.measure.landscape_routes import lowest_way_out
from eoscore.measure.landscape_settled import rests
from eoscore.measure.landscape_valley import lowest_valley

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from eoscore.formula.field import Field
    from eoscore.measure.landscape_axes import Axis
    from eoscore.measure.landscape_chart import Array

__all__ = ["survey_space"]

MOST_STARTS = 300
MOST_WALLED = 40  # with walls each start is followed by itself
MOST_POINTS = 30_000
ROUNDED = 1e-7  # of the largest curvature: a negative one below it is none
ASIDE = 0.01  # of the least length at which anything happens


def survey_space(field: Field) -> Landscape:
    """The landscape of a field whose coordinates do not part."""
    chart = Chart(field)
    axes = axes_of(chart)
    chart.nudge = 10.0 ** (min(axis.least for axis in axes) - 9)
    chart.reach = 10.0 ** (max(axis.most for axis in axes) + 2)
    grid = _grid(chart, axes)
    points, values, scales = _minima(chart, grid, axes)
    if not values.size:
        return Landscape(field.coordinates, None, why=_nothing(chart, grid))
    bottom = minimum_at(chart, points[0], float(values[0]), float(scales[0]))
    leak = grid.leak(points[0])
    least, far = 10.0 ** min(axis.least for axis in axes), 10.0 ** (max(axis.most for axis in axes) + 1)
    valley = lowest_valley(chart, points[0], bottom.value, least, far)
    if valley is not None and (
        leak is None or valley.energy < leak.energy - 1e-9 * abs(leak.energy - bottom.value)
    ):
        leak = valley
    escape, error = _escape(chart, grid, leak, points, bottom.value)
    ceiling = min([escape.energy if escape else np.inf, leak.energy if leak else np.inf])
    minima = _joined(chart, grid, (points, values, scales), bottom, ceiling)
    why = ""
    if escape is not None and escape.energy - bottom.value <= 1e-13 * abs(bottom.value):
        why = f"V stays at its least value without end ({escape.words}): this potential holds nothing"
    return Landscape(field.coordinates, bottom, minima, escape, why, error)


def _grid(chart: Chart, axes: list[Axis]) -> Grid:
    """A grid of a fair number of points, more of them along axes with many turns."""
    d = chart.dimension
    counts = [max(round(MOST_POINTS ** (1 / d)) - 8, axis.turns.size + 8) for axis in axes]
    while np.prod(counts, dtype=float) > MOST_POINTS and max(counts) > 12:
        counts = [
            max(round(0.9 * count), min(axis.turns.size + 8, count)) if count > 12 else count
            for count, axis in zip(counts, axes, strict=True)
        ]
        if all(count <= axis.turns.size + 8 or count <= 12 for count, axis in zip(counts, axes, strict=True)):
            break
    lines = [axis.points(count) for axis, count in zip(axes, counts, strict=True)]
    return Grid(chart, lines, np.zeros(d), np.eye(d))


def _minima(chart: Chart, grid: Grid, axes: list[Axis]) -> tuple[Array, Array, Array]:
    """All local minima found, lowest first, with a length over which V is resolved near each."""
    index = grid.minima(MOST_WALLED if chart.walls else MOST_STARTS)
    if not index.size:
        return np.zeros((0, chart.dimension)), np.zeros(0), np.zeros(0)
    radius = grid.spacing(index)
    points, values = _snapped(chart, axes, *descend(chart, grid.points(index), radius))
    values = np.where(np.linalg.norm(points, axis=1) < chart.reach, values, np.inf)
    least = 10.0 ** min(axis.least for axis in axes)
    stands = _stands(chart, points) & ~_falls(chart, points, ASIDE * least)
    if chart.creases:
        on, lowest = rests(chart, points, least)
        stands = lowest & (on | stands)
    values = np.where(stands, values, np.inf)
    kept = distinct(points, values, 1e-3 * least)
    kept = _nearest_first(points, values, kept)
    return points[kept], values[kept], np.full(len(kept), least)


def _stands(chart: Chart, points: Array) -> NDArray[np.bool_]:
    """Whether no curvature is negative; on walls, whether none along them is."""
    _, slope, bend = (np.nan_to_num(rows) for rows in chart.jet(points))
    helds = (
        [held_walls(chart, point, g) for point, g in zip(points, slope, strict=True)] if chart.walls else []
    )
    curved, frames = along_walls(chart, points, slope, bend, helds)
    if frames is None:
        size = np.linalg.eigvalsh(curved)
        stands: NDArray[np.bool_] = size[:, 0] >= -ROUNDED * np.max(np.abs(size), axis=1)
        return stands
    along = [np.linalg.eigvalsh(f.T @ c @ f) for f, c in zip(frames, curved, strict=True)]
    return np.array([not size.size or size[0] >= -ROUNDED * np.max(np.abs(size)) for size in along], bool)


def _falls(chart: Chart, points: Array, aside: float) -> NDArray[np.bool_]:
    """Whether V goes on falling with its slope beside a point: the way down ended in rounding; walls may stop it."""
    if chart.walls:
        return np.zeros(len(points), dtype=bool)
    slope = np.nan_to_num(chart.slopes(points))
    size = np.linalg.norm(slope, axis=1)
    step = slope * (aside / np.maximum(size, 1e-300))[:, None]
    here = chart.value(points)
    lower = chart.value(points - step) < here - 0.5 * size * aside - 1e-15 * np.abs(here)
    return np.asarray(lower & (size > 0))


def _snapped(chart: Chart, axes: list[Axis], points: Array, values: Array) -> tuple[Array, Array]:
    """Coordinates within rounding of a mark put on it, where V does not rise by it: tips of cones, axes."""
    snapped = points.copy()
    for i, axis in enumerate(axes):
        for mark in axis.marks:
            close = np.abs(points[:, i] - mark) < 10.0 ** (axis.least - 4)
            snapped[close, i] = mark
    better = chart.value(snapped)
    kept = better <= values + 1e-15 * np.abs(values)
    if chart.creases:  # V at a tip is all rounding
        dust = np.max(np.abs(snapped - points), axis=1) <= 1e-9 * 10.0 ** min(axis.least for axis in axes)
        kept |= dust & np.isfinite(better) & chart.unresolved(points, snapped)
    return np.where(kept[:, None], snapped, points), np.where(kept, better, values)


def _nearest_first(points: Array, values: Array, kept: list[int]) -> list[int]:
    """Of equally low minima the one nearest the origin comes first, then the one at positive coordinates."""
    if not kept:
        return kept
    spread = abs(values[kept[-1]] - values[kept[0]])
    low = [k for k in kept if values[k] - values[kept[0]] <= 1e-12 * (abs(values[kept[0]]) + spread)]
    first = min(low, key=lambda k: (round(float(np.linalg.norm(points[k])), 12), *(-points[k]).tolist()))
    return [first, *(k for k in kept if k != first)]


def _escape(
    chart: Chart, grid: Grid, leak: Leak | None, minima: Array, low: float
) -> tuple[Escape | None, float]:
    """The leak of the grid made exact: the pass near it, or the limit at infinity; and its relative error."""
    limit = leak.energy if leak is not None and leak.at_infinity else np.inf
    if leak is None or (leak.at_infinity and grid.lowest_exit >= limit):
        found, guessed = None, 0.0
    else:
        found, guessed = lowest_way_out(chart, grid, leak, minima)
    if found is not None and found.value < limit:
        way = found.way if found.way @ (found.point - minima[0]) >= 0 else -found.way
        doubt = 1e-12 if leak is None or leak.energy > found.value - 0.3 * (found.value - low) else 0.3
        place = np.where(chart.radial, np.abs(found.point), found.point)
        return Escape(chart.names, found.value, tuple(place.tolist()), tuple(way.tolist())), max(
            doubt, guessed
        )
    if leak is None:
        return None, 1e-12
    out = tuple((leak.outward / np.linalg.norm(leak.outward)).tolist())
    if leak.at_infinity:
        return Escape(chart.names, leak.energy, None, out), 1e-12
    return Escape(chart.names, leak.energy, tuple(leak.point.tolist()), out), 0.3


def _joined(
    chart: Chart, grid: Grid, found: tuple[Array, Array, Array], bottom: Minimum, ceiling: float
) -> tuple[Minimum, ...]:
    """The bottom and the other minima of its region below the ceiling; `found` are points, values, lengths."""
    points, values, scales = found
    region = grid.region(points[0], ceiling)
    others = (values < ceiling) & np.array([region[grid.nearest(point)] for point in points])
    others[0] = False
    if bottom.kind in ("flat", "ring", "sphere"):  # points of the same level bottom are no further minima
        aside = (
            0.1
            * np.sqrt(scales[0] * chart.reach)
            * np.vstack([np.eye(chart.dimension), -np.eye(chart.dimension)])
        )
        rises = np.abs(chart.value(points[0] + aside) - bottom.value)
        others &= values - bottom.value > 1e-9 * np.max(rises, where=np.isfinite(rises), initial=0.0)
    return (bottom, *(minimum_at(chart, points[k], values[k], scales[k]) for k in np.flatnonzero(others)))


def _nothing(chart: Chart, grid: Grid) -> str:
    """Why there is no minimum."""
    if not np.any(np.isfinite(grid.v)):
        return "no point lies inside all walls"
    low = grid.points(np.argwhere(grid.v == np.min(grid.v))[:1])[0]
    return f"V has no local minimum (it falls along {sense(chart.names, low.tolist())}): this potential holds nothing"
