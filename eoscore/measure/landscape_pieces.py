"""A function of one variable cut into monotone pieces, over all scales from 1e-36 to 1e24.

Interval bounds of the derivative prove most cells monotone at once; the others are halved until the second
derivative proves a single root in them or they are points. So no well is stepped over, however narrow.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from functools import lru_cache
from typing import TYPE_CHECKING

import numpy as np

from eoscore.formula import evaluate_many
from eoscore.formula.interval import bounds
from eoscore.formula.tape import ordered

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from eoscore.formula import Formula
    from eoscore.formula.expression import Node

    Array = NDArray[np.float64]

__all__ = ["Pieces", "monotone_pieces", "positive_intervals"]

FAR = 1e24
DECADES = 10.0 ** np.arange(-36, 25)
MOST_CELLS = 40_000
SAMPLES = 24
BESIDE, NEAREST = 2e-15, 1e-30  # relative, and in SI: the sides of a jump
LEVEL = 1e-14  # a slope that changes V by less than this share of its range so far is level
_KINKS = frozenset({"abs", "sign", "min", "max", "choose", "atan2"})


@dataclass(frozen=True)
class Pieces:
    """Points in ascending order and the sign of the slope between neighbours (0: level).

    gaps (n, 2): stretches, at most one on each side of 0, that hold more pieces than are followed: level cells.
    """

    points: Array
    signs: Array
    gaps: Array = field(default_factory=lambda: np.empty((0, 2)))


@lru_cache(maxsize=32)
def monotone_pieces(
    f: Formula, name: str, ends: tuple[float, float] = (-np.inf, np.inf), jumps: tuple[float, ...] = ()
) -> Pieces:
    """The pieces of f between -1e24 and 1e24; what lies beyond `ends` by a decade is left out.

    jumps: places at which f goes up or down at once; each is a piece of no length. Where more than some ten thousand
    cells are unproved, the points of those farthest from 0 tell the slope.
    """
    slope = f.derivative(name)
    smooth = not any(node.op in _KINKS and not _folds(node) for node in ordered([f]))
    edges = np.concatenate([-DECADES[::-1], [0.0], DECADES])
    within = (edges[1:] > ends[0]) & (edges[:-1] < ends[1])
    low, high, steps = _beside(f, name, edges[:-1][within], edges[1:][within], jumps)
    done: list[tuple[Array, Array, Array]] = [steps]
    left: list[Array] = []
    for _ in range(140):
        if not low.size:
            break
        sign, settled = _signs(f, slope, name, low, high)
        if smooth:
            low, high, sign, settled = _rooted(slope, name, low, high, sign, settled)
            settled |= _in_the_noise(f, slope, name, low, high)
        points = ~settled & (
            (high - low <= 4e-16 * np.maximum(np.abs(low), np.abs(high))) | (high - low < 3e-36)
        )
        finished = settled | points
        done.append((low[finished], high[finished], np.where(points, 0.0, sign)[finished]))
        low, high = _halved(low[~finished], high[~finished])
        if low.size > MOST_CELLS:
            order = np.argsort(np.minimum(np.abs(low), np.abs(high)), kind="stable")
            near, far = np.sort(order[: MOST_CELLS // 2]), order[MOST_CELLS // 2 :]
            sign, seen = _seen(f, name, low[far], high[far])
            done.append((low[far][seen], high[far][seen], sign[seen]))
            left.append(np.stack([low[far], high[far]], axis=1)[~seen])
            low, high = low[near], high[near]
    return _joined(done, _merged(left))


def _beside(
    f: Formula, name: str, low: Array, high: Array, jumps: tuple[float, ...]
) -> tuple[Array, Array, tuple[Array, Array, Array]]:
    """Cells cut on both sides of jumps, and the cells between these sides with the sign of the jump."""
    at = np.array([x for x in jumps if low[0] < x < high[-1]])
    beside = np.maximum(np.abs(at) * BESIDE, NEAREST)
    left, right = at - beside, at + beside
    edges = np.unique(np.concatenate([low, high, left, right]))
    low, high = edges[:-1], edges[1:]
    crossing = np.any(np.abs((low + high) / 2 - at[:, None]) < beside[:, None], axis=0)
    values = [np.broadcast_to(f.evaluate({name: x}), x.shape) for x in (left, right)]
    return low[~crossing], high[~crossing], (left, right, np.sign(values[1] - values[0]))


def _seen(f: Formula, name: str, low: Array, high: Array) -> tuple[Array, NDArray[np.bool_]]:
    """The sign of the slope over cells where f changes one way, and which cells these are.

    Values all over a cell tell, where no bound proves it (q^2/(1 + q^2) far out); but nothing beyond the first
    cell in which f goes both ways.
    """
    share = (np.arange(SAMPLES) + 0.5) / SAMPLES
    values = f.evaluate({name: low + (high - low) * share[:, None]})
    with np.errstate(invalid="ignore"):
        rise, noise = np.diff(values, axis=0), 1e-15 * np.abs(values[1:])
    rises, falls = np.any(rise > noise, axis=0), np.any(rise < -noise, axis=0)
    clear = ~(rises & falls) & np.all(np.isfinite(values), axis=0)
    distance = np.minimum(np.abs(low), np.abs(high))
    for side in (low >= 0, high <= 0):
        clear &= ~side | (distance < np.min(distance[side & ~clear], initial=np.inf))
    return rises * 1.0 - falls * 1.0, clear


def _merged(cells: list[Array]) -> Array:
    """On each side of 0 the stretch that holds all these cells, none of which is near 0."""
    ends = np.concatenate([np.empty((0, 2)), *cells])
    sides = [ends[ends[:, 1] <= 0], ends[ends[:, 0] >= 0]]
    return np.array([(side[:, 0].min(), side[:, 1].max()) for side in sides if side.size]).reshape(-1, 2)


def _folds(node: Node) -> bool:
    """Whether a kink lies at 0 only, where no cell has its inside."""
    return node.op in ("abs", "sign") and node.args[0].op == "variable"


def _signs(f: Formula, slope: Formula, name: str, low: Array, high: Array) -> tuple[Array, NDArray[np.bool_]]:
    """The sign of the slope over each cell, and whether it is settled."""
    least, most = bounds(slope, {name: (low, high)})
    sign = np.where(least > 0, 1.0, np.where(most < 0, -1.0, 0.0))
    reach = np.maximum(np.abs(low), np.abs(high))
    with np.errstate(all="ignore"):
        steepest = np.maximum(np.abs(least), np.abs(most)) * reach
        level = steepest <= LEVEL * _range_within(f, name, reach)
    outside = np.isnan(least)
    return np.where(level, 0.0, sign), (sign != 0) | level | (steepest < 1e-290) | outside


def _in_the_noise(f: Formula, slope: Formula, name: str, low: Array, high: Array) -> NDArray[np.bool_]:
    """Where the slope is too small to change f in double precision (terms of a quartic bottom that cancel)."""
    least, most = bounds(slope, {name: (low, high)})
    height = np.abs(f.evaluate({name: high}))
    steepest = np.maximum(np.abs(least), np.abs(most)) * np.maximum(np.abs(low), np.abs(high))
    return np.asarray(steepest <= 1e-16 * height)


def _range_within(f: Formula, name: str, reach: Array) -> Array:
    """How much f varies within -reach..reach, seen at decades; the slope of a pole at 0 does not count."""
    radii = np.concatenate([[0.0], DECADES])
    with np.errstate(all="ignore"):
        both = np.stack([f.evaluate({name: radii}), f.evaluate({name: -radii})])
        if not np.isfinite(both[0, 0]):
            size = np.abs(both[:, 1:])
            rising = (size[:, 1:] >= size[:, :-1]) & np.isfinite(size[:, 1:])
            lowered = np.logical_and.accumulate(~rising, axis=1)
            both[:, 1:-1][lowered] = np.nan
        both = np.where(np.isfinite(both), both, np.nan)
        least = np.fmin.accumulate(np.fmin(both[0], both[1]))
        most = np.fmax.accumulate(np.fmax(both[0], both[1]))
    spread = np.nan_to_num(most - least)
    inner = np.searchsorted(radii, reach * (1 + 1e-9), side="right") - 1
    result: Array = spread[np.maximum(inner, 0)]
    return result


def _rooted(
    slope: Formula, name: str, low: Array, high: Array, sign: Array, settled: NDArray[np.bool_]
) -> tuple[Array, Array, Array, NDArray[np.bool_]]:
    """Settle the cells whose slope is proved monotone: cut them at its root if there is one."""
    least, most = bounds(slope.derivative(name), {name: (low, high)})
    clear = ~settled & ((least > 0) | (most < 0))
    if not clear.any():
        return low, high, sign, settled
    start, end = low[clear], high[clear]
    before, after = (np.sign(slope.evaluate({name: x})) for x in (start, end))
    root = _roots(slope, name, start, end)
    root = np.where(before == 0, start, np.where(after == 0, end, root))
    crosses = before * after <= 0
    sign, settled = sign.copy(), settled | clear
    before, after = np.where(before == 0, -after, before), np.where(after == 0, -before, after)
    sign[clear], end_kept = before, end.copy()
    high = high.copy()
    high[clear] = np.where(crosses, root, end)
    right = crosses & (root < end)
    return (
        np.concatenate([low, root[right]]),
        np.concatenate([high, end_kept[right]]),
        np.concatenate([sign, after[right]]),
        np.concatenate([settled, np.ones(int(right.sum()), bool)]),
    )


def _roots(f: Formula, name: str, low: Array, high: Array) -> Array:
    """The root of f in each bracket, by Newton's method kept inside it; anything where there is none."""
    slope = f.derivative(name)
    found, start = (low + high) / 2, np.sign(f.evaluate({name: low}))
    active, before = np.arange(found.size), np.full(found.shape, np.inf)
    for _ in range(120):
        x = found[active]
        value, rise = evaluate_many([f, slope], {name: x})
        left = np.sign(value) == start[active]
        low, high = np.where(left, x, low), np.where(left, high, x)
        with np.errstate(all="ignore"):
            new = x - value / rise
        new = np.where((new >= low) & (new <= high), new, (low + high) / 2)
        found[active] = new
        step = np.abs(new - x)
        rounding = (step >= before) & (step <= 1e-14 * np.abs(new))  # it wanders in the noise of f
        moving = (step > 2e-16 * np.abs(new)) & ~rounding
        active, low, high, before = active[moving], low[moving], high[moving], step[moving]
        if not active.size:
            break
    return found


