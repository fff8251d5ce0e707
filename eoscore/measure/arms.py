"""Coordinates along the arms of a potential, where these run aslant to its own: no grid along the axes holds them."""

from __future__ import annotations

from dataclasses import replace
from math import inf
from typing import TYPE_CHECKING

import numpy as np

from eoscore.formula import constant, variable
from eoscore.formula.field import Field
from eoscore.measure.landscape_chart import Chart
from eoscore.measure.landscape_valley import settled, starts

if TYPE_CHECKING:
    from eoscore.measure.base import FloatArray
    from eoscore.measure.landscape_record import Landscape, Minimum

__all__ = ["along_arms"]

FIRST, STEP = 0.3, 1.6  # the first sphere, in the least reach of the form at the bottom, and the ratio of two
SPHERES = 60
FAR = 2.0  # times its widest reach: a place held out there is in an arm
MOST = 12  # directions that are followed
STEPS = 25  # of Newton's rule on a sphere
BELOW = 0.99  # of the level: a way over the pass itself is no arm
ALIGNED = 1e-3  # radians: an arm this close to an axis needs no other
LOOKS = 100  # places on the way to a sphere, all of which are held
ASIDE = np.array([0.05, 0.15, 0.5, 1.0])  # from arms on one sphere to where those on the next are looked for
APART = 0.05  # radians between arms that are two
FLAT = 1e-2  # volume of the unit cell of arms that lie in one plane, or nearly so
ALIKE = 0.02  # radians between ends of arms that are one


def along_arms(field: Field, landscape: Landscape, level: float) -> tuple[Field, Landscape, float] | None:
    """Field and landscape in coordinates along the arms below a level (J), and the volume of their unit cell.

    None where no arm leaves the axes, or where arms are no few straight ones.
    """
    bottom = landscape.bottom
    d = len(field.coordinates)
    if bottom is None or bottom.kind != "quadratic" or {"r", "rho"} & set(field.coordinates) or level == inf:
        return None
    arms = _arms(field, bottom, level)
    if not 1 <= len(arms) <= d or all(np.max(np.abs(arm)) > 1 - ALIGNED**2 / 2 for arm in arms):
        return None
    frame = np.concatenate([arms, _rest(np.array(arms))]).T
    return _within(field, landscape, frame) if abs(np.linalg.det(frame)) > FLAT else None


def _arms(field: Field, bottom: Minimum, level: float) -> list[FloatArray]:
    """Directions (d,) of arms, both ends of one taken together, the farthest first; none where they are too many."""
    chart, centre = Chart(field), np.array(bottom.position)
    curvature = np.linalg.eigvalsh(np.asarray(bottom.hessian))
    near, wide = (float(np.sqrt(2 * level / curvature[i])) for i in (-1, 0))
    radius = FIRST * near
    n = starts(len(centre))
    spheres: list[FloatArray] = []
    for _ in range(SPHERES):
        n = settled(chart, centre, n, radius, STEPS)
        ways = centre + np.geomspace(FIRST * near, radius, LOOKS)[:, None, None] * n
        n = _distinct(n[np.all(chart.value(ways) < bottom.value + BELOW * level, axis=0)])
        if not len(n):
            break
        if radius > FAR * wide:
            if len(n) > 2 * len(centre):
                return []
            spheres.append(n)
        n = n[:MOST]
        radius *= STEP
        soft = _softest(chart, centre + radius * n, n)
        n = np.concatenate([n, *(n + side * soft for side in (*ASIDE, *-ASIDE))])
        n /= np.linalg.norm(n, axis=1, keepdims=True)
    arms: list[FloatArray] = []
    for sphere in reversed(spheres):
        for end in sphere:
            opposite = sphere[sphere @ end < -np.cos(APART)]
            arm = end - opposite[0] if len(opposite) else end
            arm = arm / np.linalg.norm(arm)
            if all(abs(float(arm @ other)) < np.cos(APART) for other in arms):
                arms.append(arm)
    return arms


def _softest(chart: Chart, points: FloatArray, n: FloatArray) -> FloatArray:
    """The directions across n (n, d) in which V rises least: there an arm parts into two."""
    bend = np.nan_to_num(chart.jet(points)[2])
    across = np.eye(n.shape[1]) - n[:, :, None] * n[:, None, :]
    curve = across @ bend @ across
    far = 1e3 * np.max(np.abs(curve), axis=(1, 2))[:, None, None]
    return np.asarray(np.linalg.eigh(curve + far * n[:, :, None] * n[:, None, :])[1][:, :, 0])


def _distinct(n: FloatArray) -> FloatArray:
    """Directions (n, d) that differ."""
    kept: list[FloatArray] = []
    for one in n:
        if all(float(one @ other) < np.cos(ALIKE) for other in kept):
            kept.append(one)
    return np.array(kept).reshape(-1, n.shape[1])


def _rest(arms: FloatArray) -> FloatArray:
    """Unit vectors at right angles to the arms (k, d) and to each other, as near to the axes as may be: (d - k, d)."""
    d = arms.shape[1]
    basis = list(np.linalg.qr(arms.T)[0].T)
    found: list[FloatArray] = []
    while len(basis) < d:
        left = np.eye(d) - sum(np.outer(one, one) for one in basis)
        size = np.linalg.norm(left, axis=1)
        best = left[int(np.argmax(size))] / size.max()
        basis.append(best)
        found.append(best)
    return np.array(found).reshape(-1, d)


def _within(field: Field, landscape: Landscape, frame: FloatArray) -> tuple[Field, Landscape, float]:
    """The same in coordinates along the columns of a frame."""
    names, back = field.coordinates, np.linalg.inv(frame)
    along = {
        name: sum(
            (float(part) * variable(other) for part, other in zip(row, names, strict=True) if part),
            constant(0.0),
        )
        for name, row in zip(names, frame, strict=True)
    }

    def turned(minimum: Minimum) -> Minimum:
        place = tuple((back @ np.array(minimum.position)).tolist())
        return replace(minimum, position=place, hessian=frame.T @ np.asarray(minimum.hessian) @ frame)

    minima = tuple(turned(minimum) for minimum in landscape.minima)
    return (
        Field(names, field.formula.substitute(along), tuple(wall.substitute(along) for wall in field.walls)),
        replace(landscape, minima=minima, bottom=minima[0]),
        float(abs(np.linalg.det(frame))),
    )
