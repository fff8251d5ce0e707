"""The creases of a potential as numbers: how far points lie from them, and V along those that are held."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.formula import gradient, hessian
from eoscore.formula.creases import creases
from eoscore.formula.tape import tape_of

if TYPE_CHECKING:
    from eoscore.formula import Formula
    from eoscore.measure.landscape_chart import Array, Chart

__all__ = ["Creases", "held_jet", "normals_of", "onto"]


class Creases:
    """Groups of functions u(x); V may be creased where all of a group vanish."""

    def __init__(self, formula: Formula, names: tuple[str, ...]) -> None:
        groups = creases(formula, names)
        self.functions = tuple(dict.fromkeys(one for group in groups for one in group))
        self.groups = [[self.functions.index(one) for one in group] for group in groups]
        self._slopes = tape_of(*[g for u in self.functions for g in (u, *gradient(u, names))])
        self._bends = tape_of(*[b for u in self.functions for row in hessian(u, names) for b in row])

    def __bool__(self) -> bool:
        return bool(self.groups)

    def jets(self, chart: Chart, points: Array) -> tuple[Array, Array]:
        """The functions (m, n) and their gradients (m, n, d) at points (n, d)."""
        d = points.shape[-1]
        rows = np.reshape(self._slopes.run(chart.at(points)), (-1, 1 + d, len(points)))
        return rows[:, 0], np.moveaxis(rows[:, 1:], 1, 2) * chart.sides(points)

    def bends(self, chart: Chart, point: Array) -> Array:
        """Their second derivatives (m, d, d) at a point."""
        d, side = point.size, chart.sides(point)
        rows = np.reshape([float(b) for b in self._bends.run(chart.at(point))], (-1, d, d))
        return np.asarray(rows * np.outer(side, side))

    def distance(self, chart: Chart, points: Array) -> Array:
        """How far (groups, n) points (n, d) lie from the creases, by linear steps."""
        u, slopes = self.jets(chart, points)
        with np.errstate(all="ignore"):
            away = np.abs(u) / np.linalg.norm(slopes, axis=2)
        away = np.where(np.isnan(away), np.where(u == 0, 0.0, np.inf), away)
        return np.array([np.linalg.norm(away[group], axis=0) for group in self.groups])


def onto(chart: Chart, point: Array, held: list[int], radius: float) -> Array | None:
    """The point moved to where the crease functions vanish, by Newton steps; None if that is farther than a radius."""
    moved = point
    for _ in range(12):
        u, normals = normals_of(chart, moved, held)
        step = np.linalg.lstsq(normals, u)[0]
        moved = moved - step
        if np.linalg.norm(step) <= 4e-16 * np.linalg.norm(moved) + 1e-18 * radius:
            break
    return moved if np.linalg.norm(moved - point) <= radius else None


def normals_of(chart: Chart, point: Array, held: list[int]) -> tuple[Array, Array]:
    """The distances (k,) of a point from the zeros of crease functions, and unit normals (k, d)."""
    u, normals = (np.nan_to_num(rows[held, 0]) for rows in chart.creases.jets(chart, point[None]))
    size = np.linalg.norm(normals, axis=1)
    size = np.where(size > 0, size, 1.0)
    return u / size, normals / size[:, None]


def held_jet(chart: Chart, point: Array, held: list[int]) -> tuple[Array, Array, Array]:
    """Slope (k,) and curvature (k, k) of V along creases that are held, and the frame (d, k) of directions there.

    The curvature is that of the Lagrangian V - sum m u, so that bent creases count. V is looked at on two sides of
    the creases, since on the tip of a cone it has no derivatives.
    """
    normals = normals_of(chart, point, held)[1]
    aside = chart.nudge * (np.sqrt(np.arange(2.0, 2.0 + len(held))) @ normals)
    sides = np.array([point + aside, point - aside])
    _, slopes, bends = (np.nan_to_num(rows) for rows in chart.jet(sides))
    slants = np.nan_to_num(chart.creases.jets(chart, sides)[1][held])
    curves = np.nan_to_num(chart.creases.bends(chart, point)[held])
    sizes, rows = np.linalg.svd(normals)[1:]
    frame = rows[int(np.sum(sizes > 1e-9)) :].T
    slope, bend = np.zeros(point.size), np.zeros((point.size,) * 2)
    for k in range(2):
        weights = np.linalg.lstsq(slants[:, k].T, slopes[k])[0]
        slope += (slopes[k] - weights @ slants[:, k]) / 2
        bend += (bends[k] - np.tensordot(weights, curves, 1)) / 2
    return slope @ frame, frame.T @ bend @ frame, frame
