"""A walk along rays, in rows between which V rises or falls."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

if TYPE_CHECKING:
    from collections.abc import Callable

    from numpy.typing import NDArray

    from eoscore.measure.base import FloatArray
    from eoscore.measure.rays import Line

    Which = NDArray[np.intp]

__all__ = ["Rows", "walk"]

RATIO = 1.25  # of neighbouring places of a walk
SHORTEST = 40  # steps at least over the way to the end of the box
TURNS = 9  # steps to a place where V turns, whose own height hardly depends on it
LOOKS = 3  # rows after which the share is looked at
NOTHING = 1e-12  # share of a well that ends a ray
PASS = 1e-9  # a summit this close (relative) below the end counts as at the end: the ray runs over the pass itself


@dataclass(frozen=True)
class Rows:
    """Places q, V - V_min and dV/dq: (rows, rays). A ray that has ended stays where it is."""

    q: FloatArray
    v: FloatArray
    d: FloatArray


def walk(
    line: Line,
    along: FloatArray,
    end: float,
    begin: float,
    share: Callable[[FloatArray], FloatArray] | None = None,
) -> Rows:
    """Rows of rays along (n, d), from q = 0 until V - V_min has reached `end`, a wall, or the end of the box.

    Or until nothing is left of their share (of points (d, n)).

    Where V turns there is a row. Where rays may come back below the end, they are walked to the end of the box,
    and what does not belong to the region counts as inf.
    """
    leaving = line.leaving(along)
    walker = _Walker(line, along, end, leaving, share)
    walker.step(np.minimum(begin, leaving / SHORTEST))
    while walker.active.size:
        q = walker.q[walker.active]
        step = np.minimum(q * (RATIO - 1), leaving[walker.active] / SHORTEST)
        walker.step(np.minimum(q + step, leaving[walker.active]))
    rows = Rows(*(np.array(column) for column in zip(*walker.rows, strict=True)))
    if not line.clear:
        _without_strangers(line, along, rows, end)
    return rows


class _Walker:
    """Rays on their way: rows so far, and which still go on."""

    def __init__(
        self,
        line: Line,
        along: FloatArray,
        end: float,
        leaving: FloatArray,
        share: Callable[[FloatArray], FloatArray] | None,
    ) -> None:
        self.line, self.along, self.end, self.leaving, self.share = line, along, end, leaving, share
        zero = np.zeros(len(along))
        self.rows = [(zero, zero, zero)]
        self.active: Which = np.flatnonzero(leaving > 0)

    @property
    def q(self) -> FloatArray:
        """Where the rays are."""
        return self.rows[-1][0]

    def step(self, q: FloatArray) -> None:
        """Move the active rays to q; V turns at most once on the way, there a row is put in."""
        active = self.active
        v, d = self.line.rise(q, self.along[active])
        before = self.q[active]
        slope = self.rows[-1][2][active]
        out = np.zeros(0, dtype=int)
        if self.line.field.walls:
            out = np.flatnonzero(~self.line.within(q, self.along[active]))
            q = q.copy()
            q[out] = self._bisect(before[out], q[out], active[out], self.line.within)
            v, d = self.line.rise(q, self.along[active])
        turning = np.flatnonzero(slope * d < 0)
        if turning.size:
            self._turn(before[turning], q[turning], active[turning], np.sign(slope[turning]))
            if self.line.clear:  # a summit above the end is where the ray leaves, however low it lies beyond
                over = self.rows[-1][1][active] >= self.end
                q, v, d = (
                    np.where(over, row[active], new)
                    for row, new in zip(self.rows[-1], (q, v, d), strict=True)
                )
        self._add(active, q, v, d)
        done = q >= self.leaving[active]
        done[out] = True
        if self.share is not None and len(self.rows) % LOOKS == 0:
            done |= self.share(np.array(self.line.columns(q, self.along[active]))) < NOTHING
        if self.line.clear:
            done |= self.rows[-1][1][active] >= self.end
        self.active = active[~done]

    def _turn(self, lo: FloatArray, hi: FloatArray, rays: Which, sense: FloatArray) -> None:
        """A row at the places where V turns: regula falsi for dV/dq, in its Illinois variant."""
        along = self.along[rays]
        low, high = (self.line.rise(q, along)[1] * sense for q in (lo, hi))
        for _ in range(TURNS):
            with np.errstate(all="ignore"):
                q = (lo * high - hi * low) / (high - low)
            q = np.where((q > lo) & (q < hi), q, (lo + hi) / 2)
            slope = self.line.rise(q, along)[1] * sense
            before = slope > 0
            high, low = np.where(before, high / 2, slope), np.where(before, slope, low / 2)
            lo, hi = np.where(before, q, lo), np.where(before, hi, q)
        v, d = self.line.rise(q, along)
        at_pass = (sense > 0) & (v < self.end) & (v >= self.end * (1 - PASS))
        self._add(rays, q, np.where(at_pass, self.end, v), d)

    def _add(self, rays: Which, q: FloatArray, v: FloatArray, d: FloatArray) -> None:
        row = tuple(column.copy() for column in self.rows[-1])
        for column, new in zip(row, (q, v, d), strict=True):
            column[rays] = new
        self.rows.append((row[0], row[1], row[2]))

    def _bisect(
        self,
        lo: FloatArray,
        hi: FloatArray,
        rays: Which,
        before: Callable[[FloatArray, FloatArray], NDArray[np.bool_]],
    ) -> FloatArray:
        """The last place on rays for which `before` holds."""
        along = self.along[rays]
        for _ in range(50):
            middle = (lo + hi) / 2
            nearer = before(middle, along)
            lo, hi = np.where(nearer, middle, lo), np.where(nearer, hi, middle)
        return lo


def _without_strangers(line: Line, along: FloatArray, rows: Rows, end: float) -> None:
    """Set V to inf in stretches below the end, after the first, none of whose rows is held."""
    below = rows.v < end
    first = np.argmax(~below, axis=0)
    first = np.where(below.all(axis=0), len(below), first)
    later = below & (np.arange(len(below))[:, None] > first)
    row, ray = np.nonzero(later)
    if not row.size:
        return
    ours = np.zeros_like(below)
    ours[row, ray] = line.region.holds(line.points(rows.q[row, ray], along[ray]))
    for order in (range(1, len(below)), range(len(below) - 2, -1, -1)):
        step = -1 if order.step > 0 else 1
        for k in order:
            ours[k] |= later[k] & ours[k + step] & later[k + step]
    rows.v[later & ~ours] = np.inf
