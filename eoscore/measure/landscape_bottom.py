"""The kind of a bottom in several coordinates, and its principal curvatures."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.measure.landscape_descent import descend
from eoscore.measure.landscape_record import Kind, Minimum, multiplicity

if TYPE_CHECKING:
    from eoscore.measure.landscape_chart import Array, Chart

__all__ = ["minimum_at"]

LEVEL = 1e-9  # curvatures below this share of the largest are looked at more closely


def minimum_at(chart: Chart, point: Array, value: float | np.float64, scale: float | np.float64) -> Minimum:
    """The local minimum at a point; `scale` is a length over which V is resolved there."""
    value, scale = float(value), float(scale)
    _, slope, bend = (x[0] for x in chart.jet(point[None]))
    position = tuple(float(x) for x in _folded(chart, point))
    if chart.walls and _on_a_wall(chart, point, slope, scale):
        kind: Kind = "wall"
        if np.linalg.norm(slope) * scale <= 1e-12 * abs(value) and not np.any(bend):
            return Minimum(position, value, "flat", bend, (0.0,) * _dimension(chart))
        return Minimum(position, value, kind, bend)
    size, axes = np.linalg.eigh(np.nan_to_num(bend))
    growth = _growth(chart, point, axes, scale, size)
    if np.any(growth < 1.5):
        return Minimum(position, value, "cone", bend)
    level = [k for k in range(size.size) if size[k] <= LEVEL * np.max(np.abs(size))]
    shapes = [_level_along(chart, point, value, axes[:, k], scale) for k in level]
    if "rises" in shapes:
        return Minimum(position, value, "other", bend)
    size[level] = 0.0
    kind = "quadratic"
    if level:
        kind = "sphere" if len(level) > 1 and "bends" in shapes else "ring" if "bends" in shapes else "flat"
    curvatures, turned = _in_space(chart, point, size, axes, scale)
    return Minimum(position, value, "ring" if turned and kind == "quadratic" else kind, bend, curvatures)


def _folded(chart: Chart, point: Array) -> Array:
    """The point with radial coordinates made positive, and exact zeros where rounding left dust."""
    largest = np.max(np.abs(point), initial=0.0)
    clean = np.where(np.abs(point) < 1e-13 * largest, 0.0, point)
    radial = [multiplicity(name) > 1 for name in chart.names]
    result: Array = np.where(radial, np.abs(clean), clean)
    return result


def _dimension(chart: Chart) -> int:
    return sum(map(multiplicity, chart.names))


def _on_a_wall(chart: Chart, point: Array, slope: Array, scale: float) -> bool:
    for index in range(len(chart.walls)):
        margin, normal, _ = chart.wall_jet(index, point)
        size = float(np.linalg.norm(normal))
        if size and margin / size <= 1e-6 * scale and slope @ normal >= 0:
            return True
    return False


def _growth(chart: Chart, point: Array, axes: Array, scale: float, size: Array) -> Array:
    """The power by which V rises along each principal axis that is not level, from the slopes on both sides."""
    steep = size > LEVEL * np.max(np.abs(size))
    powers = [2.0]
    for k in np.flatnonzero(steep | ~np.isfinite(size)):
        step = 1e-4 * scale * axes[:, k]
        slopes = [chart.slopes((point + s * step)[None])[0] @ axes[:, k] * np.sign(s) for s in (-2, -1, 1, 2)]
        if min(slopes[1], slopes[2]) > 0:
            powers += [1 + np.log2(slopes[0] / slopes[1]), 1 + np.log2(slopes[3] / slopes[2])]
    return np.array(powers)


def _level_along(chart: Chart, point: Array, value: float, axis: Array, scale: float) -> str:
    """Whether V is level along a straight line ("straight"), a curve ("bends"), or rises.

    A point aside, far enough for V to differ, slides back to the bottom if V rises, to its own part of a curve
    if that is level. Where V has not risen at all before it does, there is a floor with an edge.
    """
    floor = False
    for reach in np.geomspace(0.05 * scale, chart.reach, 12):
        aside = point + reach * axis
        across = chart.value(point + reach * np.vstack([np.eye(point.size), -np.eye(point.size)]))
        typical = float(np.max(across[np.isfinite(across)], initial=value)) - value
        slack = 1e-9 * typical + 1e-15 * abs(value)
        risen = float(chart.value(aside[None])[0]) - value
        if not np.isfinite(risen):
            return "straight"
        if risen > slack:
            ends, values = descend(chart, aside[None], np.array([0.1 * reach]))
            moved = float(np.linalg.norm(ends[0] - point)) > 0.3 * reach
            if moved and values[0] - value <= slack:
                return "bends"
            return "straight" if floor else "rises"
        floor |= risen == 0.0
    return "straight"


def _in_space(
    chart: Chart, point: Array, size: Array, axes: Array, scale: float
) -> tuple[tuple[float, ...], bool]:
    """The d curvatures in space: radial coordinates count once more on their axis, and add 0 off it."""
    found, turned = size.tolist(), False
    for i, name in enumerate(chart.names):
        for _ in range(multiplicity(name) - 1):
            on_axis = abs(point[i]) <= 1e-6 * scale
            found.append(float(size[np.argmax(np.abs(axes[i]))]) if on_axis else 0.0)
            turned |= not on_axis
    return tuple(sorted(found)), turned
