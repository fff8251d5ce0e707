"""Down where V is not smooth: along creases, into corners and onto tips, to which Newton steps do not lead.

Where the way down ends beside a crease, the shortest mean of slopes sampled round about leads on, in steps that
shrink as no mean leads down any more (Burke, Lewis and Overton, SIAM J. Optim. 15, 751, 2005). What that ends near
is then made exact: V is smooth along the creases that meet there, and its minimum along them is one for Newton.
"""

from __future__ import annotations

from itertools import combinations, islice, product
from typing import TYPE_CHECKING

import numpy as np

from eoscore.measure.landscape_crease import held_jet, onto
from eoscore.measure.landscape_distinct import distinct

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from eoscore.measure.landscape_chart import Array, Chart

__all__ = ["rests", "round_about", "settled"]

ROUNDS = 150
BESIDE = 1e-6  # of a length over which V is resolved: a way down that ends this near a crease was ended by it
SHRINK = 0.25  # of the radius of sampling where no mean of slopes leads down
LEVEL = 1e-4  # of the steepest slope, below which the mean counts as none
REACHES = 2.0 ** np.arange(-4, 9)  # of the radius, at which V is tried along the way
STEPS, POLISHED, TURNS = 60, 4, 6
MOST = 60  # places that are followed along creases
MOST_TRIALS = 8  # combinations of so many of the creases near a point
STEEP = 10.0  # of the steepest slope: what holds at a wall


def settled(chart: Chart, points: Array, values: Array, radius: Array, scale: float) -> tuple[Array, Array]:
    """Points (n, d) with their V, those that were stopped by creases brought on down.

    radius (n,): m, from which on slopes are sampled. scale: a length over which V is resolved.
    """
    points, values = points.copy(), values.copy()
    inside = np.flatnonzero(np.isfinite(values) & (np.linalg.norm(points, axis=1) < chart.reach))
    near = np.min(chart.creases.distance(chart, points[inside]), axis=0, initial=np.inf) <= BESIDE * scale
    stuck = inside[near | (_newton(chart, points[inside]) > BESIDE * scale)]
    if stuck.size:
        points[stuck], values[stuck] = _brought_down(
            chart, points[stuck], values[stuck], radius[stuck], scale
        )
    return points, values


def _newton(chart: Chart, points: Array) -> Array:
    """The lengths of Newton steps from points (n, d)."""
    _, slope, bend = chart.jet(points)
    size, axes = np.linalg.eigh(np.nan_to_num(bend))
    along = np.einsum("nji,nj->ni", axes, np.nan_to_num(slope))
    steep = np.maximum(np.abs(size), 1e-7 * np.max(np.abs(size), axis=1, keepdims=True) + 1e-300)
    return np.asarray(np.linalg.norm(along / steep, axis=1))


def rests(chart: Chart, points: Array, scale: float) -> tuple[NDArray[np.bool_], NDArray[np.bool_]]:
    """Which of points (n, d) lie on creases, and beside which V is nowhere lower: directions at several distances."""
    on = np.min(chart.creases.distance(chart, points), axis=0) <= BESIDE * scale
    lowest = np.ones(len(points), bool)
    ways = round_about(points.shape[1])
    turned = np.linalg.qr(np.random.default_rng(5).normal(size=(points.shape[1],) * 2))[0]
    for aside in scale * np.array([1e-2, 1e-4]):
        v = chart.value(points)
        rise = chart.value(points[:, None] + aside * np.concatenate([ways, ways @ turned])) - v[:, None]
        size = np.max(np.where(np.isfinite(rise), np.abs(rise), 0.0), axis=1)
        lowest &= np.min(rise, axis=1) >= -1e-9 * size - 1e-14 * np.abs(v)
    return on, lowest


def _brought_down(
    chart: Chart, points: Array, values: Array, radius: Array, scale: float
) -> tuple[Array, Array]:
    """In turns by sampled slopes, which find the creases, and along these, until neither leads lower."""
    for _ in range(TURNS):
        points, values = _sampled(chart, points, values, radius, scale)
        radius = np.zeros(len(points))
        for k in distinct(points, values, BESIDE * scale)[:MOST]:
            same = np.linalg.norm(points - points[k], axis=1) <= BESIDE * scale
            before = float(values[k])
            points[same], values[same] = _exact(chart, points[k], before, scale)
            if values[k] < before - 1e-12 * abs(before):
                radius[same] = 1e-2 * scale
        if not radius.any():
            break
    return points, values


