"""Energies at which the region below them changes its shape: saddles, where wells join or arms open."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.measure.landscape_chart import Chart

if TYPE_CHECKING:
    from eoscore.formula.field import Field
    from eoscore.measure.base import FloatArray

__all__ = ["saddles"]

MOST = 60  # candidates that are followed
STEPS = 30  # of Newton's rule
APART = 1e-7  # relative: saddles closer in energy are one break


def saddles(
    field: Field, lines: list[FloatArray], v_min: float, ceiling: float
) -> tuple[FloatArray, FloatArray]:
    """Energies (n,) in J from v_min and places (n, d) of saddles below the ceiling on the grid of these lines.

    In ascending order. Candidates are grid points that are highest along one axis and lowest along the others;
    Newton's rule on the gradient makes them exact. Walls have no saddles of their own here.
    """
    chart = Chart(field)
    mesh = np.meshgrid(*lines, indexing="ij", sparse=True)
    v = np.broadcast_to(
        chart.value_at(dict(zip(chart.names, mesh, strict=True))), tuple(line.size for line in lines)
    )
    index = _candidates(v)[:MOST]
    points = np.stack([line[index[:, i]] for i, line in enumerate(lines)], axis=1)
    found = _polished(chart, points, lines)
    rises = chart.value(found) - v_min if len(found) else np.empty(0)
    order = np.argsort(rises)
    order = order[(rises[order] > 0) & (rises[order] < ceiling * (1 - APART))]
    kept = order[np.diff(rises[order], prepend=-np.inf) > APART * rises[order]]
    return rises[kept], found[kept]


def _candidates(v: FloatArray) -> FloatArray:
    """Indices of inner points highest along one axis and lowest along the others, the lowest first."""
    low, high = [], []
    inner = (slice(1, -1),) * v.ndim
    for axis in range(v.ndim):
        before, after = (np.roll(v, shift, axis)[inner] for shift in (1, -1))
        low.append((v[inner] <= before) & (v[inner] <= after))
        high.append((v[inner] >= before) & (v[inner] >= after))
    some = np.zeros(v[inner].shape, dtype=bool)
    for axis in range(v.ndim):
        some |= np.logical_and.reduce([high[j] if j == axis else low[j] for j in range(v.ndim)])
    index = np.argwhere(some & np.isfinite(v[inner])) + 1
    return np.asarray(index[np.argsort(v[tuple(index.T)], kind="stable")])


def _polished(chart: Chart, points: FloatArray, lines: list[FloatArray]) -> FloatArray:
    """Stationary points with a direction in which V falls, near the given ones."""
    if not len(points):
        return points
    start = points.copy()
    reach = np.array(
        [4 * np.interp(points[:, i], line[:-1], np.diff(line)) for i, line in enumerate(lines)]
    ).T
    for _ in range(STEPS):
        _, slope, bend = chart.jet(points)
        step = np.einsum("nij,nj->ni", np.linalg.pinv(np.nan_to_num(bend)), np.nan_to_num(slope))
        points = points - np.clip(step, -reach, reach)
    _, _, bend = chart.jet(points)
    bend = np.nan_to_num(bend)
    falls = np.linalg.eigvalsh(bend)[:, 0] < 0
    settled = np.all(np.abs(step) <= 1e-6 * reach, axis=1) & np.all(np.abs(points - start) <= reach, axis=1)
    return np.asarray(points[falls & settled])
