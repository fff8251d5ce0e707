"""The landscape of one coordinate: x, or rho and r, which are followed through the origin as even functions."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from eoscore.formula import call, variable
from eoscore.measure.landscape_pieces import FAR, monotone_pieces, positive_intervals
from eoscore.measure.landscape_record import Escape, Kind, Landscape, Minimum, multiplicity

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from eoscore.formula import Formula
    from eoscore.formula.field import Field

    Array = NDArray[np.float64]

__all__ = ["RADIAL", "survey_line"]

RADIAL = frozenset({"rho", "r", "p"})


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
    pieces = monotone_pieces(f, name, ends)
    wells = [well for ends in stretches for well in _wells(f, name, ends, pieces.points, pieces.signs)]
    if name in RADIAL:
        wells = [well for well in wells if well.place >= 0 or well.high > 0]
    if not wells:
        return Landscape(field.coordinates, None, why=_nothing(name, stretches, pieces.signs))
    bottom = _lowest(wells)
    turns = pieces.points[1:-1]
    escape = _escape(f, name, bottom, turns, mirrored=name in RADIAL)
    minima = [
        _minimum(field.formula, name, well, turns) for well in _joined(f, name, bottom, wells, turns, escape)
    ]
    why = ""
    if escape and escape.energy - bottom.value <= 1e-13 * abs(bottom.value):
        why = f"V stays at its least value without end along {name}: this potential holds nothing"
    return Landscape(field.coordinates, minima[0], tuple(minima), escape, why)


def _nothing(name: str, stretches: list[tuple[float, float]], signs: Array) -> str:
    """Why there is no minimum."""
    if not stretches:
        return "no point lies inside all walls"
    if not signs.any():
        return f"V is level along {name} without end: this potential holds nothing"
    if np.all(signs >= 0) or np.all(signs <= 0):
        return f"V falls along {'-' if np.any(signs > 0) else '+'}{name} without end: this potential holds nothing"
    return f"V has no local minimum along {name}: this potential holds nothing"


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
    high = turns[f.evaluate({name: turns}) >= ceiling]
    low_end = max([bottom.stretch[0], *high[high < bottom.place].tolist()])
    high_end = min([bottom.stretch[1], *high[high > bottom.place].tolist()])
    others = [w for w in wells if w is not bottom and low_end <= w.place <= high_end and w.value < ceiling]
    return [bottom, *sorted(others, key=lambda well: well.value)]


def _minimum(f: Formula, name: str, well: _Well, turns: Array) -> Minimum:
    slope, x = f.derivative(name), well.place
    bend = float(slope.derivative(name).evaluate({name: x}))
    kind: Kind = _kind(slope, name, well, turns, bend)
    curvatures: tuple[float, ...] | None = None
    count = multiplicity(name)
    if kind == "flat":
        curvatures = (0.0,) * count
    elif kind == "quadratic":
        off_axis = name in RADIAL and x > 0
        curvatures = (0.0,) * (count - 1) + (bend,) if off_axis else (bend,) * count
        kind = {2: "ring", 3: "sphere"}.get(count, kind) if off_axis else kind  # type: ignore[assignment]
    return Minimum((x,), well.value, kind, np.array([[bend]]), curvatures)


def _kind(slope: Formula, name: str, well: _Well, turns: Array, bend: float) -> Kind:
    """How V rises from a minimum, by the growth of its slope on both sides."""
    if well.high - well.low > max(1e-20, 1e-6 * abs(well.place)):
        return "flat"
    if well.walled:
        return "wall"
    x = well.place
    near = min([abs(t) for t in turns.tolist() if t] or [1.0])
    step = 1e-7 * (abs(x) or min(near, 1.0))
    offsets = np.array([-2.0, -1.0, 1.0, 2.0]) * step
    left2, left, right, right2 = slope.evaluate({name: x + offsets}).tolist()
    if name in RADIAL and abs(x) < 1e-30:
        left, left2 = -right, -right2
    with np.errstate(all="ignore"):
        growth = np.log2(np.array([left2, right2]) / np.array([left, right]))
    even = abs(left + right) < 0.02 * abs(right)
    if even and np.all(np.abs(growth - 1) < 0.02) and bend > 0:
        return "quadratic"
    return "cone" if np.all(np.abs(growth) < 0.02) else "other"
