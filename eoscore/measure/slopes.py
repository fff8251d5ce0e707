"""Very many monotone stretches of a line at once: on each, how much space lies below an energy, as a short series.

V = base + height sin^2(pi t / 2), 0 <= t <= 1, turns the square roots at a minimum and a maximum into whole powers
of t: between the two ends of a wave cos(q x), x is t itself.
"""

from __future__ import annotations

from dataclasses import dataclass, fields, replace
from functools import cached_property
from typing import TYPE_CHECKING

import numpy as np
from numpy.polynomial.chebyshev import chebder, chebvander

from eoscore.formula import evaluate_many
from eoscore.measure.coordinate import between
from eoscore.measure.panel import ORDER, points, to_series
from eoscore.measure.rules import legendre

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence

    from eoscore.formula import Formula
    from eoscore.measure.base import FloatArray

    IntArray = np.ndarray[tuple[int], np.dtype[np.intp]]

__all__ = ["Slopes", "joined", "overlaps", "rule", "slopes", "strata"]

SMALLEST = 1e-12  # term of a series, beside the space of its stretch
RESOLVED = 1e-10  # tail of a series at which a stretch is not halved
ROUNDS = 12  # of halving
BLOCK = 20_000  # pairs of a stretch and an energy at once
SPREAD = 1e-3  # of V at a point: the space about it is spread over so much
NOISE = 2e-11  # 1e5 roundings: next to its ends a stretch hardly rises, and the first node lies at 2e-3
TURNS = 60  # of Newton's rule


@dataclass(frozen=True)
class Slopes:
    """Stretches (n,) with V from `base` to `base + height` (J from the bottom), and the space in each.

    series (n, m): space below t, over sin(pi t / 2). tail (n,): the size of its last terms, in units of space.
    """

    base: FloatArray
    height: FloatArray
    whole: FloatArray
    series: FloatArray
    tail: FloatArray

    @property
    def top(self) -> FloatArray:
        """Greatest energies, J."""
        return self.base + self.height

    @property
    def noise(self) -> FloatArray:
        """What rounding of V does to the last terms of a series, as a share of its space."""
        return np.asarray(NOISE * np.abs(self.top) / self.height)

    @property
    def unresolved(self) -> float:
        """The tails beyond rounding, together."""
        return float(np.maximum(self.tail - self.noise * self.whole, 0.0).sum())

    def chosen(self, which: object) -> Slopes:
        """Some of the stretches, by any index."""
        return Slopes(*(getattr(self, f.name)[which] for f in fields(self)))

    def trimmed(self) -> Slopes:
        """Without the last terms of the series, where no stretch needs them."""
        used = np.flatnonzero(np.any(np.abs(self.series) > SMALLEST * self.whole[:, None], axis=0))
        return replace(self, series=self.series[:, : used[-1] + 1])

    def place(self, which: IntArray, v: FloatArray) -> FloatArray:
        """The t of energies v (k,) in the stretches `which` (k,)."""
        share = (v - self.base[which]) / self.height[which]
        return np.asarray(2 / np.pi * np.arcsin(np.sqrt(np.clip(share, 0.0, 1.0))))

    def energy(self, which: IntArray, t: FloatArray) -> FloatArray:
        """V at t (k, ...)."""
        shape = (-1, *(1,) * (t.ndim - 1))
        return np.asarray(
            self.base[which].reshape(shape) + self.height[which].reshape(shape) * np.sin(np.pi / 2 * t) ** 2
        )

    def below(self, which: IntArray, t: FloatArray) -> FloatArray:
        """Space below t (k,)."""
        return np.asarray(np.sin(np.pi / 2 * t) * _sum(self.series, which, t))

    def steepness(self, which: IntArray, t: FloatArray) -> FloatArray:
        """Derivative of `below` with respect to t (k, ...)."""
        angle = np.pi / 2 * t
        cosine = np.pi / 2 * np.cos(angle) * _sum(self.series, which, t)
        return np.asarray(cosine + np.sin(angle) * _sum(self._rises, which, t))

    @cached_property
    def _rises(self) -> FloatArray:
        """The series' derivatives."""
        return np.asarray(2 * chebder(self.series, axis=1))


def _sum(series: FloatArray, which: IntArray, t: FloatArray) -> FloatArray:
    """The series at t (k, ...), by Clenshaw's rule."""
    x, shape = 2 * t - 1, (-1, *(1,) * (t.ndim - 1))
    value, before = np.zeros_like(t), np.zeros_like(t)
    for row in series.T[:0:-1]:
        value, before = row[which].reshape(shape) + 2 * x * value - before, value
    return np.asarray(series[:, 0][which].reshape(shape) + x * value - before)


def overlaps(first: IntArray, last: IntArray) -> Iterator[tuple[IntArray, IntArray]]:
    """All pairs (row, k) with first[row] <= k < last[row], in blocks."""
    counts = np.maximum(last - first, 0)
    ends = np.cumsum(counts)
    total = int(ends[-1]) if ends.size else 0
    for start in range(0, total, BLOCK):
        at = np.arange(start, min(start + BLOCK, total))
        row = np.searchsorted(ends, at, side="right")
        yield row, first[row] + at - (ends[row] - counts[row])


