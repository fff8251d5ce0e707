"""A grid over all scales: its local minima, and the lowest level at which one of them joins the outside."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from eoscore.measure.landscape_settled import round_about

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from eoscore.measure.landscape_chart import Array, Chart, Index

__all__ = ["Grid", "Leak"]

MOST_RAYS = 6000  # straight ways out that are looked at between walls
DECADE = 5  # looks along each in a factor 10, over nine of these
LOOKS = 9 * DECADE + 1


@dataclass(frozen=True)
class Leak:
    """Where the grid leaks: the level and V at the bottom (J), the grid point, the way out from the bottom (m).

    at_infinity: whether the level is the limit of V beyond that point.
    """

    energy: float
    bottom: float
    point: Array
    outward: Array
    at_infinity: bool


class Grid:
    """V on the product of axes of points; `frame` (d, d) and `origin` turn grid coordinates into the chart's."""

    def __init__(self, chart: Chart, axes: list[Array], origin: Array, frame: Array) -> None:
        self.chart, self.axes, self.origin, self.frame = chart, axes, origin, frame
        self.shape = tuple(axis.size for axis in axes)
        self.lowest_exit = np.inf  # the lowest level at which any end leads out, set by `leak`
        if np.array_equal(frame, np.eye(len(axes))):
            mesh = np.meshgrid(
                *(o + a for o, a in zip(origin, axes, strict=True)), indexing="ij", sparse=True
            )
            folded = [np.abs(x) if radial else x for x, radial in zip(mesh, chart.radial, strict=True)]
            self.v = chart.value_at(dict(zip(chart.names, folded, strict=True)))
        else:
            self.v = chart.value(self.points(np.indices(self.shape).reshape(len(axes), -1).T)).reshape(
                self.shape
            )
        if chart.walls:
            self._close_slits()

    def points(self, index: Index) -> Array:
        """Chart coordinates of grid indices (n, d)."""
        local = np.stack([axis[index[:, i].astype(int)] for i, axis in enumerate(self.axes)], axis=1)
        result: Array = self.origin + local @ self.frame.T
        return result

    def spacing(self, index: Index) -> Array:
        """The distance to the nearest neighbour at grid indices (n, d), not less than the chart resolves."""
        gaps = [np.minimum(np.append(np.inf, np.diff(a)), np.append(np.diff(a), np.inf)) for a in self.axes]
        least = np.min([gap[index[:, i]] for i, gap in enumerate(gaps)], axis=0)
        result: Array = np.maximum(least, 1e8 * self.chart.nudge)
        return result

    def minima(self, most: int) -> Index:
        """Indices (n, d) of the lowest inner points that no neighbour along an axis undercuts.

        Between walls those come first that none aslant undercuts either: beside a wall aslant there is no end of
        the others.
        """
        some = np.logical_and.reduce([self._turns(i, 1.0) for i in range(self.v.ndim)])
        if not self.chart.walls:
            return self._lowest(some, most)
        from scipy import ndimage

        true = some & (self.v <= ndimage.minimum_filter(self.v, size=3))
        first = self._lowest(true, most)
        rest = self._lowest(some & ~true, most - len(first))
        result: Index = np.concatenate([first, rest])
        return result

    def _close_slits(self) -> None:
        """Take out points that lie on walls with nothing inside them on any side: where two walls just meet."""
        index = np.argwhere(np.isfinite(self.v))
        points = self.points(index)
        on = np.min(self.chart.margins(points), axis=0) <= 0
        aside = np.maximum(self.chart.nudge, 1e-13 * np.linalg.norm(points[on], axis=1))
        beside = points[on, None] + aside[:, None, None] * round_about(points.shape[1])
        closed = np.all(np.min(self.chart.margins(beside), axis=0) <= 0, axis=1)
        self.v[tuple(index[on][closed].T)] = np.inf

    def saddles(self, most: int) -> Index:
        """Indices (n, d) of the lowest inner points that are highest along one axis and lowest along the others."""
        low, high = ([self._turns(i, side) for i in range(self.v.ndim)] for side in (1.0, -1.0))
        some = np.zeros(self.shape, bool)
        for i in range(self.v.ndim):
            some |= np.logical_and.reduce([high[j] if j == i else low[j] for j in range(self.v.ndim)])
        return self._lowest(some, most)

    def _turns(self, axis: int, side: float) -> NDArray[np.bool_]:
        """Where v is lowest (highest for side -1) among its neighbours along an axis; not at the ends."""
        v = np.moveaxis(side * self.v, axis, 0)
        turns = np.zeros(v.shape, bool)
        turns[1:-1] = (v[1:-1] <= v[:-2]) & (v[1:-1] <= v[2:]) & np.isfinite(v[1:-1])
        return np.moveaxis(turns, 0, axis)

    def _lowest(self, some: NDArray[np.bool_], most: int) -> Index:
        """The lowest of some points; among equals those nearest the origin come first."""
        index = np.argwhere(some)
        distance = np.linalg.norm(self.points(index), axis=1)
        result: Index = index[np.lexsort((distance, self.v[some]))[:most]]
        return result

    def leak(self, bottom: Array) -> Leak | None:
        """The lowest level at which the point joins the far end of the grid; None if it never does.

        Levels are bisected; the regions below a level are found by labelling, diagonal neighbours joined. Between
        walls the straight ways out from all points count as well: no far end may lie between walls that are oblique.
        """
        along_grid = self._leak_at_ends(bottom)
        straight = self._leak_along_rays(bottom) if self.chart.walls else None
        if along_grid is None or straight is None:
            return along_grid or straight
        lower = straight.energy < along_grid.energy - 1e-9 * abs(along_grid.energy - along_grid.bottom)
        return straight if lower else along_grid

    def _leak_along_rays(self, bottom: Array) -> Leak | None:
        """The same where the ways out lead straight away from the bottom, from grid points on."""
        index = np.argwhere(np.isfinite(self.v))
        index = index[:: 1 + len(index) // MOST_RAYS]
        points = self.points(index)
        rays = bottom + np.geomspace(1, 1e9, LOOKS)[:, None, None] * (points - bottom)
        heights = self.chart.value(rays)
        with np.errstate(all="ignore"):
            before, after = (
                heights[-1 - DECADE] - heights[-1 - 2 * DECADE],
                heights[-1] - heights[-1 - DECADE],
            )
            grows = (after > 0.5 * before) & (
                after > 1e-12 * np.abs(heights[0] - self.v[self.nearest(bottom)])
            )
        exits = np.where(grows | np.isnan(after), np.inf, np.max(heights, axis=0))
        exits[np.linalg.norm(points - bottom, axis=1) <= 1e8 * self.chart.nudge] = np.inf
        found = self._lowest_join(self.nearest(bottom), index, exits)
        if found is None:
            return None
        level, out = found
        best = out[np.argmin(exits[out])]
        top, low = int(np.argmax(heights[:, best])), float(self.v[self.nearest(bottom)])
        last = np.argwhere(self.v == level)
        if exits[best] >= level and not last.size:
            place = rays[top, best]
            return Leak(level, low, place, points[best] - bottom, at_infinity=top == LOOKS - 1)
        nearest = last[np.argsort(np.linalg.norm(self.points(last) - bottom, axis=1), kind="stable")]
        place = self.points(nearest[:1])[0] if last.size else points[best]
        return Leak(level, low, place, points[best] - bottom, at_infinity=False)

    def _lowest_join(self, start: tuple[int, ...], ends: Index, exits: Array) -> tuple[float, Index] | None:
        """The lowest level at which the start joins ends that lead out at it or below, and these ends."""
        from scipy import ndimage

        levels = np.unique(np.concatenate([self.v[np.isfinite(self.v)], exits[np.isfinite(exits)]]))
        levels = levels[levels >= self.v[start]]
        structure = np.ones((3,) * self.v.ndim)

        def joined(level: float) -> Index:
            regions = ndimage.label(self.v <= level, structure)[0]
            return np.flatnonzero((exits <= level) & (regions[tuple(ends.T)] == regions[start]))

        if not levels.size or not joined(levels[-1]).size:
            return None
        low, high = -1, levels.size - 1
        while high - low > 1:
            middle = (low + high) // 2
            low, high = (low, middle) if joined(levels[middle]).size else (middle, high)
        return float(levels[high]), joined(float(levels[high]))

    def _leak_at_ends(self, bottom: Array) -> Leak | None:

        edge = np.ones(self.shape, bool)
        edge[(slice(1, -1),) * self.v.ndim] = False
        ends = np.argwhere(edge & np.isfinite(self.v))
        start = self.nearest(bottom)
        exits = self._exits(ends, float(self.v[start]))
        self.lowest_exit = float(np.min(exits, initial=np.inf))
        found = self._lowest_join(start, ends, exits)
        if found is None:
            return None
        level, out = found
        chosen = tuple(ends[out[np.argmin(exits[out])]])
        outward = self.points(np.array([chosen]))[0] - bottom
        last = np.argwhere(self.v == level)
        inner = last[~edge[tuple(last.T)]]
        if inner.size and exits[out].min() < level:  # far outside many points may be as high as the pass
            last = inner[np.argsort(np.linalg.norm(self.points(inner) - bottom, axis=1), kind="stable")]
        elif not last.size or edge[tuple(last[0])] or exits[out].min() >= level > self.v[chosen]:
            return Leak(
                level, float(self.v[start]), self.points(np.array([chosen]))[0], outward, at_infinity=True
            )
        return Leak(level, float(self.v[start]), self.points(last[:1])[0], outward, at_infinity=False)

    def region(self, bottom: Array, level: float) -> NDArray[np.bool_]:
        """The grid points that join the bottom below a level."""
        from scipy import ndimage

        regions = ndimage.label(self.v < level, np.ones((3,) * self.v.ndim))[0]
        joined: NDArray[np.bool_] = regions == regions[self.nearest(bottom)]
        return joined

    def _exits(self, ends: Index, low: float) -> Array:
        """The level at which each end of the grid leads out: inf where V grows beyond or a wall stands there."""
        points = self.points(ends)
        far = [self.v[tuple(ends.T)]]
        far += [self.chart.value(self.origin + (points - self.origin) * f) for f in (1e3, 1e6, 1e9)]
        with np.errstate(all="ignore"):
            before, after = far[2] - far[1], far[3] - far[2]
            grows = (after > 0.5 * before) & (after > 1e-12 * np.abs(far[0] - low))
        top = np.maximum.reduce(far)
        result: Array = np.where(grows | np.isnan(top), np.inf, top)
        return result

    def nearest(self, point: Array) -> tuple[int, ...]:
        """The grid point nearest to a point along each axis; inside the walls, if one of its neighbours is."""
        local = (point - self.origin) @ self.frame
        index = np.array([int(np.argmin(np.abs(axis - x))) for axis, x in zip(self.axes, local, strict=True)])
        if not np.isfinite(self.v[tuple(index)]):
            around = index + np.indices((7,) * index.size).reshape(index.size, -1).T - 3
            around = np.clip(around, 0, np.array(self.shape) - 1)
            inside = around[np.isfinite(self.v[tuple(around.T)])]
            if inside.size:
                index = inside[np.argmin(np.linalg.norm(self.points(inside) - point, axis=1))]
        return tuple(index.tolist())
