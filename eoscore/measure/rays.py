"""Rays from the bottom of a potential: the stretches of each on which V is below an energy."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.formula import evaluate_many, gradient
from eoscore.measure.coordinate import inside

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from eoscore.formula.field import Field
    from eoscore.measure.base import FloatArray

    Which = NDArray[np.intp]

__all__ = ["Declined", "Rays"]

RATIO = 1.15  # of neighbouring points of a walk along a ray
BEGIN = 1e-3  # of the guessed reach: where a walk begins
STEPS = 260  # of a walk: RATIO^260 = 6e15
PASS = 1e-9  # a ray whose summit is this close (relative) below the end energy runs over the pass itself


class Declined(Exception):  # noqa: N818 - no error: the route does not fit, another one is tried
    """The regions below an energy are not what a route is made for."""


class Rays:
    """Rays x = start + along q, q >= 0, each walked until V - V_min reaches `end`; `guess` is a q near there.

    Raises Declined where V turns down on a ray before, or a wall stands there.
    """

    def __init__(
        self, field: Field, start: FloatArray, v_min: float, along: FloatArray, end: float, guess: float
    ) -> None:
        self.field, self.start, self.v_min, self.along = field, start, v_min, along
        self.formulas = (field.formula, *gradient(field.formula, field.coordinates))
        rows = self._walk(end, guess)
        self.q, self.v, self.d = (np.array(column) for column in zip(*rows, strict=True))

    def swept(self, v: FloatArray, powers: tuple[int, ...]) -> list[FloatArray]:
        """For each power k, int k q^(k-1) dq up to where V - V_min = v on each ray: (rays, n)."""
        below = self.v[:, :, None] < v
        step, ray, column = np.nonzero(below[:-1] & ~below[1:])
        q = self._roots(step, ray, v[column])
        shape, flat = (len(self.along), v.size), ray * v.size + column
        end = np.where(below[-1], self.q[-1][:, None], 0.0)
        return [end**k + np.bincount(flat, q**k, shape[0] * shape[1]).reshape(shape) for k in powers]

    def rise(self, q: FloatArray, which: Which) -> tuple[FloatArray, FloatArray]:
        """V - V_min and dV/dq at q (n,) on rays `which` (n,)."""
        along = self.along[which].T
        x = dict(zip(self.field.coordinates, self.start[:, None] + along * q, strict=True))
        values = [np.broadcast_to(value, q.shape) for value in evaluate_many(self.formulas, x)]
        slope = sum(n * g for n, g in zip(along, values[1:], strict=True))
        return values[0] - self.v_min, np.asarray(slope)

    def _roots(self, step: Which, ray: Which, wanted: FloatArray) -> FloatArray:
        """q at which V - V_min is as wanted, between points step and step + 1 of rays: Newton in brackets."""
        lo, hi = self.q[step, ray], self.q[step + 1, ray]
        v0, v1 = self.v[step, ray], self.v[step + 1, ray]
        sense = np.sign(v1 - v0)
        q = _inverse(wanted, lo, hi, v0, v1, self.d[step, ray], self.d[step + 1, ray])
        left = np.arange(q.size)
        for turn in range(40):
            at = q[left]
            v, slope = self.rise(at, ray[left])
            miss = (v - wanted[left]) * sense[left]
            lo[left], hi[left] = np.where(miss < 0, at, lo[left]), np.where(miss > 0, at, hi[left])
            with np.errstate(all="ignore"):
                new = at - miss * sense[left] / slope
            new = np.where((new >= lo[left]) & (new <= hi[left]), new, (lo[left] + hi[left]) / 2)
            q[left] = new
            left = left[np.abs(new - at) > (1e-8 if turn < 8 else 1e-14) * new]
            if not left.size:
                break
        return q

    def _walk(self, end: float, guess: float) -> list[tuple[FloatArray, FloatArray, FloatArray]]:
        """Rows q, V - V_min, dV/dq of all rays."""
        rays = np.arange(len(self.along))
        q = np.full(rays.size, guess * BEGIN)
        v, d = self.rise(q, rays)
        rows = [(0 * q, 0 * q, 0 * q), (q, v, d)]
        active = rays[v < end]
        for _ in range(STEPS):
            if not active.size:
                return rows
            before = rows[-1][0]
            q, v, d = (column.copy() for column in rows[-1])
            q[active] *= RATIO
            v[active], d[active] = self.rise(q[active], active)
            down = active[d[active] < 0]
            if down.size:
                q[down] = self._summit(before[down], q[down], down)
                v[down], d[down] = self.rise(q[down], down)
                if np.any(v[down] < end * (1 - PASS)):
                    raise Declined
            if not self._inside(q[active], active).all():
                raise Declined
            rows.append((q, v, d))
            active = active[(v[active] < end) & (d[active] > 0) & ~np.isin(active, down)]
        raise Declined

    def _inside(self, q: FloatArray, rays: Which) -> NDArray[np.bool_]:
        x = self.start[:, None] + self.along[rays].T * q
        return inside(self.field, dict(zip(self.field.coordinates, x, strict=True)))

    def _summit(self, lo: FloatArray, hi: FloatArray, rays: Which) -> FloatArray:
        """The last place before V turns down."""
        for _ in range(50):
            middle = (lo + hi) / 2
            rises = self.rise(middle, rays)[1] > 0
            lo, hi = np.where(rises, middle, lo), np.where(rises, hi, middle)
        return lo


def _inverse(
    wanted: FloatArray,
    lo: FloatArray,
    hi: FloatArray,
    v0: FloatArray,
    v1: FloatArray,
    d0: FloatArray,
    d1: FloatArray,
) -> FloatArray:
    """q(v) between two points by the cubic that has both values and slopes dq/dv, else by the straight line."""
    with np.errstate(all="ignore"):
        rise, step = v1 - v0, hi - lo
        t = (wanted - v0) / rise
        cubic = lo + t * (rise / d0 * (1 - t) ** 2 - rise / d1 * t * (1 - t)) + step * t**2 * (3 - 2 * t)
        linear = np.clip(lo + step * t, lo, hi)
    return np.where((cubic >= lo) & (cubic <= hi), cubic, np.where(np.isnan(linear), (lo + hi) / 2, linear))
