"""Ways out along valleys: the lowest places on spheres about the bottom, from far outside back to it.

A grid sees what leaks along its axes. A guide that runs aslant or aside of them is narrower than any grid far
out; but on a sphere it is a minimum, to which Newton steps lead from a long way off.
"""

from __future__ import annotations

from itertools import product
from typing import TYPE_CHECKING

import numpy as np

from eoscore.measure.landscape_grid import Leak

if TYPE_CHECKING:
    from eoscore.measure.landscape_chart import Array, Chart

__all__ = ["lowest_valley", "settled", "starts"]

FIRST_STEPS, STEPS = 80, 5  # Newton steps on the first sphere, and on each that follows
SHRINK = 0.6  # ratio of radii on the way back
BEYOND = (1e3, 1e6, 1e9)  # times the first radius: whether V grows along a valley, and its limit
ALIKE = 1e-4  # radians
RANDOM = 40  # directions besides those along and between the axes
LEVEL = 1e-9  # of the way up: a valley no higher than this above its limit leaks at infinity
UNSEEN = 1e-7  # radians: a Newton step so short changes V by its rounding only
LEVEL_BEND = 1e-8  # of the largest curvature: below it V is level, but for rounding
LOOKS = 5  # points between the valley's places on neighbouring spheres


def lowest_valley(chart: Chart, bottom: Array, value: float, least: float, far: float) -> Leak | None:
    """The lowest way out along a valley, from V = `value` at the bottom; None if every valley rises for ever.

    least, far: radii, m, of the innermost and the outermost sphere. With walls there is no such search.
    """
    if chart.walls:
        return None
    n = settled(chart, bottom, starts(chart.dimension), far, FIRST_STEPS)
    n = _distinct(n, _v(chart, bottom, n, far))
    heights = [_v(chart, bottom, n, far)]
    farther = n
    for factor in BEYOND:
        farther = settled(chart, bottom, farther, factor * far, FIRST_STEPS)
        heights.append(_v(chart, bottom, farther, factor * far))
    first, second, third = (np.asarray(height) for height in heights[1:])
    with np.errstate(all="ignore"):
        rises = (third - second > 0.5 * (second - first)) & (third - second > 1e-9 * np.abs(second - value))
    out = ~rises & np.isfinite(third)
    if not out.any():
        return None
    best = 0
    if np.count_nonzero(out) > 1:
        rough = _way_back(chart, bottom, n[out], least, far, STEPS)
        best = int(np.argmin(np.maximum(np.max(chart.value(rough), axis=0), third[out])))
    path = _way_back(chart, bottom, n[out][[best]], least, far, FIRST_STEPS)[:, 0]
    radius = np.linalg.norm(path - bottom, axis=1, keepdims=True)
    path = bottom + radius * settled(chart, bottom, (path - bottom) / radius, radius, FIRST_STEPS)
    v, limit, outward = chart.value(path), float(third[out][best]), n[out][best]
    top = int(np.argmax(v))
    if limit >= v[top] - LEVEL * abs(v[top] - value):
        return Leak(limit, value, path[0], outward, at_infinity=True)
    return Leak(float(v[top]), value, path[top], outward, at_infinity=False)


def _way_back(chart: Chart, bottom: Array, n: Array, least: float, far: float, steps: int) -> Array:
    """Points (points, n, d) along valleys (n, d), from far outside to the bottom."""
    places, radius = [bottom + far * n], far
    while radius > least:
        radius *= SHRINK
        n = settled(chart, bottom, n, radius, steps)
        places.append(bottom + radius * n)
    corners = np.array([*places, np.broadcast_to(bottom, n.shape)])
    share = (np.arange(LOOKS) / LOOKS)[:, None, None]
    path = corners[:-1, None] + (corners[1:] - corners[:-1])[:, None] * share
    return np.asarray(path.reshape(-1, *n.shape))


def starts(dimension: int) -> Array:
    """Unit vectors (n, d) along the axes, between them, and at random."""
    between = [p for p in product((-1.0, 0.0, 1.0), repeat=dimension) if any(p)]
    random = np.random.default_rng(3).normal(size=(RANDOM, dimension))
    starts = np.concatenate([np.array(between), random])
    return np.asarray(starts / np.linalg.norm(starts, axis=1, keepdims=True))


def _v(chart: Chart, bottom: Array, n: Array, radius: float | Array) -> Array:
    return chart.value(bottom + radius * n)


def settled(chart: Chart, bottom: Array, n: Array, radius: float | Array, steps: int) -> Array:
    """Directions (n, d) moved to a minimum of V on the sphere by Newton steps of at most half a radian."""
    value = _v(chart, bottom, n, radius)
    trust = np.full(len(n), 0.5)
    for _ in range(steps):
        _, slope, bend = chart.jet(bottom + radius * n)
        slope, bend = np.nan_to_num(slope) * radius, np.nan_to_num(bend) * np.expand_dims(radius, -1) ** 2
        outward = np.einsum("ni,ni->n", slope, n)
        flat = np.eye(n.shape[1]) - n[:, :, None] * n[:, None, :]
        across = np.einsum("nij,nj->ni", flat, slope)
        curve = np.einsum("nij,njk,nkl->nil", flat, bend, flat) - outward[:, None, None] * flat
        size, axes = np.linalg.eigh(curve)
        along = np.einsum("nji,nj->ni", axes, across)
        floor = LEVEL_BEND * np.maximum(np.max(np.abs(size), axis=1), np.linalg.norm(across, axis=1)) + 1e-300
        step = -np.einsum("nij,nj->ni", axes, along / np.maximum(np.abs(size), floor[:, None]))
        length = np.linalg.norm(step, axis=1)
        step *= np.minimum(1.0, trust / np.maximum(length, 1e-300))[:, None]
        trial = n + step
        trial /= np.linalg.norm(trial, axis=1, keepdims=True)
        new = _v(chart, bottom, trial, radius)
        better, lower = new <= value, new < value
        n, value = np.where(better[:, None], trial, n), np.where(better, new, value)
        trust = np.where(better, np.minimum(2 * trust, 0.5), trust / 4)
        if np.all((length <= 1e-13) | (trust < 1e-15) | (~lower & (length <= UNSEEN))):
            break
    return n


def _distinct(n: Array, values: Array) -> Array:
    """Directions that differ, those of lower V first."""
    kept: list[int] = []
    for k in np.argsort(values, kind="stable").tolist():
        if np.isfinite(values[k]) and all(np.linalg.norm(n[k] - n[j]) > ALIKE for j in kept):
            kept.append(k)
    return n[kept]
