"""Up to the passes: points where V is stationary and falls to two sides only, free or along walls."""

from __future__ import annotations

from dataclasses import dataclass
from itertools import combinations
from typing import TYPE_CHECKING

import numpy as np

if TYPE_CHECKING:
    from eoscore.measure.landscape_chart import Array, Chart

__all__ = ["Pass", "passes_from", "still", "walled_passes"]

STEPS = 200
LEVEL = 1e-9  # curvatures below this share of the largest count as none


@dataclass(frozen=True)
class Pass:
    """A pass: its point, V there, and the unit vector along which V falls to both sides."""

    point: Array
    value: float
    way: Array


def passes_from(chart: Chart, starts: Array, radius: Array) -> list[Pass]:
    """The free passes reached from starts (n, d) by Newton steps up the lowest mode and down all others."""
    points, radius, best = starts.copy(), radius.copy(), np.full(len(starts), np.inf)
    active = np.ones(len(starts), bool)
    for _ in range(STEPS):
        now = np.flatnonzero(active)
        if not now.size:
            break
        _, slope, bend = chart.jet(points[now])
        size, axes = np.linalg.eigh(np.nan_to_num(bend))
        along = np.einsum("nji,nj->ni", axes, np.nan_to_num(slope))
        step = -along / np.maximum(np.abs(size), 1e-12 * np.max(np.abs(size), axis=1, keepdims=True) + 1e-300)
        step[:, 0] *= -1
        force, length = np.linalg.norm(along, axis=1), np.linalg.norm(step, axis=1)
        radius[now] *= np.where(force < best[now], 1.5, 0.5)
        best[now] = np.minimum(best[now], force)
        step *= np.minimum(1.0, radius[now] / np.maximum(length, 1e-300))[:, None]
        points[now] += np.einsum("nij,nj->ni", axes, step)
        size_now = np.linalg.norm(points[now], axis=1)
        active[now] = (
            (length > 4e-16 * size_now) & (size_now < chart.reach) & (radius[now] > 1e-17 * size_now)
        )
    value, slope, bend = chart.jet(points)
    found = []
    for k in np.flatnonzero(np.linalg.norm(points, axis=1) < chart.reach):
        size, axes = np.linalg.eigh(np.nan_to_num(bend[k]))
        if _is_pass(size) and still(slope[k], size, points[k], chart):
            found.append(Pass(points[k], float(value[k]), axes[:, 0]))
    return found


def _is_pass(size: Array) -> bool:
    """Whether exactly one curvature is negative."""
    return int(np.sum(size < -LEVEL * np.max(np.abs(size)))) == 1


def still(slope: Array, size: Array, point: Array, chart: Chart) -> bool:
    """Whether the slope has vanished: a Newton step would not move the point."""
    step = float(np.linalg.norm(slope)) / float(np.max(np.abs(size)))
    return step <= 1e-6 * (float(np.linalg.norm(point)) + 1e3 * chart.nudge)


def walled_passes(chart: Chart, start: Array, radius: float, steps: int = STEPS) -> list[Pass]:
    """The passes that lie on walls within the radius of a start, reached in so many steps."""
    near = []
    for index in range(len(chart.walls)):
        margin, normal, _ = chart.wall_jet(index, start)
        if margin <= 3 * radius * float(np.linalg.norm(normal)):
            near.append(index)
    found = []
    for size in range(1, min(len(near), start.size - 1) + 1):
        for held in combinations(near, size):
            reached = _along_walls(chart, start, radius, held, steps)
            if reached is not None:
                found.append(reached)
    return found


def _along_walls(chart: Chart, start: Array, radius: float, held: tuple[int, ...], steps: int) -> Pass | None:
    """The same steps, within the walls that hold."""
    point, best = start.copy(), np.inf
    for _ in range(steps):
        slope, bend, frame, back = _reduced(chart, point, held)
        size, axes = np.linalg.eigh(bend)
        step = -(slope @ axes) / np.maximum(np.abs(size), 1e-13 * np.max(np.abs(size)) + 1e-300)
        step[0] = -step[0]
        length, force = float(np.linalg.norm(step)), float(np.linalg.norm(slope))
        radius, best = radius * (1.5 if force < best else 0.5), min(best, force)
        point = point + frame @ axes @ step * min(1.0, radius / max(length, 1e-300)) + back
        if not np.linalg.norm(point) < chart.reach:
            return None
        if length + np.linalg.norm(back) <= 4e-16 * np.linalg.norm(point):
            break
    slope, bend, frame, _ = _reduced(chart, point, held)
    size, axes = np.linalg.eigh(bend)
    others = [margin for index, margin in enumerate(chart.margins(point)) if index not in held]
    if min(others, default=0.0) < 0 or not _is_pass(size) or not still(slope, size, point, chart):
        return None
    return Pass(point, float(chart.jet(point[None])[0][0]), frame @ axes[:, 0])


def _reduced(chart: Chart, point: Array, held: tuple[int, ...]) -> tuple[Array, Array, Array, Array]:
    """Slope and curvature of V along the held walls, the frame of directions along them, the way back to them.

    The curvature is that of the Lagrangian V - sum m g, so that curved walls count.
    """
    _, slopes, bends = chart.jet(point[None])
    slope, bend = np.nan_to_num(slopes[0]), np.nan_to_num(bends[0])
    jets = [chart.wall_jet(index, point) for index in held]
    normals = np.array([normal for _, normal, _ in jets])
    weights = np.linalg.lstsq(normals.T, slope)[0]
    for weight, (_, _, curve) in zip(weights, jets, strict=True):
        bend = bend - weight * curve
    frame = np.linalg.svd(normals)[2][len(held) :].T
    back = -np.linalg.lstsq(normals, np.array([margin for margin, _, _ in jets]))[0]
    return slope @ frame, frame.T @ bend @ frame, frame, back