def _halved(low: Array, high: Array) -> tuple[Array, Array]:
    """Each cell in two: by the geometric mean where it spans scales, else by the middle."""
    with np.errstate(all="ignore"):
        geometric = np.sign(low) * np.sqrt(low * high)
    middle = (
        np.where((low * high > 0) & (np.maximum(low / high, high / low) > 4), geometric, (low + high) / 2)
        if low.size
        else low
    )
    return np.concatenate([low, middle]), np.concatenate([middle, high])


def _joined(done: list[tuple[Array, Array, Array]], gaps: Array) -> Pieces:
    """Cells in order, neighbours of one sign joined; gaps (cells given up) count as level."""
    low, high, sign = (np.concatenate(column) for column in zip(*done, strict=True))
    order = np.lexsort((high, low))
    low, high, sign = low[order], high[order], sign[order]
    wide = high > low
    low, high, sign = low[wide], high[wide], sign[wide]
    points, signs = [low[0]], []
    for a, b, s in zip(low.tolist(), high.tolist(), sign.tolist(), strict=True):
        if a > points[-1]:
            signs.append(0.0)
            points.append(a)
        if signs and signs[-1] == s:
            points[-1] = b
        else:
            signs.append(s)
            points.append(b)
    return Pieces(np.array(points), np.array(signs), gaps)


def positive_intervals(walls: tuple[Formula, ...], name: str) -> list[tuple[float, float]]:
    """Where all the formulas are positive, as intervals in ascending order; infinite ends are inf."""
    cuts = [np.array([-FAR, FAR])]
    for wall in walls:
        points = monotone_pieces(wall, name).points
        value = wall.evaluate({name: points})
        crossing = np.flatnonzero(np.sign(value[:-1]) * np.sign(value[1:]) < 0)
        cuts += [_roots(wall, name, points[crossing], points[crossing + 1]), points[value == 0]]
    edges = np.unique(np.concatenate(cuts))
    middles = (edges[:-1] + edges[1:]) / 2
    inside = (
        np.all([wall.evaluate({name: middles}) > 0 for wall in walls], axis=0) if walls else middles > -np.inf
    )
    found: list[tuple[float, float]] = []
    for a, b, within in zip(edges[:-1].tolist(), edges[1:].tolist(), inside, strict=True):
        if within and found and found[-1][1] == a:
            found[-1] = (found[-1][0], b)
        elif within:
            found.append((a, b))
    return [(-np.inf if a == -FAR else a, np.inf if b == FAR else b) for a, b in found]
