"""Down to the local minima: Newton steps within a trust radius, many starts at once, walls by active sets."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.measure.landscape_settled import settled

if TYPE_CHECKING:
    from eoscore.measure.landscape_chart import Array, Chart

__all__ = ["along_walls", "descend", "held_walls"]

STEPS = 200
CUTS, PARTS = 12, 32  # of a step that leads through a wall


def descend(chart: Chart, starts: Array, radius: Array) -> tuple[Array, Array]:
    """Local minima from many starts (n, d) with first trust radii (n,): points and values.

    A point whose V falls without end stops beyond the chart's reach.
    """
    points, first, radius = starts.copy(), radius, radius.copy()
    walled, least = bool(chart.walls), 10 * chart.nudge if chart.creases or chart.walls else 1e-40
    value, slope, bend = chart.jet(points)
    active = np.isfinite(value)
    for _ in range(STEPS):
        now = np.flatnonzero(active)
        if not now.size:
            break
        helds = [held_walls(chart, points[k], slope[k]) for k in now] if walled else []
        curved, frames = along_walls(chart, points[now], slope[now], bend[now], helds)
        step = _steps(slope[now], curved, radius[now], frames)
        trial = points[now] + step
        if walled:
            rows = zip(now, trial, helds, strict=True)
            trial = np.array([_inside(chart, points[k], x, held) for k, x, held in rows])
        taken = trial - points[now]
        new = chart.value(trial)
        better = new < value[now]
        length = np.linalg.norm(step, axis=1)
        model = (
            np.einsum("ni,ni->n", slope[now], taken) + np.einsum("ni,nij,nj->n", taken, bend[now], taken) / 2
        )
        trusted = (new - value[now] < 0.5 * model) & (length > 0.7 * radius[now])
        far = better & (np.linalg.norm(taken, axis=1) > 0.5 * length)  # else a wall has cut the step short
        radius[now] = np.where(far, np.where(trusted, 2 * radius[now], radius[now]), length / 4)
        moved = now[better]
        points[moved] = trial[better]
        value[moved], slope[moved], bend[moved] = chart.jet(points[moved])
        small = length <= 1e-15 * np.linalg.norm(points[now], axis=1)
        active[now] = ~small & (radius[now] > 1e-17 * np.linalg.norm(points[now], axis=1)) & (length > 0)
        active[now] &= (radius[now] > least) & (np.linalg.norm(points[now], axis=1) < chart.reach)
    polished = _polished(chart, points)
    if walled:
        held = [bool(held_walls(chart, x, g)) for x, g in zip(points, slope, strict=True)]
        free = ~np.array(held, bool) & np.all(chart.margins(polished) >= 0, axis=0)
        polished = np.where(free[:, None], polished, points)
    points = polished
    if chart.creases and chart.nudge:
        return settled(chart, points, value, first, 1e9 * chart.nudge)
    return points, value


def _polished(chart: Chart, points: Array) -> Array:
    """A few plain Newton steps: V itself no longer tells where its minimum is to better than 1e-8."""
    for _ in range(3):
        _, slope, bend = chart.jet(points)
        size, axes = np.linalg.eigh(np.nan_to_num(bend))
        along = np.einsum("nji,nj->ni", axes, np.nan_to_num(slope))
        round_ = size > 1e-9 * np.max(np.abs(size), axis=1, keepdims=True)
        step = np.einsum("nij,nj->ni", axes, np.where(round_, along / np.where(round_, size, 1.0), 0.0))
        near = np.linalg.norm(step, axis=1) <= 1e-4 * (np.linalg.norm(points, axis=1) + 1e6 * chart.nudge)
        points = np.where(near[:, None], points - step, points)
    return points


def _steps(slope: Array, bend: Array, radius: Array, frames: list[Array] | None) -> Array:
    """Newton steps with the curvatures made positive, cut at the trust radius."""
    if frames is not None:
        return np.array(
            [
                frame @ _steps((g @ frame)[None], (frame.T @ h @ frame)[None], np.array([r]), None)[0]
                if frame.size
                else np.zeros(g.size)
                for g, h, r, frame in zip(slope, bend, radius, frames, strict=True)
            ]
        )
    size, axes = np.linalg.eigh(np.nan_to_num(bend))
    along = np.einsum("nji,nj->ni", axes, np.nan_to_num(slope))
    steepest = np.linalg.norm(along, axis=1, keepdims=True)
    floor = np.maximum(1e-10 * np.max(np.abs(size), axis=1, keepdims=True), steepest / radius[:, None] * 0.5)
    with np.errstate(all="ignore"):
        full = along / np.maximum(np.abs(size), 1e-12 * np.max(np.abs(size), axis=1, keepdims=True))
        capped = along / np.maximum(np.abs(size), floor)
    fits = np.linalg.norm(np.nan_to_num(full, posinf=np.inf), axis=1, keepdims=True) <= radius[:, None]
    step = -np.einsum("nij,nj->ni", axes, np.nan_to_num(np.where(fits, full, capped)))
    length = np.linalg.norm(step, axis=1, keepdims=True)
    result: Array = step * np.minimum(1.0, radius[:, None] / np.maximum(length, 1e-300))
    return result


def held_walls(chart: Chart, point: Array, slope: Array) -> list[int]:
    """The walls that hold the point, where V pushes it against them."""
    found = []
    for index in range(len(chart.walls)):
        margin, normal, _ = chart.wall_jet(index, point)
        size = float(np.linalg.norm(normal))
        if size and margin / size <= 1e-9 * (np.linalg.norm(point) + chart.nudge) and slope @ normal > 0:
            found.append(index)
    return found


def along_walls(
    chart: Chart, points: Array, slope: Array, bend: Array, helds: list[list[int]]
) -> tuple[Array, list[Array] | None]:
    """Curvatures of V, with those of the walls that hold each point, and the directions (d, k) along these."""
    if not helds:
        return bend, None
    curved, frames = bend.copy(), []
    for k, held in enumerate(helds):
        jets = [chart.wall_jet(index, points[k]) for index in held]
        normals = np.array([normal for _, normal, _ in jets]).reshape(-1, slope.shape[1])
        weights = np.linalg.lstsq(normals.T, slope[k])[0]
        for weight, (_, _, curve) in zip(weights, jets, strict=True):
            curved[k] -= weight * curve
        _, sizes, rows = np.linalg.svd(normals / np.linalg.norm(normals, axis=1, keepdims=True))
        frames.append(rows[int(np.sum(sizes > 1e-9)) :].T)
    return curved, frames


def _inside(chart: Chart, start: Array, end: Array, held: list[int]) -> Array:
    """The end, or the last point inside the walls on the way to it from the start (slid back onto them)."""
    reach = float(np.linalg.norm(end - start))
    for target in (_onto_walls(chart, end, held), end):
        if np.all(chart.margins(target) >= 0):
            return target
        back = _pulled_back(chart, target, reach)
        if back is not None:
            return back
    low, high = 0.0, 1.0
    for _ in range(CUTS):
        shares = np.linspace(low, high, PARTS + 1)
        inside = np.all(chart.margins(start + shares[:, None] * (end - start)) >= 0, axis=0)
        last = max(int(np.argmin(inside)), 1)  # the first outside
        low, high = shares[last - 1], shares[last]
    result: Array = start + low * (end - start)
    return result


def _onto_walls(chart: Chart, point: Array, held: list[int]) -> Array:
    """The point moved onto walls by Newton steps."""
    for _ in range(6 if held else 0):
        jets = [chart.wall_jet(index, point) for index in held]
        normals = np.array([normal for _, normal, _ in jets])
        back = np.linalg.lstsq(normals, np.array([margin for margin, _, _ in jets]))[0]
        point = point - back
        if np.linalg.norm(back) <= 1e-15 * np.linalg.norm(point):
            break
    return point


def _pulled_back(chart: Chart, point: Array, reach: float) -> Array | None:
    """The point moved to the inner side of the walls that it lies a little outside of; None if that is far."""
    moved = point.copy()
    for _ in range(12):
        if np.linalg.norm(moved - point) > reach:
            return None
        outside = [k for k, margin in enumerate(chart.margins(moved)) if margin < 0]
        if not outside:
            return moved if np.linalg.norm(moved - point) <= 0.3 * reach else None
        for k in outside:
            margin, normal, _ = chart.wall_jet(k, moved)
            square = float(normal @ normal)
            if not square:
                return None
            moved = moved + (1e-14 * np.linalg.norm(moved) * np.sqrt(square) - margin) * normal / square
    return None
