"""Up to a pass: a point where V is stationary and falls to two sides only, free or along walls."""

from __future__ import annotations

from itertools import combinations
from typing import TYPE_CHECKING

import numpy as np

if TYPE_CHECKING:
    from eoscore.measure.landscape_chart import Array, Chart

__all__ = ["Pass", "pass_near"]

STEPS = 300


class Pass:
    """A pass: its point, V there, and the unit vector along which V falls to both sides."""

    def __init__(self, point: Array, value: float, way: Array) -> None:
        self.point, self.value, self.way = point, value, way


def pass_near(chart: Chart, start: Array, radius: float) -> list[Pass]:
    """The passes found from a start, with and without the walls within the radius."""
    near = []
    for index in range(len(chart.walls)):
        margin, normal, _ = chart.wall_jet(index, start)
        if margin <= 3 * radius * float(np.linalg.norm(normal)):
            near.append(index)
    found = []
    for size in range(min(len(near), start.size - 1) + 1):
        for held in combinations(near, size):
            reached = _followed(chart, start, radius, held)
            if reached is not None:
                found.append(reached)
    return found


def _followed(chart: Chart, start: Array, radius: float, held: tuple[int, ...]) -> Pass | None:
    """Up the lowest mode and down all others, in Newton steps along the held walls."""
    point, best = start.copy(), np.inf
    for _ in range(STEPS):
        slope, bend, frame, back = _reduced(chart, point, held)
        if frame.size == 0:
            return None
        size, axes = np.linalg.eigh(bend)
        along = slope @ axes
        with np.errstate(all="ignore"):
            step = -along / np.maximum(np.abs(size), 1e-13 * np.max(np.abs(size)))
        step[0] = -step[0]
        move = axes @ np.nan_to_num(step)
        length = float(np.linalg.norm(move))
        if length > radius:
            move *= radius / length
        force = float(np.linalg.norm(slope))
        radius = radius * (1.3 if force < best else 0.5)
        best = min(best, force)
        point = point + frame @ move + back
        if not np.all(np.isfinite(point)) or np.linalg.norm(point) > 1e15:
            return None
        if length + np.linalg.norm(back) <= 4e-16 * np.linalg.norm(point) or force == 0:
            break
    slope, bend, frame, _ = _reduced(chart, point, held)
    size, axes = np.linalg.eigh(bend)
    flat = 1e-9 * np.max(np.abs(size))
    outside = any(m < 0 for k, m in enumerate(chart.margins(point)) if k not in held) if chart.walls else False
    if outside or size[0] >= -flat or np.sum(size < -flat) != 1:
        return None
    return Pass(point, float(chart.jet(point[None])[0][0]), frame @ axes[:, 0])


def _reduced(chart: Chart, point: Array, held: tuple[int, ...]) -> tuple[Array, Array, Array, Array]:
    """Slope and curvature of V along the held walls, the frame of directions along them, the way back to them.

    The curvature is that of the Lagrangian V - sum m g, so that curved walls count.
    """
    _, slopes, bends = chart.jet(point[None])
    slope, bend = np.nan_to_num(slopes[0]), np.nan_to_num(bends[0])
    frame = np.eye(point.size)
    if not held:
        return slope, bend, frame, np.zeros(point.size)
    jets = [chart.wall_jet(index, point) for index in held]
    normals = np.array([normal for _, normal, _ in jets])
    weights = np.linalg.lstsq(normals.T, slope)[0]
    for weight, (_, _, curve) in zip(weights, jets, strict=True):
        bend = bend - weight * curve
    _, _, rows = np.linalg.svd(normals)
    frame = rows[len(held) :].T
    back = -np.linalg.lstsq(normals, np.array([margin for margin, _, _ in jets]))[0]
    return slope @ frame, frame.T @ bend @ frame, frame, back
