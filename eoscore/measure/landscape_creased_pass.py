"""Up to the passes that lie on creases: ridges like that of the lesser of two wells, and the floors of bent guides."""

from __future__ import annotations

from itertools import combinations, islice
from typing import TYPE_CHECKING

import numpy as np

from eoscore.measure.landscape_crease import held_jet, normals_of, onto
from eoscore.measure.landscape_pass import LEVEL, Pass, still

if TYPE_CHECKING:
    from eoscore.measure.landscape_chart import Array, Chart

__all__ = ["creased_passes"]

STEPS = 50
MOST_TRIALS = 12  # combinations of so many of the creases near a start
BESIDE, JUMP = 1e-6, 1e-4  # of such a length, across a crease; relative change of the slope there
ASIDE = 1e-3  # of a length over which V is resolved: whether V rises or falls across a crease


def creased_passes(chart: Chart, start: Array, radius: float) -> list[Pass]:
    """The passes that lie on creases within some radii of a start."""
    if not chart.creases:
        return []
    near = np.flatnonzero(chart.creases.distance(chart, start[None])[:, 0] <= 3 * radius).tolist()
    trials = (groups for count in range(1, start.size + 1) for groups in combinations(near, count))
    found = []
    for groups in islice(trials, MOST_TRIALS):
        held = sorted({k for group in groups for k in chart.creases.groups[group]})
        for ridge in (True, False) if len(held) == 1 else (False,):
            reached = _along(chart, start, radius, held, ridge=ridge)
            if reached is not None:
                found.append(reached)
    return found


def _along(chart: Chart, start: Array, radius: float, held: list[int], *, ridge: bool) -> Pass | None:
    """The lowest place of a ridge, or the highest one along a valley, by Newton steps along what holds it."""
    point, best = onto(chart, start, held, 10 * radius), np.inf
    if point is None or not _bent(chart, point, held):
        return None
    for _ in range(STEPS):
        if point is None or not np.linalg.norm(point) < chart.reach:
            return None
        slope, bend, frame = held_jet(chart, point, held)
        size, axes = np.linalg.eigh(bend)
        step = -(slope @ axes) / np.maximum(np.abs(size), 1e-13 * np.max(np.abs(size), initial=0.0) + 1e-300)
        if not ridge:
            step[:1] *= -1
        length, force = float(np.linalg.norm(step)), float(np.linalg.norm(slope))
        radius, best = radius * (1.5 if force < best else 0.5), min(best, force)
        if length <= 4e-16 * np.linalg.norm(point):
            break
        point = onto(
            chart, point + frame @ axes @ step * min(1.0, radius / max(length, 1e-300)), held, radius
        )
    return None if point is None else _verified(chart, point, held, ridge=ridge)


def _bent(chart: Chart, point: Array, held: list[int]) -> bool:
    """Whether the slope of V jumps across each of the creases."""
    normals = normals_of(chart, point, held)[1]
    aside = BESIDE * 1e9 * chart.nudge * normals
    jump = np.linalg.norm(chart.slopes(point + aside) - chart.slopes(point - aside), axis=1)
    return bool(np.all(jump > JUMP * np.linalg.norm(chart.slopes(point + aside), axis=1)))


def _verified(chart: Chart, point: Array, held: list[int], *, ridge: bool) -> Pass | None:
    """The pass at a stationary point along creases, where V falls to two sides and rises to all others."""
    slope, bend, frame = held_jet(chart, point, held)
    size, axes = np.linalg.eigh(bend)
    if size.size and not still(slope, size, point, chart):
        return None
    falling = int(np.sum(size < -LEVEL * np.max(np.abs(size), initial=0.0)))
    _, normals = normals_of(chart, point, held)
    value = float(chart.value(point[None])[0])
    aside = ASIDE * 1e9 * chart.nudge * np.concatenate([normals, -normals])
    rises = chart.value(point + aside) > value
    if falling != (0 if ridge else 1) or np.any(rises == ridge):
        return None
    return Pass(point, value, normals[0] if ridge else frame @ axes[:, 0])
