"""The landscape of one coordinate: x, or rho and r, which are followed through the origin as even functions."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from eoscore.formula import call, variable
from eoscore.formula.interval import bounds
from eoscore.measure.kinks import jumps_of
from eoscore.measure.landscape_pieces import FAR, monotone_pieces, positive_intervals
from eoscore.measure.landscape_record import Escape, Kind, Landscape, Minimum, multiplicity

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from eoscore.formula import Formula
    from eoscore.formula.field import Field
    from eoscore.measure.landscape_pieces import Pieces

    Array = NDArray[np.float64]

__all__ = ["RADIAL", "survey_line"]

RADIAL = frozenset({"rho", "r", "p"})
MOST_MINIMA = 1000  # told of; a measure counts all
PARTS = 1000  # of a stretch that is bounded
FAINT = 1e-80  # J: steep powers near their bottom fall below the range of doubles, whose rounding is no well


@dataclass(frozen=True)
class _Well:
    """A local minimum, where V is level from `low` to `high`, in the stretch of the line between two walls."""

    low: float
    high: float
    value: float
    walled: bool
    stretch: tuple[float, float]

    @property
    def place(self) -> float:
        return (self.low + self.high) / 2


def survey_line(field: Field) -> Landscape:
    """The landscape of a field of one coordinate."""
    (name,) = field.coordinates
    f, walls = field.formula, field.walls
    if name in RADIAL:
        even = {name: call("abs", variable(name))}
        f, walls = f.substitute(even), tuple(wall.substitute(even) for wall in walls)
    stretches = positive_intervals(walls, name)
    ends = (stretches[0][0], stretches[-1][1]) if stretches else (-np.inf, np.inf)
    pieces = monotone_pieces(f, name, ends, jumps_of(f, name, *ends))
    wells = [well for ends in stretches for well in _wells(f, name, ends, pieces.points, pieces.signs)]
    if name in RADIAL:
        wells = [well for well in wells if well.place >= 0 or well.high > 0]
    if not wells:
        return Landscape(field.coordinates, None, why=_nothing(name, stretches, pieces.signs))
    bottom = _lowest(wells)
    turns = pieces.points[1:-1]
    escape = _escape(f, name, bottom, turns, mirrored=name in RADIAL)
    joined = _joined(f, name, bottom, wells, turns, escape)[:MOST_MINIMA]
    minima = _minima(field.formula, name, joined, turns)
    why = ""
    if escape and escape.energy - bottom.value <= 1e-13 * abs(bottom.value):
        why = f"V stays at its least value without end along {name}: this potential holds nothing"
    return Landscape(
        field.coordinates, minima[0], minima, escape, why or _doubt(f, name, pieces, bottom, escape)
    )


def _nothing(name: str, stretches: list[tuple[float, float]], signs: Array) -> str:
    """Why there is no minimum."""
    if not stretches:
        return "no point lies inside all walls"
    if not signs.any():
        return f"V is level along {name} without end: this potential holds nothing"
    if np.all(signs >= 0) or np.all(signs <= 0):
        return f"V falls along {'-' if np.any(signs > 0) else '+'}{name} without end: this potential holds nothing"
    return f"V has no local minimum along {name}: this potential holds nothing"


def _doubt(f: Formula, name: str, pieces: Pieces, bottom: _Well, escape: Escape | None) -> str:
    """Why wells that were not looked at may hold the bottom or the escape; nothing where they cannot."""
    a, b = bottom.stretch
    gaps = pieces.gaps[(pieces.gaps[:, 1] > a) & (pieces.gaps[:, 0] < b)]
    if not gaps.size:
        return ""
    cuts = np.clip(np.geomspace(gaps[:, 0], gaps[:, 1], PARTS + 1, axis=1), a, b)  # no gap is about 0
    least, most = bounds(f, {name: (cuts[:, :-1], cuts[:, 1:])})
    slack = FAINT + 1e-13 * (max(abs(bottom.value), abs(escape.energy)) if escape else abs(bottom.value))
    deeper = np.any(~(least >= bottom.value - slack))
    higher = escape is not None and np.any(~(most <= escape.energy + slack))
    if not deeper and not higher:
        return ""
    first, what = float(np.min(np.abs(gaps))), "a deeper one" if deeper else "a higher pass"
    return (
        f"V has more wells along {name} than the {pieces.points.size // 2} that are looked at, up to {name} = "
        f"{first:.3g} m, and {what} may lie beyond: put walls (`where`) about those that matter"
    )


def _wells(f: Formula, name: str, ends: tuple[float, float], points: Array, signs: Array) -> list[_Well]:
    """The local minima between two walls (or infinities)."""
    a, b = (min(max(end, -FAR), FAR) for end in ends)
    inner = (points > a) & (points < b)
    x = np.concatenate([[a], points[inner], [b]])
    gaps = signs[np.clip(np.searchsorted(points, (x[:-1] + x[1:]) / 2) - 1, 0, len(signs) - 1)]
    found, low, left = [], a, math.nan
    for k, sign in enumerate([*gaps.tolist(), math.nan]):
        if sign == 0:
            continue
        high = float(x[k])
        falls_in = left < 0 or (math.isnan(left) and math.isfinite(ends[0]))
        rises_out = sign > 0 or (math.isnan(sign) and math.isfinite(ends[1]))
        if falls_in and rises_out:
            walled = (low == a and math.isfinite(ends[0])) or (high == b and math.isfinite(ends[1]))
            found.append(_Well(low, high, 0.0, walled, ends))
        if k + 1 < len(x):
            low, left = float(x[k + 1]), sign
    values = f.evaluate({name: np.array([well.place for well in found])})
    return [_Well(w.low, w.high, float(v), w.walled, ends) for w, v in zip(found, values, strict=True)]


def _lowest(wells: list[_Well]) -> _Well:
    """The lowest well; among equals the one nearest the origin, then the one at positive x."""
    least = min(well.value for well in wells)
    slack = 1e-13 * max(abs(least), max(well.value for well in wells) - least)
    equals = [well for well in wells if well.value <= least + slack]
    nearest = min(abs(well.place) for well in equals)
    return max((w for w in equals if abs(w.place) <= nearest * (1 + 1e-9)), key=lambda w: w.place)


def _escape(f: Formula, name: str, bottom: _Well, turns: Array, *, mirrored: bool) -> Escape | None:
    """The lower of the ways out to both sides: the highest V on the way, infinity included."""
    ways = [_way(f, name, bottom, turns, side) for side in ((1.0,) if mirrored else (1.0, -1.0))]
    open_ways = [way for way in ways if way is not None]
    return min(open_ways, key=lambda way: way.energy) if open_ways else None


def _way(f: Formula, name: str, bottom: _Well, turns: Array, side: float) -> Escape | None:
    end = bottom.stretch[1] if side > 0 else bottom.stretch[0]
    if math.isfinite(end):
        return None
    beyond = turns[(turns - bottom.place) * side > 0]
    heights = f.evaluate({name: beyond})
    limit = _limit(f, name, bottom.value, heights, side)
    if limit == math.inf:
        return None
    pass_ = int(np.argmax(heights)) if beyond.size else 0
    top = limit + 1e-12 * abs(limit - bottom.value) if math.isfinite(limit) else limit
    if beyond.size and heights[pass_] > top:
        return Escape((name,), float(heights[pass_]), (float(beyond[pass_]),), (side,))
    return Escape((name,), limit, None, (side,))


def _limit(f: Formula, name: str, bottom: float, heights: Array, side: float) -> float:
    """V far away: its limit, inf where it grows and -inf where it falls without end.

    Approached like 1/x or faster, the limit is exact in double precision at 1e24.
    """
    far = f.evaluate({name: side * 10.0 ** np.array([12, 16, 20, 24])})
    far = far[~np.isnan(far)]
    if not far.size or math.isinf(far[-1]):
        return float(far[-1]) if far.size else math.inf
    size = float(np.max(np.abs(heights - bottom), initial=0.0)) or abs(float(far[0]) - bottom)
    rises = np.diff(far)
    if far.size > 1 and abs(rises[-1]) > 1e-9 * size and np.all(np.sign(rises) == np.sign(rises[-1])):
        return math.copysign(math.inf, rises[-1])
    return float(far[-1])


def _joined(
    f: Formula, name: str, bottom: _Well, wells: list[_Well], turns: Array, escape: Escape | None
) -> list[_Well]:
    """The bottom, then the wells that join it below the escape, lowest first."""
    ceiling = escape.energy if escape else math.inf
    heights = f.evaluate({name: turns})
    high = turns[heights >= ceiling - 1e-14 * abs(ceiling - bottom.value)] if escape else turns[:0]
    low_end = max([bottom.stretch[0], *high[high < bottom.place].tolist()])
    high_end = min([bottom.stretch[1], *high[high > bottom.place].tolist()])
    others = [w for w in wells if w is not bottom and low_end <= w.place <= high_end and w.value < ceiling]
    return [bottom, *sorted(others, key=lambda well: well.value)]


def _minima(f: Formula, name: str, wells: list[_Well], turns: Array) -> tuple[Minimum, ...]:
    slope, x = f.derivative(name), np.array([well.place for well in wells])
    bends = np.broadcast_to(slope.derivative(name).evaluate({name: x}), x.shape).tolist()
    kinds = _kinds(slope, name, wells, turns, bends)
    return tuple(_minimum(name, *row) for row in zip(wells, bends, kinds, strict=True))


def _minimum(name: str, well: _Well, bend: float, kind: Kind) -> Minimum:
    curvatures: tuple[float, ...] | None = None
    count = multiplicity(name)
    if kind == "flat":
        curvatures = (0.0,) * count
    elif kind == "quadratic":
        off_axis = name in RADIAL and well.place > 0
        curvatures = (0.0,) * (count - 1) + (bend,) if off_axis else (bend,) * count
        kind = {2: "ring", 3: "sphere"}.get(count, kind) if off_axis else kind  # type: ignore[assignment]
    return Minimum((well.place,), well.value, kind, np.array([[bend]]), curvatures)


def _kinds(slope: Formula, name: str, wells: list[_Well], turns: Array, bends: list[float]) -> list[Kind]:
    """How V rises from minima, by the growth of its slope on both sides."""
    x = np.array([well.place for well in wells])
    near = np.min(np.abs(turns[turns != 0]), initial=1.0)
    step = 1e-7 * np.where(x != 0, np.abs(x), near)
    offsets = np.array([[-2.0], [-1.0], [1.0], [2.0]]) * step
    left2, left, right, right2 = np.broadcast_to(slope.evaluate({name: x + offsets}), offsets.shape)
    folded = (np.abs(x) < 1e-30) & (name in RADIAL)
    left, left2 = np.where(folded, -right, left), np.where(folded, -right2, left2)
    with np.errstate(all="ignore"):
        growth = np.log2(np.array([left2, right2]) / np.array([left, right]))
    even = np.abs(left + right) < 0.02 * np.abs(right)
    quadratic = even & np.all(np.abs(growth - 1) < 0.02, axis=0) & (np.array(bends) > 0)
    cone = np.all(np.abs(growth) < 0.02, axis=0)
    return [_kind(*row) for row in zip(wells, quadratic.tolist(), cone.tolist(), strict=True)]


def _kind(well: _Well, quadratic: bool, cone: bool) -> Kind:
    if well.high - well.low > max(1e-20, 1e-6 * abs(well.place)):
        return "flat"
    if well.walled:
        return "wall"
    return "quadratic" if quadratic else "cone" if cone else "other"
