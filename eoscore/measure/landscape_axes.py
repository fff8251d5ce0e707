"""Where to look: points along each coordinate that resolve whatever a formula does along it.

The scales come from the formula: centres (zeros of its linear parts), wavelengths, and the decades over which
its slope along a coordinate is not a plain power. So a waist of 30 um and an arm of 5 mm are both seen.
"""

from __future__ import annotations

from itertools import product
from typing import TYPE_CHECKING

import numpy as np

from eoscore.formula.polynomial import polynomial
from eoscore.formula.tape import ordered

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from eoscore.measure.landscape_chart import Array, Chart

__all__ = ["Axis", "axes_of"]

DECADES = np.arange(-36, 13)
MOST_MARKS = 12
MOST_TURNS = 800
MOST_ANCHORS = 40
MOST_LINES = 10
BEYOND = 14  # decades beyond all structure at which the axes end
MOST_CROSSINGS = 64
MOST_WAVES = 4000
_WAVES = frozenset({"sin", "cos", "tan", "besselj"})


class Axis:
    """What is known of one coordinate: its marks, its smallest and largest decade, its shortest half-wave."""

    def __init__(self) -> None:
        self.marks: set[float] = {0.0}
        self.least, self.most = 99, -99
        self.half_wave = np.inf
        self.turns: Array = np.zeros(0)  # where V turns along the axis
        self.known: Array = np.zeros(0)  # points along it, and how much V changes up to each
        self.change: Array = np.zeros(0)

    def mark(self, place: float) -> None:
        """Take in a centre, if it is a new one."""
        known = any(abs(place - other) <= 1e-9 * abs(place) for other in self.marks)
        if not known and len(self.marks) < MOST_MARKS:
            self.marks.add(place)

    def see(self, decades: NDArray[np.int_]) -> None:
        """Take in decades where something happens."""
        if decades.size:
            self.least, self.most = min(self.least, int(decades.min())), max(self.most, int(decades.max()))

    def points(self, count: int) -> Array:
        """About `count` points where V changes most along the axis, its turns, and a few far out."""
        shares = np.linspace(0, self.change[-1], max(count - self.turns.size, 8))
        chosen = np.interp(shares, self.change, self.known)
        far = 10.0 ** np.arange(self.most + 2, self.most + BEYOND, 3)
        points = np.array(sorted(self.marks))
        for more in (self.turns, chosen, far, -far):
            apart = np.min(np.abs(np.subtract.outer(more, points)), axis=1) > 10.0 ** (self.least - 2)
            points = np.union1d(points, more[apart])
        return points

    def line(self) -> Array:
        """Many points, to find the turns of V along the axis."""
        steps = np.logspace(self.least - 1, self.most + 1, 16 * (self.most - self.least + 2))
        if np.isfinite(self.half_wave):
            steps = np.union1d(steps, self.half_wave / 6 * np.arange(1, MOST_WAVES))
        return np.unique(np.concatenate([mark + side * steps for mark in self.marks for side in (-1, 0, 1)]))


def axes_of(chart: Chart) -> list[Axis]:
    """The axes of a chart."""
    axes = [Axis() for _ in chart.names]
    _read_linear_parts(chart, axes)
    anchors = _anchors(chart, axes)
    _see_scales(chart, axes, anchors)
    known = [axis for axis in axes if axis.most > -99]
    least = min((axis.least for axis in known), default=-5)
    for axis in axes:  # a coordinate without any scale of its own takes the others'
        if axis.most == -99:
            axis.see(np.array([least, max((a.most for a in known), default=-5)]))
    for i, axis in enumerate(axes):
        _follow(chart, i, axis, anchors)
    return axes


def _follow(chart: Chart, i: int, axis: Axis, anchors: Array) -> None:
    """Go along the axis through the anchors: note where V turns, meets a wall, and how much it changes on the way."""
    line = axis.line()
    points = np.repeat(anchors[:MOST_LINES, None, :], line.size, axis=1)
    points[:, :, i] = line
    slope = np.sign(chart.slopes(points)[..., i])
    turned = slope[:, 1:] * slope[:, :-1] < 0
    found = [_turns(chart, i, points, turned)]
    if chart.walls:
        found.append(_crossings(chart, i, points))
    turns = np.unique(np.concatenate(found))
    apart = np.min(np.abs(np.subtract.outer(sorted(axis.marks), turns)), axis=0, initial=np.inf)
    same = np.minimum(0.03 * apart, axis.half_wave / 8) + 1e-6 * 10.0**axis.least
    turns = turns[np.diff(turns, prepend=-np.inf) > same]
    axis.turns = turns[np.argsort(np.abs(turns), kind="stable")[:MOST_TURNS]]
    v = chart.value(points)
    change = np.max([_change(row, bends) for row, bends in zip(v, turned, strict=True)], axis=0)
    nearest = np.min(np.abs(np.subtract.outer(sorted(axis.marks), (line[1:] + line[:-1]) / 2)), axis=0)
    decades = np.diff(line) / (nearest + 10.0 ** (axis.least - 1))
    axis.known, axis.change = line, np.concatenate([[0.0], np.cumsum(change + 0.1 * decades)])


