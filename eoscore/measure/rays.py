"""Rays from a place in a potential, and the space that they sweep where V is below an energy."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from itertools import pairwise
from math import sqrt
from typing import TYPE_CHECKING

import numpy as np

from eoscore.formula import constant, evaluate_many, variable
from eoscore.measure.coordinate import inside
from eoscore.measure.rules import legendre
from eoscore.measure.walk import Rows, walk

if TYPE_CHECKING:
    from collections.abc import Callable

    from numpy.typing import NDArray

    from eoscore.formula import Formula
    from eoscore.formula.field import Field
    from eoscore.measure.base import FloatArray
    from eoscore.measure.region import Region

    Which = NDArray[np.intp]

__all__ = ["Declined", "Line", "Rays", "unstretched"]

NEAR = 1e-5  # relative step of Newton's rule after which the next one is below rounding
WHOLE = 1 - 1e-12  # a share that counts as all
SHARES = 10  # Gauss points of the share of a well between two rows


class Declined(Exception):  # noqa: N818 - no error: the route does not fit, another one is tried
    """The regions below an energy are not what a route is made for."""


@dataclass(frozen=True)
class Line:
    """V - V_min along x = start + frame (n q), q >= 0, or, stretched, along x = start + frame f(n q).

    low, high (d,): ends of the region in the frame. stretch: s of f(u) = u + u^3 / s^2, where arms reach far along
    the axes of the frame. clear: every ray leaves the region once.
    """

    field: Field
    start: FloatArray
    frame: FloatArray
    v_min: float
    low: FloatArray
    high: FloatArray
    stretch: float | None
    clear: bool
    region: Region

    @cached_property
    def formulas(self) -> tuple[Formula, Formula]:
        """V and dV/dq, of q and the parts n0, n1, ... of the direction in the frame."""
        q, s = variable("q"), self.stretch
        steps = [variable(f"n{i}") * q for i in range(len(self.start))]
        if s is not None:
            steps = [step + step * step * step / s**2 for step in steps]
        along = {
            name: sum((float(part) * step for part, step in zip(row, steps, strict=True)), constant(float(x)))
            for name, x, row in zip(self.field.coordinates, self.start, self.frame, strict=True)
        }
        on_it = self.field.formula.substitute(along)
        return on_it, on_it.derivative("q")

    def rise(self, q: FloatArray, n: FloatArray) -> tuple[FloatArray, FloatArray]:
        """V - V_min and dV/dq at q (rays,) in directions n (rays, d); inf where V is not defined."""
        v, slope = evaluate_many(self.formulas, {"q": q, **{f"n{i}": part for i, part in enumerate(n.T)}})
        v = np.broadcast_to(v, q.shape) - self.v_min
        return np.where(np.isnan(v), np.inf, v), np.broadcast_to(slope, q.shape)

    def height(self, q: FloatArray, n: FloatArray) -> FloatArray:
        """V - V_min at q (rays,) in directions n (rays, d); inf where V is not defined."""
        v = self.formulas[0].evaluate({"q": q, **{f"n{i}": part for i, part in enumerate(n.T)}})
        v = np.broadcast_to(v, q.shape) - self.v_min
        return np.where(np.isnan(v), np.inf, v)

    def columns(self, q: FloatArray, n: FloatArray) -> list[FloatArray]:
        """The coordinates of points at q (...) in directions n (..., d), each of shape (...)."""
        steps = [q * part for part in np.moveaxis(n, -1, 0)]
        if self.stretch is not None:
            steps = [step + step * step * step / self.stretch**2 for step in steps]
        return [
            np.asarray(x + sum(part * step for part, step in zip(row, steps, strict=True) if part))
            for x, row in zip(self.start.tolist(), self.frame.tolist(), strict=True)
        ]

    def points(self, q: FloatArray, n: FloatArray) -> FloatArray:
        """Points (..., d) at q (...) in directions n (..., d)."""
        return np.stack(self.columns(q, n), axis=-1)

    def worth(self, q: FloatArray, n: FloatArray) -> FloatArray:
        """By how much space is stretched at q (...) in directions n (..., d)."""
        if self.stretch is None:
            return np.ones(q.shape)
        square = (q / self.stretch) ** 2
        a, b, c = (1 + 3 * part**2 * square for part in np.moveaxis(n, -1, 0))
        return np.asarray(a * b * c)

    def within(self, q: FloatArray, n: FloatArray) -> NDArray[np.bool_]:
        """Whether points lie inside all walls."""
        return inside(self.field, dict(zip(self.field.coordinates, self.columns(q, n), strict=True)))

    def leaving(self, n: FloatArray) -> FloatArray:
        """The q at which rays leave the box about the region."""
        ends = np.where(n > 0, self.high, self.low)
        if self.stretch is not None:
            ends = self.stretch * unstretched(ends / self.stretch)
        with np.errstate(divide="ignore", invalid="ignore"):
            q = ends / n
        return np.asarray(np.min(np.where(np.isnan(q) | (q < 0), np.inf, q), axis=1))


class Rays:
    """Rays walked once, up to the energy `end`; square, cube (n,): the space swept is int (square q + cube q^2) dq.

    along: directions in the frame of the line. share: of a well, at points (d, ...), by which that integrand is
    multiplied; None where it is 1.
    """

    def __init__(
        self,
        line: Line,
        along: FloatArray,
        end: float,
        begin: float,
        swept: tuple[FloatArray, FloatArray],
        share: Callable[[FloatArray], FloatArray] | None,
    ) -> None:
        self.line, self.along, self.share = line, along, share
        self._square, self._cube = swept
        self.rows: Rows = walk(line, along, end, begin, share)
        self._whole = np.empty((0, 0), dtype=bool)
        self._before = None if share is None else self._cumulated()

    def swept(self, v: FloatArray, which: Which) -> FloatArray:
        """What rays `which` sweep where V - V_min is below ascending energies (n,): (rays, n)."""
        height = self.rows.v[:, which]
        low, high = np.minimum(height[:-1], height[1:]), np.maximum(height[:-1], height[1:])
        step, ray = np.nonzero((high >= v[0]) & (low < v[-1]))
        first = np.searchsorted(v, low[step, ray], side="right")
        count = np.searchsorted(v, high[step, ray], side="right") - first
        column = np.arange(count.sum()) - np.repeat(np.cumsum(count) - count - first, count)
        step, ray = np.repeat(step, count), np.repeat(ray, count)
        sense = np.where(height[step, ray] < height[step + 1, ray], 1.0, -1.0)
        parts = sense * self._content(self.roots(step, which[ray], v[column]), step, which[ray])
        total = np.bincount(ray * v.size + column, parts, which.size * v.size).reshape(which.size, v.size)
        last = np.full(which.size, len(height) - 2)
        whole = self._content(self.rows.q[-1, which], last, which)
        return np.asarray(total + np.where(height[-1][:, None] < v, whole[:, None], 0.0))

    def _content(self, q: FloatArray, step: Which, which: Which) -> FloatArray:
        """Swept from 0 to q, which lies between rows step and step + 1."""
        if self._before is None:
            return self._plain(q, which)
        start, result = self.rows.q[step, which], self._before[step, which]
        whole = self._whole[step, which]
        mine = which[whole]
        result[whole] += self._plain(q[whole], mine) - self._plain(start[whole], mine)
        result[~whole] += self._weighed(start[~whole], q[~whole], which[~whole])
        return result

    def _plain(self, q: FloatArray, which: Which) -> FloatArray:
        """Swept from 0 to q without any share."""
        if self.line.stretch is not None:
            return self._cube[which] * stretched(q, self.along[which] / self.line.stretch)
        return np.asarray(q**2 * (self._square[which] / 2 + self._cube[which] * q / 3))

    def _weighed(self, start: FloatArray, end: FloatArray, which: Which) -> FloatArray:
        """The integral between two places on each ray, with the share and the stretching of space."""
        if self.share is None or not start.size:
            return np.zeros_like(end)
        t, w = legendre(SHARES)
        q = start[:, None] + (end - start)[:, None] * t
        return np.asarray(self.space(q, which) @ w * (end - start))

    def space(self, q: FloatArray, which: Which) -> FloatArray:
        """The integrand of what rays `which` (m,) sweep, at q (m, n): with the stretching of space and the share."""
        n = self.along[which][:, None, :]
        value = q * (self._square[which][:, None] + self._cube[which][:, None] * q)
        if self.line.stretch is not None:
            value = value * self.line.worth(q, n)
        if self.share is not None:
            value = value * self.share(np.array(self.line.columns(q, n)))
        return np.asarray(value)

    def _cumulated(self) -> FloatArray:
        """The integral up to each row, and so (rows, rays); most stretches lie wholly in the share."""
        q, rays = self.rows.q, np.arange(len(self.along))
        if self.share is None:
            return np.zeros_like(q)
        share = self.share(np.array(self.line.columns(q, self.along)))
        self._whole = np.minimum(share[:-1], share[1:]) > WHOLE
        total = np.zeros_like(q)
        for k, (start, end) in enumerate(pairwise(q)):
            part = np.zeros_like(end)
            whole = self._whole[k] & (end > start)
            part[whole] = self._plain(end[whole], rays[whole]) - self._plain(start[whole], rays[whole])
            mixed = np.flatnonzero(~self._whole[k] & (end > start))
            part[mixed] = self._weighed(start[mixed], end[mixed], mixed)
            total[k + 1] = total[k] + part
        return total

    def roots(self, step: Which, ray: Which, wanted: FloatArray) -> FloatArray:
        """q at which V - V_min is as wanted (n,), between rows step and step + 1 of rays: Newton in brackets."""
        rows = self.rows
        lo, hi = rows.q[step, ray], rows.q[step + 1, ray]
        v0, v1 = rows.v[step, ray], rows.v[step + 1, ray]
        sense = np.where(v1 > v0, 1.0, -1.0)
        q = _inverse(wanted, lo, hi, v0, v1, rows.d[step, ray], rows.d[step + 1, ray])
        left = np.arange(q.size)
        for _ in range(60):
            at = q[left]
            v, slope = self.line.rise(at, self.along[ray[left]])
            miss = (v - wanted[left]) * sense[left]
            lo[left], hi[left] = np.where(miss < 0, at, lo[left]), np.where(miss > 0, at, hi[left])
            with np.errstate(all="ignore"):
                new = at - miss * sense[left] / slope
            new = np.where((new >= lo[left]) & (new <= hi[left]), new, (lo[left] + hi[left]) / 2)
            q[left] = new
            left = left[np.abs(new - at) > NEAR * new]
            if not left.size:
                break
        return q


def _inverse(
    wanted: FloatArray,
    lo: FloatArray,
    hi: FloatArray,
    v0: FloatArray,
    v1: FloatArray,
    d0: FloatArray,
    d1: FloatArray,
) -> FloatArray:
    """q(v) between two points, by the cubic in sqrt(v) that has both values and slopes, else by the straight line."""
    with np.errstate(all="ignore"):
        root0, root1, wanted = (np.sqrt(np.maximum(height, 0.0)) for height in (v0, v1, wanted))
        d0, d1 = d0 / (2 * root0), d1 / (2 * root1)
        rise, step = root1 - root0, hi - lo
        t = (wanted - root0) / rise
        cubic = lo + t * (rise / d0 * (1 - t) ** 2 - rise / d1 * t * (1 - t)) + step * t**2 * (3 - 2 * t)
        linear = np.clip(lo + step * t, lo, hi)
    return np.where((cubic >= lo) & (cubic <= hi), cubic, np.where(np.isnan(linear), (lo + hi) / 2, linear))


def stretched(q: FloatArray, rate: FloatArray) -> FloatArray:
    """int_0^q t^2 (1 + 3 a^2 t^2) (1 + 3 b^2 t^2) (1 + 3 c^2 t^2) dt for rates (n, 3) = (a, b, c)."""
    a, b, c = 3 * rate.T**2
    square = q * q
    third = a * b + a * c + b * c
    return np.asarray(
        q * square * (1 / 3 + square * ((a + b + c) / 5 + square * (third / 7 + square * a * b * c / 9)))
    )


def unstretched(x: FloatArray) -> FloatArray:
    """The u with u + u^3 = x."""
    return np.asarray(2 / sqrt(3) * np.sinh(np.arcsinh(1.5 * sqrt(3) * x) / 3))
