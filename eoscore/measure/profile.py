"""The held part of a line: the stretches between its turning points, on each of which V is monotone."""

from __future__ import annotations

from dataclasses import dataclass
from itertools import pairwise
from math import inf
from typing import TYPE_CHECKING

import numpy as np

from eoscore.formula import call, variable
from eoscore.measure.branch import Branch
from eoscore.measure.kinks import jumps_of
from eoscore.measure.landscape_pieces import FAR, Pieces, monotone_pieces, positive_intervals
from eoscore.measure.landscape_record import multiplicity

if TYPE_CHECKING:
    from eoscore.formula import Formula
    from eoscore.formula.field import Field
    from eoscore.measure.base import FloatArray
    from eoscore.measure.landscape_record import Landscape

__all__ = ["HeldLine", "held_line"]

BESIDE, NEAR = 2e-15, 1e-30  # relative, and m: the sides of a jump
ROUNDING = 4e-15  # of V: wells whose bottoms differ by less are equally deep


@dataclass(frozen=True)
class HeldLine:
    """The part of a line that is connected to the bottom at the escape energy.

    x (n,): where V turns, and the ends. rise (n,): V there, J from the bottom. gaps (m, 2): stretches on which
    there are too many turns to know. breaks: energies (J from the bottom) at which a turning point or a wall is
    reached. jumps (k,): places at which V jumps; both sides of each are among x.
    """

    name: str
    formula: Formula
    x: FloatArray
    rise: FloatArray
    gaps: FloatArray
    breaks: tuple[float, ...]
    jumps: tuple[float, ...] = ()

    def branches(self) -> tuple[Branch, ...]:
        """The monotone stretches between the turning points."""
        return tuple(
            Branch(self.name, self.formula, a, 1, b - a, up)
            if up <= down
            else Branch(self.name, self.formula, b, -1, b - a, down)
            for (a, b), (up, down) in zip(
                pairwise(self.x.tolist()), pairwise(self.rise.tolist()), strict=True
            )
            if not any(a < jump < b for jump in self.jumps)
        )


def held_line(field: Field, landscape: Landscape) -> HeldLine:
    """The stretches of a field of one coordinate that are connected to the bottom at the escape energy."""
    (name,) = field.coordinates
    radial = multiplicity(name) > 1
    even = {name: call("abs", variable(name))} if radial else {}
    f, walls = field.formula.substitute(even), tuple(wall.substitute(even) for wall in field.walls)
    bottom = landscape.bottom
    if bottom is None:
        raise ValueError("came a landscape without bottom; a profile wants one that holds")
    place, v_min = bottom.position[0], bottom.value
    ends = next(ends for ends in positive_intervals(walls, name) if ends[0] <= place <= ends[1])
    ends = (max(ends[0], 0.0), ends[1]) if radial else ends
    jumps = jumps_of(f, name, *ends)
    pieces = monotone_pieces(f, name, ends, jumps)
    turning = _with_sides(_turning(pieces), jumps)
    x = np.array([ends[0], *turning[(turning > ends[0]) & (turning < ends[1])], ends[1]])
    rise = _rise(f, name, x, v_min)
    held = _connected(x, rise, place, landscape.depth)
    x, rise = x[held], rise[held]
    breaks = tuple(sorted({float(v) for v in rise[np.isfinite(x)] if 0 < v < landscape.depth}))
    gaps = np.clip(pieces.gaps, max(x[0], -FAR), min(x[-1], FAR))
    return HeldLine(name, field.formula, x, rise, gaps[gaps[:, 0] < gaps[:, 1]], breaks, jumps)


def _turning(pieces: Pieces) -> FloatArray:
    """Where V turns from falling to rising or back: in the middle of a piece that is level."""
    moving = np.flatnonzero(pieces.signs)
    return np.array(
        [
            (pieces.points[before + 1] + pieces.points[after]) / 2
            for before, after in pairwise(moving)
            if pieces.signs[before] != pieces.signs[after]
        ]
    )


def _with_sides(turning: FloatArray, jumps: tuple[float, ...]) -> FloatArray:
    """The turning points with the places just before and just after each jump, which itself is none."""
    at = np.array(jumps)
    beside = np.maximum(np.abs(at) * BESIDE, NEAR)
    far = np.array([x for x in turning if not np.any(np.abs(x - at) <= 2 * beside)])
    return np.sort(np.concatenate([far, at - beside, at + beside]))


def _rise(f: Formula, name: str, x: FloatArray, v_min: float) -> FloatArray:
    """V - V_min at the points; at an infinite end, the limit, inf where it rises for ever."""
    v = np.broadcast_to(f.evaluate({name: np.clip(x, -FAR, FAR)}), x.shape)
    rise = v - v_min
    equal = np.isfinite(v) & (np.abs(rise) <= ROUNDING * np.maximum(np.abs(v), abs(v_min)))
    rise = np.where(equal, 0.0, rise)
    return np.where(np.isnan(rise), inf, rise)


def _connected(x: FloatArray, rise: FloatArray, place: float, depth: float) -> slice:
    """From the last point before the bottom that is as high as the escape to the first one after it."""
    high = rise >= depth * (1 - 1e-14)
    lo = np.flatnonzero(high & (x < place))
    hi = np.flatnonzero(high & (x > place))
    return slice(int(lo[-1]) if lo.size else 0, int(hi[0]) + 1 if hi.size else x.size)
