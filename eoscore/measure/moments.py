"""Moments of Omega on panels of energy: int P_k dOmega along rays, which no roughness of Omega itself can harm.

Where arms open or wells join, Omega is nearly singular, and a series through its values converges slowly. Sums of
functions that are smooth on a panel need no more of it than its moments there, and those are integrals in space.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np
from numpy.polynomial.legendre import legint, legval

from eoscore.measure.panel import points, to_series
from eoscore.measure.rules import legendre

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from eoscore.measure.base import FloatArray
    from eoscore.measure.panel import Panel
    from eoscore.measure.rays import Rays

    Which = NDArray[np.intp]

__all__ = ["TERMS", "along_rays", "cumulated", "edges_of", "weights"]

TERMS = 16  # Legendre polynomials of a part
NODES = 12  # Gauss points between two rows of a ray, or a row and the end of a part
FULL = 1  # the last moment whose error counts whole; each following one, of which a smooth function has less, by 1/2


def edges_of(stretch: Panel, parts: int) -> FloatArray:
    """Energies (parts + 1,) that divide a stretch into parts of equal length in its own coordinate."""
    return stretch.energy(np.linspace(0.0, 1.0, parts + 1))


def weights() -> FloatArray:
    """How much the error of each moment (TERMS,) counts."""
    return np.asarray(np.minimum(1.0, 2.0 ** (FULL - np.arange(TERMS))))


def along_rays(rays: Rays, stretch: Panel, parts: int, rise: float, which: Which) -> FloatArray:
    """int P_k dOmega on each part of a stretch: (rays, parts * TERMS).

    P_k is of the stretch's own coordinate over the part. rise: of the bottom that the rays leave from, J.
    """
    ray, part, low, high = _pieces(rays, edges_of(stretch, parts) - rise, which)
    x, w = legendre(NODES)
    if stretch.kind != "log":  # its coordinate is a root of the distance from the break
        x, w = x**2, 2 * x * w
        low, high = (high, low) if stretch.kind == "right" else (low, high)
    q = low[:, None] + (high - low)[:, None] * x
    space = rays.space(q, which[ray]) * w * np.abs(high - low)[:, None]
    v = rays.line.height(q.ravel(), np.repeat(rays.along[which[ray]], NODES, axis=0)).reshape(q.shape)
    place = stretch.place(np.clip(v + rise, stretch.lo, stretch.hi)) * parts - part[:, None]
    s = np.clip(2 * place - 1, -1.0, 1.0)
    found = np.empty((which.size * parts, TERMS))
    before, now = np.zeros_like(s), np.ones_like(s)
    for k in range(TERMS):
        found[:, k] = np.bincount(ray * parts + part, (space * now).sum(axis=1), len(found))
        before, now = now, ((2 * k + 1) * s * now - k * before) / (k + 1)
    return found.reshape(which.size, -1)


def cumulated(moments: FloatArray, start: float) -> FloatArray:
    """Omega on each part (parts, n) as coefficients of T_n, from its moments (parts, TERMS) and its start."""
    slopes = moments * (np.arange(TERMS) + 0.5)
    rising = legval(2 * points() - 1, legint(slopes.T, lbnd=-1)) @ to_series().T
    rising[:, 0] += start + np.concatenate([[0.0], np.cumsum(moments[:-1, 0])])
    return np.asarray(rising)


def _pieces(rays: Rays, edges: FloatArray, which: Which) -> tuple[Which, Which, FloatArray, FloatArray]:
    """The stretches of rays that lie in one part each: which ray, which part, q at the lower energy and the higher."""
    rows = rays.rows
    height, place = rows.v[:, which], rows.q[:, which]
    low, high = np.minimum(height[:-1], height[1:]), np.maximum(height[:-1], height[1:])
    step, ray = np.nonzero((high > edges[0]) & (low < edges[-1]) & (place[1:] > place[:-1]))
    first = np.searchsorted(edges, low[step, ray], side="right")
    count = np.searchsorted(edges, high[step, ray], side="left") - first
    count = np.maximum(count, 0)
    column = np.arange(count.sum()) - np.repeat(np.cumsum(count) - count - first, count)
    roots = rays.roots(np.repeat(step, count), which[np.repeat(ray, count)], edges[column])

    start = np.cumsum(count + 2) - (count + 2)
    q = np.empty(int((count + 2).sum()))
    rising = height[step, ray] < height[step + 1, ray]
    near, far = place[step, ray], place[step + 1, ray]
    q[start], q[start + count + 1] = np.where(rising, near, far), np.where(rising, far, near)
    q[np.arange(roots.size) + np.repeat(2 * np.arange(count.size) + 1, count)] = roots

    begins = np.delete(np.arange(q.size), start + count + 1)
    owner = np.repeat(np.arange(count.size), count + 1)
    part = first[owner] - 1 + begins - start[owner]
    kept = (part >= 0) & (part < edges.size - 1)
    begins, owner = begins[kept], owner[kept]
    return ray[owner], part[kept], q[begins], q[begins + 1]