def _sampled(chart: Chart, points: Array, values: Array, radius: Array, scale: float) -> tuple[Array, Array]:
    """Down by means of slopes sampled within radii (n,), until these have shrunk to rounding."""
    points, values, radius = points.copy(), values.copy(), np.minimum(radius, scale)
    rng, ways = np.random.default_rng(11), round_about(points.shape[1])
    for _ in range(ROUNDS):
        smallest = 1e-14 * (np.linalg.norm(points, axis=1) + scale)
        now = np.flatnonzero((radius > smallest) & (np.linalg.norm(points, axis=1) < chart.reach))
        if not now.size:
            break
        turned = ways @ np.linalg.qr(rng.normal(size=(points.shape[1],) * 2))[0]
        slopes = _slopes(chart, points[now, None] + radius[now, None, None] * turned)
        mean = _shortest(slopes)
        size, steepest = np.linalg.norm(mean, axis=1), np.max(np.linalg.norm(slopes, axis=2), axis=1)
        reach = radius[now, None] * REACHES
        way = -mean / np.maximum(size, 1e-300)[:, None]
        trial = points[now, None] + reach[..., None] * way[:, None]
        heights = chart.value(trial)
        falls = np.diff(np.column_stack([values[now], heights]), axis=1) < 0
        best = np.maximum(np.sum(np.logical_and.accumulate(falls, axis=1), axis=1) - 1, 0)  # over no barrier
        rows = np.arange(now.size)
        new, step = heights[rows, best], reach[rows, best]
        lower = (values[now] - new > 0.05 * size * step) & (size > LEVEL * steepest)
        moved = now[lower]
        points[moved], values[moved] = trial[rows, best][lower], new[lower]
        radius[now] = np.where(lower, np.clip(step, radius[now] / 2, 4 * radius[now]), SHRINK * radius[now])
    return points, values


def round_about(dimension: int) -> Array:
    """Unit vectors along the axes and between them, (m, d)."""
    ways = np.array([way for way in product((-1.0, 0.0, 1.0), repeat=dimension) if any(way)])
    return np.asarray(ways / np.linalg.norm(ways, axis=1, keepdims=True))


def _slopes(chart: Chart, points: Array) -> Array:
    """Slopes of V; outside of walls those of the walls, steeper than all others."""
    slopes = np.nan_to_num(chart.slopes(points))
    if chart.walls:
        steepest = STEEP * np.max(np.linalg.norm(slopes, axis=-1), axis=-1)[..., None, None]
        for margin, normal in chart.wall_slopes(points):
            size = np.linalg.norm(normal, axis=-1, keepdims=True)
            slopes = np.where((margin < 0)[..., None], -steepest * normal / np.maximum(size, 1e-300), slopes)
    return slopes


def _shortest(vectors: Array) -> Array:
    """The shortest mean of vectors (n, m, d) with weights that are not negative, roughly, by Gilbert's method."""
    rows = np.arange(len(vectors))
    mean = vectors[rows, np.argmin(np.linalg.norm(vectors, axis=2), axis=1)]
    for _ in range(30):
        least = vectors[rows, np.argmin(np.einsum("nmd,nd->nm", vectors, mean), axis=1)]
        way = least - mean
        with np.errstate(all="ignore"):
            share = -np.einsum("nd,nd->n", mean, way) / np.einsum("nd,nd->n", way, way)
        mean = mean + np.clip(np.nan_to_num(share), 0.0, 1.0)[:, None] * way
    return np.asarray(mean)


def _exact(chart: Chart, point: Array, value: float, scale: float) -> tuple[Array, float]:
    """The minimum along the creases that meet near a point; the point itself where that is none."""
    near = np.flatnonzero(chart.creases.distance(chart, point[None])[:, 0] <= BESIDE * scale).tolist()
    for count in range(len(near), 0, -1):
        for groups in islice(combinations(near, count), MOST_TRIALS):
            held = sorted({k for group in groups for k in chart.creases.groups[group]})
            found = _along(chart, point, held, scale)
            if found is not None and found[1] <= value + 1e-14 * abs(value):
                return found
    return point, value


def _along(chart: Chart, start: Array, held: list[int], scale: float) -> tuple[Array, float] | None:
    """The minimum of V where the crease functions of these indices vanish, and V there, by Newton steps."""
    point, radius = onto(chart, start, held, BESIDE * scale), scale
    for _ in range(STEPS):
        if point is None or not np.linalg.norm(point) < chart.reach:
            return None
        step = _step_along(chart, point, held, 1e-3 * radius)
        length = float(np.linalg.norm(step))
        trial = onto(chart, point + step * min(1.0, radius / max(length, 1e-300)), held, radius)
        if trial is not None and float(np.diff(chart.value(np.array([point, trial])))[0]) < 0:
            point, radius = trial, 2 * radius
        else:
            radius = min(length, radius) / 4
            if radius <= 1e-9 * scale:
                break
    for _ in range(POLISHED):  # V itself no longer tells where its minimum is
        trial = None if point is None else onto(chart, point + _step_along(chart, point, held), held, radius)
        point = point if trial is None else trial
    return None if point is None else (point, float(chart.value(point[None])[0]))


def _step_along(chart: Chart, point: Array, held: list[int], aside: float = 0.0) -> Array:
    """The Newton step along creases, with curvatures made positive; `aside` (m) from a saddle."""
    slope, bend, frame = held_jet(chart, point, held)
    size, axes = np.linalg.eigh(bend)
    largest = np.max(np.abs(size), initial=0.0)
    step = -(slope @ axes) / np.maximum(np.abs(size), 1e-9 * largest + 1e-300)
    if np.linalg.norm(step) < 1e-6 * aside and np.any(size < -1e-6 * largest):
        step = aside * (size == size[0])
    return np.asarray(frame @ axes @ step)