def slopes(
    name: str, formula: Formula, low: FloatArray, high: FloatArray, ends: FloatArray, rounds: int = ROUNDS
) -> Slopes:
    """Stretches between points x (n,), V rising monotonously from `low` to `high` through `ends` (n, 2), J.

    Halved until their series converge, as far as that helps.
    """
    parts: list[Slopes] = []
    for turn in range(rounds):
        new, middle = _made(name, formula, low, high, ends)
        largest = np.maximum(new.whole, 0.0 if turn == 0 else parts[0].whole.max(initial=0.0))
        bad = (new.tail > (RESOLVED + new.noise) * largest) & (turn < rounds - 1)
        parts.append(new.chosen(~bad))
        if not bad.any():
            break
        centre, (a, b) = ends[bad].mean(axis=1), ends[bad].T
        low, high = np.concatenate([low[bad], middle[bad]]), np.concatenate([middle[bad], high[bad]])
        ends = np.stack([np.concatenate([a, centre]), np.concatenate([centre, b])], axis=1)
    return joined(parts)


def joined(parts: Sequence[Slopes]) -> Slopes:
    """The stretches of all."""
    return Slopes(*(np.concatenate([getattr(part, f.name) for part in parts]) for f in fields(Slopes)))


def _made(
    name: str, formula: Formula, low: FloatArray, high: FloatArray, ends: FloatArray
) -> tuple[Slopes, FloatArray]:
    """The stretches as they are, and the x where V is half-way."""
    t = np.append(points(), 0.5)
    sine = np.sin(np.pi / 2 * t)
    base, height = ends[:, 0], np.maximum(ends[:, 1] - ends[:, 0], 1e-300)
    x = _roots(name, formula, low, high, height[:, None] * sine**2)
    space = between(name, low[:, None], x[:, :-1]) / sine[:-1]
    series = space @ to_series().T
    tail = np.abs(series[:, -3:]).max(axis=1)
    return Slopes(base, height, between(name, low, high), series, tail), x[:, -1]


def _roots(name: str, formula: Formula, low: FloatArray, high: FloatArray, rise: FloatArray) -> FloatArray:
    """Where V has risen from `low` (n,) by `rise` (n, m), by Newton's rule within brackets."""
    n, m = rise.shape
    start, span = np.repeat(low, m), np.repeat(high - low, m)
    floor = np.repeat(np.broadcast_to(formula.evaluate({name: low}), n), m)
    wanted, slope = rise.ravel(), formula.derivative(name)
    share = 2 / np.pi * np.arcsin(np.sqrt(wanted / np.repeat(2 * rise[:, -1], m)))  # the last is half-way
    lo, hi, active = np.zeros(n * m), np.ones(n * m), np.arange(n * m)
    before = np.full(n * m, np.inf)
    for _ in range(TURNS):
        u = share[active]
        v, steep = evaluate_many([formula, slope], {name: start[active] + span[active] * u})
        miss = v - floor[active] - wanted[active]
        lo, hi = np.where(miss < 0, u, lo), np.where(miss > 0, u, hi)
        with np.errstate(all="ignore"):
            new = u - miss / (steep * span[active])
        new = np.where((new >= lo) & (new <= hi), new, (lo + hi) / 2)
        share[active] = new
        step = np.abs(new - u)
        moving = (step > 4e-16 * u) & ~((step >= before / 2) & (step <= 1e-11 * u))
        active, lo, hi, before = active[moving], lo[moving], hi[moving], step[moving]
        if not active.size:
            break
    return np.asarray((start + span * share).reshape(n, m))


def rule(rows: Slopes, knots: FloatArray, count: int, order: int = ORDER) -> tuple[FloatArray, FloatArray]:
    """Nodes and weights (panels, count) that serve every polynomial in ln v of degree count - 1 on each panel.

    Every stretch is integrated over its part of a panel, and its share goes to the Chebyshev points there.
    """
    first = np.maximum(np.searchsorted(knots, rows.base, side="right") - 1, 0)
    last = np.minimum(np.searchsorted(knots, rows.top, side="left"), knots.size - 1)
    moments = np.zeros((knots.size - 1, count))
    x, dx = legendre(order)
    for which, panel in overlaps(first, last):
        start = rows.place(which, knots[panel])[:, None]
        length = rows.place(which, knots[panel + 1])[:, None] - start
        t = start + length * x
        w = length * dx * rows.steepness(which, t)
        ratio = rows.energy(which, t) / knots[panel][:, None]
        place = 2 * np.log(ratio) / np.log(knots[panel + 1] / knots[panel])[:, None] - 1
        _add(moments, panel, place, w)
    points = np.cos(np.pi * (np.arange(count)[::-1] + 0.5) / count)
    back = chebvander(points, count - 1) * np.where(np.arange(count) > 0, 2.0, 1.0) / count
    v = knots[:-1, None] * (knots[1:] / knots[:-1])[:, None] ** ((1 + points) / 2)
    return v, moments @ back.T


def _add(moments: FloatArray, panel: np.ndarray, place: FloatArray, w: FloatArray) -> None:
    """Add sum w T_k(place) over each row to its panel, for all k."""
    before, now = np.ones_like(place), place
    for k in range(moments.shape[1]):
        moments[:, k] += np.bincount(panel, (w * before).sum(axis=1), len(moments))
        before, now = now, 2 * place * now - before


def strata(name: str, x: FloatArray, middle: FloatArray) -> Slopes:
    """Stretches between neighbours of x (n + 1,), each with all its space next to the V of one point, `middle`."""
    sine = np.sin(np.pi / 2 * points())
    height = SPREAD * np.abs(middle)
    whole = np.abs(between(name, x[:-1], x[1:]))
    series = whole[:, None] * (to_series() @ sine)
    return Slopes(middle - height / 2, height, whole, series, np.zeros_like(middle))
