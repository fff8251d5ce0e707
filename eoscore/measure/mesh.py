"""Boxes that cover the held region of a potential below a ceiling, found by flooding from its wells."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from eoscore.measure.landscape_axes import axes_of
from eoscore.measure.landscape_chart import Chart

if TYPE_CHECKING:
    from collections.abc import Sequence

    from numpy.typing import NDArray

    from eoscore.formula.field import Field
    from eoscore.measure.base import FloatArray
    from eoscore.measure.landscape_record import Minimum

__all__ = ["Boxes", "held_boxes", "held_grid", "held_lines", "typical_level"]

SKETCH = {2: 160, 3: 40}  # points along each axis of the grid that finds the extent
FINE = {2: 240, 3: 44}  # and of the grid whose boxes are kept
TYPICAL = 0.2  # share of the points of a sketch below the first level that is looked at where nothing leaks
MOST_WELLS = 200  # whose places decide where boxes are small
GROWTHS, GROWTH = 12, 0.3  # times that a grid is made wider, and by how much of its width on a side
CORE = 0.25  # share of the ceiling up to which a well counts as its core
MARGIN = 0.05  # of the ceiling: so far below it no grid steps over a barrier at the pass


@dataclass(frozen=True)
class Boxes:
    """Centres (n, d) and edge lengths (n, d) of boxes in the coordinates of a field."""

    centre: FloatArray
    edge: FloatArray

    def part(self, start: int, stop: int) -> Boxes:
        """Some of the boxes."""
        return Boxes(self.centre[start:stop], self.edge[start:stop])

    def halved(self) -> Boxes:
        """Every box in 2^d."""
        d = self.centre.shape[1]
        corner = (np.indices((2,) * d).reshape(d, -1).T - 0.5) / 2
        centre = self.centre[:, None, :] + self.edge[:, None, :] * corner
        return Boxes(centre.reshape(-1, d), np.repeat(self.edge / 2, 2**d, axis=0))


def held_boxes(field: Field, minima: Sequence[Minimum], ceiling: float) -> Boxes:
    """Boxes that hold all points which join one of the minima below `ceiling` (J from the first of them)."""
    return _boxes(*_grown(field, minima, ceiling, FINE[len(field.coordinates)]))


def held_grid(
    field: Field, minima: Sequence[Minimum], ceiling: float, count: int
) -> tuple[list[FloatArray], NDArray[np.bool_]]:
    """Points along each axis as `held_lines` gives them, and which points of their grid are held."""
    lines, held, _ = _grown(field, minima, ceiling, count)
    return lines, held


def _grown(
    field: Field, minima: Sequence[Minimum], ceiling: float, count: int
) -> tuple[list[FloatArray], NDArray[np.bool_], NDArray[np.bool_]]:
    """Lines whose ends nothing held touches, the held points of their grid and the lost ones.

    A curved valley may go on where the sketch saw it end.
    """
    wells, v_min = [minimum.position for minimum in minima], minima[0].value
    chart = Chart(field)
    lines = held_lines(field, minima, ceiling, count)
    for _ in range(GROWTHS):
        held, lost = _held(chart, lines, wells, v_min, ceiling)
        spans = [
            _wider(line, held, i, radial)
            for i, (line, radial) in enumerate(zip(lines, chart.radial, strict=True))
        ]
        if all(span == (line[0], line[-1]) for span, line in zip(spans, lines, strict=True)):
            break
        lines = [_between(minima, i, span, ceiling, count) for i, span in enumerate(spans)]
    return lines, held, lost


def _wider(line: FloatArray, held: NDArray[np.bool_], i: int, radial: bool) -> tuple[float, float]:
    """The ends of a line, moved out where held points touch them."""
    low, high = float(line[0]), float(line[-1])
    step = GROWTH * (high - low)
    touched = np.moveaxis(held, i, 0)
    below, above = touched[0].any(), touched[-1].any()
    return (max(low - step, 0.0) if radial else low - step) if below else low, high + step if above else high


def held_lines(field: Field, minima: Sequence[Minimum], ceiling: float, count: int) -> list[FloatArray]:
    """`count` points along each axis over the extent of what joins the minima below `ceiling`."""
    wells, v_min = [minimum.position for minimum in minima], minima[0].value
    chart = Chart(field)
    axes = axes_of(chart)
    d = chart.dimension
    lines = [
        _positive(axis.points(SKETCH[d]), radial) for axis, radial in zip(axes, chart.radial, strict=True)
    ]
    held, _ = _held(chart, lines, wells, v_min, ceiling)
    spans = [_span(line, held, i) for i, line in enumerate(lines)]
    return [_between(minima, i, span, ceiling, count) for i, span in enumerate(spans)]


def typical_level(field: Field, v_min: float) -> float:
    """An energy from the bottom, below which a fair part of the points lie at which V changes."""
    chart = Chart(field)
    axes = axes_of(chart)
    lines = [axis.points(SKETCH[chart.dimension] // 2) for axis in axes]
    lines = [line[np.abs(line) <= 10.0**axis.most] for line, axis in zip(lines, axes, strict=True)]
    mesh = np.meshgrid(*lines, indexing="ij", sparse=True)
    rise = np.asarray(chart.value_at(dict(zip(chart.names, mesh, strict=True)))) - v_min
    return float(np.quantile(rise[np.isfinite(rise) & (rise > 0)], TYPICAL))


def _positive(points: FloatArray, radial: bool) -> FloatArray:
    return points[points >= 0] if radial else points


def _held(
    chart: Chart, lines: list[FloatArray], wells: Sequence[tuple[float, ...]], v_min: float, ceiling: float
) -> tuple[NDArray[np.bool_], NDArray[np.bool_]]:
    """The grid points below the ceiling that join a well, and those that do not.

    Found by flooding to just below the ceiling, and from there by running downhill.
    At the ceiling itself the barrier at the pass is infinitely thin, and flooding would step over it.
    """
    from scipy import ndimage

    mesh = np.meshgrid(*lines, indexing="ij", sparse=True)
    v = np.asarray(chart.value_at(dict(zip(chart.names, mesh, strict=True)))) - v_min
    v = np.broadcast_to(v, tuple(line.size for line in lines))
    regions, _ = ndimage.label(v < ceiling * (1 - MARGIN), np.ones((3,) * v.ndim))
    at = [
        tuple(int(np.argmin(np.abs(line - x))) for line, x in zip(lines, well, strict=True)) for well in wells
    ]
    core = np.isin(regions, [regions[place] for place in at if regions[place]])
    for place in at:
        core[place] = True
    root = _downhill(v, settled=regions > 0)
    ours = core.ravel()[root].reshape(v.shape)
    held = (v < ceiling) & ours
    for place in at:
        held[place] = True
    return held, (v < ceiling) & ~ours & ~held


def _downhill(v: FloatArray, *, settled: NDArray[np.bool_]) -> NDArray[np.intp]:
    """For each grid point the (flat) settled point, or dip, that it runs down to along the steepest neighbours."""
    flat = np.arange(v.size).reshape(v.shape)
    lowest, best = flat.copy(), v.copy()
    padded = np.pad(v, 1, constant_values=np.inf)
    places = np.pad(flat, 1)
    for shift in np.ndindex(*(3,) * v.ndim):
        window = tuple(slice(s, s + n) for s, n in zip(shift, v.shape, strict=True))
        lower = padded[window] < best
        best = np.where(lower, padded[window], best)
        lowest = np.where(lower, places[window], lowest)
    root = np.where(settled, flat, lowest).ravel()
    for _ in range(64):
        further = root[root]
        if np.array_equal(further, root):
            break
        root = further
    return root


def _span(line: FloatArray, held: NDArray[np.bool_], i: int) -> tuple[float, float]:
    """The stretch of an axis that the held points take, one grid point beyond included."""
    along = np.flatnonzero(held.any(axis=tuple(j for j in range(held.ndim) if j != i)))
    return float(line[max(along[0] - 1, 0)]), float(line[min(along[-1] + 1, line.size - 1)])


def _between(
    minima: Sequence[Minimum], i: int, span: tuple[float, float], ceiling: float, count: int
) -> FloatArray:
    """Points of axis i in a stretch: even within the width of a well, in steady proportion to the distance beyond."""
    lo, hi = span
    x = np.linspace(lo, hi, 100 * count)
    gaps = []
    for minimum in minima[:MOST_WELLS]:
        with np.errstate(all="ignore"):
            width = np.sqrt(2 * CORE * ceiling / minimum.hessian[i, i])
        width = width if np.isfinite(width) else (hi - lo) / 8
        gaps.append(np.minimum(width, (hi - lo) / 4))
    nearest = np.min([np.abs(x - m.position[i]) + g for m, g in zip(minima, gaps, strict=False)], axis=0)
    fine = (
        _graded(lo, hi, [m.position[i] for m in minima[:MOST_WELLS]], gaps)
        if hi - lo > 50 * nearest.min()
        else x
    )
    fine = np.unique(np.concatenate([x, fine]))
    middle = (fine[1:] + fine[:-1]) / 2
    near = np.min([np.abs(middle - m.position[i]) + g for m, g in zip(minima, gaps, strict=False)], axis=0)
    total = np.concatenate([[0.0], np.cumsum(np.diff(fine) / near)])
    return np.interp(np.linspace(0, total[-1], count), total, fine)


def _graded(lo: float, hi: float, centres: list[float], gaps: list[float]) -> FloatArray:
    """Points that go out from the centres in steps that grow with the distance."""
    points = [
        centre + side * gap * np.sinh(np.linspace(0, np.arcsinh((hi - lo) / gap), 400))
        for centre, gap in zip(centres, gaps, strict=True)
        for side in (-1, 1)
    ]
    merged = np.concatenate(points)
    return merged[(merged > lo) & (merged < hi)]


def _boxes(lines: list[FloatArray], held: NDArray[np.bool_], lost: NDArray[np.bool_]) -> Boxes:
    """The boxes with a held corner, and their neighbours, for a region reaches a little beyond its corners.

    Of a box that has a lost corner, too, only the parts at its other corners; no neighbour with a lost corner.
    """
    from scipy import ndimage

    d = held.ndim
    corners = np.array([_shifted(held, shift) for shift in np.ndindex(*(2,) * d)])
    gone = np.array([_shifted(lost, shift) for shift in np.ndindex(*(2,) * d)])
    core, spoilt = np.asarray(corners.any(axis=0)), np.asarray(gone.any(axis=0))
    whole = _made(lines, np.argwhere(ndimage.binary_dilation(core) & ~spoilt))
    mixed = np.argwhere(core & spoilt)
    halves = _made(lines, mixed).halved()
    kept = ~gone[:, *mixed.T].T.ravel()
    return Boxes(
        np.concatenate([whole.centre, halves.centre[kept]]), np.concatenate([whole.edge, halves.edge[kept]])
    )


def _shifted(corner: NDArray[np.bool_], shift: tuple[int, ...]) -> NDArray[np.bool_]:
    """A property of grid points at one corner of each box."""
    return corner[tuple(slice(s, s + n - 1) for s, n in zip(shift, corner.shape, strict=True))]


def _made(lines: list[FloatArray], index: NDArray[np.intp]) -> Boxes:
    centre = np.stack(
        [(line[index[:, i]] + line[index[:, i] + 1]) / 2 for i, line in enumerate(lines)], axis=1
    )
    edge = np.stack([np.diff(line)[index[:, i]] for i, line in enumerate(lines)], axis=1)
    return Boxes(centre, edge)