def _turns(chart: Chart, i: int, points: Array, turned: NDArray[np.bool_]) -> Array:
    """Where the slope along the axis vanishes or jumps between neighbouring points, by bisection."""
    row, k = np.nonzero(turned)
    low, high = points[row, k], points[row, k + 1]
    sign = np.sign(chart.slopes(low)[:, i])
    for _ in range(18):
        middle = (low + high) / 2
        same = np.sign(chart.slopes(middle)[:, i]) == sign
        low[same], high[~same] = middle[same], middle[~same]
    turns: Array = (low[:, i] + high[:, i]) / 2
    return turns


def _change(v: Array, turned: NDArray[np.bool_]) -> Array:
    """How much V changes between points, in units of its hills and valleys; far above them by the logarithm."""
    inside = np.isfinite(v)
    if not inside.any():
        return np.zeros(v.size - 1)
    heights = v[:-1][turned & inside[:-1]]
    scale = float(np.ptp(heights)) if heights.size > 1 else 0.0
    scale = scale or float(np.median(np.abs(v[inside] - np.median(v[inside])))) or 1.0
    with np.errstate(all="ignore"):
        level = np.arcsinh((v - np.median(v[inside])) / scale)
    with np.errstate(invalid="ignore"):
        return np.nan_to_num(np.abs(np.diff(level)), posinf=0.0)


def _crossings(chart: Chart, i: int, points: Array) -> Array:
    """Coordinates just inside of where lines cross a wall, by bisection."""
    margins = chart.margins(points)
    wall, row, k = np.nonzero(np.diff(np.sign(margins), axis=2))
    wall, row, k = wall[:MOST_CROSSINGS], row[:MOST_CROSSINGS], k[:MOST_CROSSINGS]
    rises = margins[wall, row, k + 1] > margins[wall, row, k]
    inside, outside = points[row, k + rises], points[row, k + ~rises]
    for _ in range(60):
        middle = (inside + outside) / 2
        within = chart.margins(middle)[wall, np.arange(wall.size)] >= 0
        inside[within], outside[~within] = middle[within], middle[~within]
    result: Array = inside[:, i]
    return result


def _read_linear_parts(chart: Chart, axes: list[Axis]) -> None:
    """Centres and wavelengths from the linear subexpressions a.x + b of the formula and its walls."""
    zero = (0,) * len(axes)
    for node in ordered([chart.formula, *chart.walls]):
        arguments = node.args if node.op in _WAVES else ()
        for argument in arguments:
            for i, slope in enumerate(_linear(argument, chart)):
                if slope:
                    axes[i].half_wave = min(axes[i].half_wave, np.pi / abs(slope))
        if node.op not in ("add", "sub"):
            continue
        slopes = _linear(node, chart)
        if slopes.any():
            terms = polynomial(node, chart.names) or {}  # type: ignore[arg-type]  # a sum is a formula
            foot = -terms.get(zero, 0.0) * slopes / (slopes @ slopes)
            for i in np.flatnonzero(foot).tolist():
                axes[i].mark(float(foot[i]))


def _linear(node: object, chart: Chart) -> Array:
    """The slopes of a linear expression; zeros if it is not linear."""
    nothing = np.zeros(len(chart.names))
    terms = polynomial(node, chart.names)  # type: ignore[arg-type]
    if not terms or any(sum(powers) > 1 for powers in terms):
        return nothing
    for powers, value in terms.items():
        if sum(powers) == 1:
            nothing[powers.index(1)] = value
    return nothing


def _anchors(chart: Chart, axes: list[Axis]) -> Array:
    """Points where lines along the coordinates start: combinations of marks, the lowest V first."""
    combinations = np.array(list(product(*(sorted(axis.marks, key=abs)[:6] for axis in axes))))
    order = np.argsort(chart.value(combinations), kind="stable")
    return combinations[order[:MOST_ANCHORS]]


def _see_scales(chart: Chart, axes: list[Axis], anchors: Array) -> None:
    """The decades over which V or a wall changes along the coordinates otherwise than by a power."""
    steps = 10.0**DECADES
    for i, axis in enumerate(axes):
        for side in (1.0, -1.0):
            points = np.repeat(anchors[:, None, :], steps.size, axis=1)
            points[:, :, i] += side * steps
            slope = chart.slopes(points)[..., i]
            lost = steps < 1e-9 * np.linalg.norm(anchors, axis=1)[:, None]  # in the rounding of x
            if chart.creases:
                lost = lost | chart.unresolved(points, anchors[:, None, :])
            slope[lost] = np.nan
            axis.see(DECADES[_bends(slope)])
            if chart.walls:
                sides = np.where(lost, 0.0, np.sign(chart.margins(points)))
                crossed = np.any(sides[:, :, 1:] * sides[:, :, :-1] < 0, axis=(0, 1))
                axis.see(DECADES[1:][crossed])
        if np.isfinite(axis.half_wave):
            axis.see(np.array([np.floor(np.log10(axis.half_wave))]))


def _bends(slope: Array) -> NDArray[np.bool_]:
    """Where log|slope|, taken at decades, is no straight line, or the slope changes sign."""
    with np.errstate(all="ignore"):
        size = np.log10(np.abs(slope))
        alive = np.isfinite(size)
        bend = np.abs(np.diff(size, 2, axis=1)) > 0.05
    turned = np.diff(np.sign(slope), axis=1) != 0
    result = np.zeros(slope.shape[1], bool)
    result[1:-1] |= np.any(bend & alive[:, :-2] & alive[:, 1:-1] & alive[:, 2:], axis=0)
    result[1:] |= np.any(turned & alive[:, 1:] & alive[:, :-1], axis=0)
    return result
