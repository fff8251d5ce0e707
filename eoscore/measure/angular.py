"""Omega(v) of a well as an integral over all directions from its bottom."""

from __future__ import annotations

from dataclasses import replace
from itertools import combinations
from math import pi, sqrt
from typing import TYPE_CHECKING, Literal

import numpy as np

from eoscore.formula import evaluate_many, variable
from eoscore.formula.field import Field
from eoscore.measure.frame import frame_of
from eoscore.measure.moments import along_rays, edges_of, weights
from eoscore.measure.patches import Box, Patches, eased
from eoscore.measure.rays import Line, Rays, unstretched

if TYPE_CHECKING:
    from collections.abc import Callable

    from numpy.typing import NDArray

    from eoscore.measure.base import FloatArray
    from eoscore.measure.landscape_record import Minimum
    from eoscore.measure.need import Wanted
    from eoscore.measure.panel import Panel
    from eoscore.measure.region import Region

__all__ = ["ROOTS", "Angular"]

Shape = Literal["cube", "circle", "about axis"]  # `about axis`: (rho, z) directions, rho >= 0

ON_AXIS = 1e-9  # of the width of a well: a bottom this close to the axis lies on it
ROOTS = 1e-13  # error of the roots
BENT = 1e-2  # change of V against its form at the bottom, at which the form ends
EARLY, BEGIN = 0.2, 1e-3  # of the reach there, and of that of all energies: where a walk begins at the latest
MOST = {1: 12_000, 2: 18_000}  # rays, for one or two parameters of direction
FAR = 4.0  # times the reach of the form at the bottom: arms beyond it ask for stretched lines
SEEN = 6000  # points of the region that are looked at from the bottom
SIGHT = 24  # points on the way there
FAINT = 1e-13  # share of a well that does not count
PROBES = 60  # points that tell whether V is even
EVEN = 1e-13  # relative difference of even values
MANY = 9_000  # rays, of a potential without symmetries, from which on less accuracy will do
FEW = 2  # by which the number of rays is divided for a try


class Angular:
    """Omega(v) = det int dn int_0^q(n, v) r^(d-1) dr in coordinates whitened by the Hessian at the bottom.

    end: the greatest energy (J) that will be asked. region: what joins the wells below it. share: of this well
    at points (d, ...), where there are others. power: of q in the integral, which is the dimension, and
    the number of coordinates for a ring. exponent: of Omega ~ v^exponent, None where unknown. limit: of
    Omega / v^exponent for v -> 0, exact, of a quadratic bottom.
    """

    def __init__(
        self,
        field: Field,
        bottom: Minimum,
        end: float,
        region: Region,
        share: Callable[[FloatArray], FloatArray] | None = None,
        *,
        few: bool = False,
    ) -> None:
        self.degree, self.frame = frame_of(field, bottom, region, end)
        self.start, self.v_min, self.end = np.array(bottom.position), bottom.value, end
        turning = field.coordinates == ("rho", "z")
        if turning and self.degree == 2 and abs(bottom.position[0]) <= self._slack():
            self.frame = np.diag(1 / np.sqrt(np.diag(np.asarray(bottom.hessian))))
        wide = float(np.abs(self.frame[0]).max())
        self.ring = float(self.start[0]) if turning and self.start[0] > self._slack() else 0.0
        about_axis = turning and not self.ring
        walls = (*field.walls, variable("rho")) if self.ring else field.walls
        self.field = Field(field.coordinates, field.formula, walls)
        self.shape: Shape = "about axis" if about_axis else "cube" if len(self.frame) == 3 else "circle"
        self.power = 3 if about_axis else len(self.frame)
        self.det = float(abs(np.linalg.det(self.frame))) * (
            2 * pi if self.ring else wide if about_axis else 1.0
        )
        if about_axis:
            self.start[0] = 0.0
        area = 2 * pi if self.shape == "circle" else 4 * pi
        form = self.det
        if self._far_along_coordinates(bottom, region):
            self.frame = np.diag(1 / np.sqrt(np.diag(np.asarray(bottom.hessian))))
            self.det = float(np.prod(np.diag(self.frame)))
        self.limit = area * form * 2 ** (self.power / 2) / self.power * (self.ring or 1.0)
        self.exponent = self.power / self.degree if self.degree else None
        self.share = share
        self.line = self._line(region)
        self.scale = self._scale() if self.degree else end
        mirrors, self.twins = self._symmetries()
        self.det *= 2 ** len(mirrors)
        most = MOST[2 if self.shape == "cube" else 1] // (FEW if few else 1)
        many = MANY // 2 ** len(mirrors) // (2 if self.twins else 1)
        self.patches = Patches(self._rays, _first(self.shape, mirrors, self.twins), most, many)

    def with_error(self, v: FloatArray, wanted: Wanted) -> tuple[FloatArray, FloatArray]:
        """Omega at energies (n,), 0 < v <= end, and its relative error, of which `wanted` may stay."""
        total, error = self.patches.integral(v, lambda v, total: wanted(v, total * self.det))
        return total * self.det, np.maximum(error, ROOTS)

    def moments(
        self, stretch: Panel, parts: int, rise: float, base: float, wanted: Wanted
    ) -> tuple[FloatArray, FloatArray]:
        """Moments of Omega on the parts of a stretch (parts, TERMS), and the error of Omega they leave (parts,).

        rise: of this bottom above the energies of the stretch, J. base: Omega of all wells at its start.
        """
        edges = edges_of(stretch, parts)

        def allowed(found: FloatArray, many: bool) -> FloatArray:
            omega = base + self.det * np.cumsum(np.maximum(found.reshape(parts, -1)[:, 0], 0.0))
            share = eased(wanted(edges[:-1], omega), many) * omega
            return np.ravel((share / self.det)[:, None] / weights())

        def sweep(rays: Rays, which: NDArray[np.intp]) -> FloatArray:
            return along_rays(rays, stretch, parts, rise, which)

        found, error = self.patches.settled(sweep, allowed, (stretch, parts))
        worst = (error.reshape(parts, -1) * weights()).max(axis=1)
        return self.det * found.reshape(parts, -1), self.det * worst

    def _far_along_coordinates(self, bottom: Minimum, region: Region) -> bool:
        """Whether arms reach far along the coordinates, so that these make a better frame than the principal axes."""
        if self.shape != "cube" or self.degree != 2:
            return False
        unit = 1 / np.sqrt(np.diag(np.asarray(bottom.hessian)))
        points = (region.points(beyond=False) - self.start) / unit
        return bool(np.max(np.abs(points), initial=0.0) > FAR * self.radius(self.end))

    def radius(self, v: float) -> float:
        """q at an energy in the form that V has at the bottom: q^2/2, or q for a cone; 1 where that is unknown."""
        return sqrt(2 * v) if self.degree == 2 else v if self.degree else 1.0

    def _scale(self) -> float:
        """The energy, at most `end`, at which V leaves its form at the bottom by a hundredth along a principal axis."""
        found, size = self.end, abs(self.v_min)
        q = self.radius(self.end) * np.geomspace(1e-9, 1.0, 300)
        form = q**2 / 2 if self.degree == 2 else q
        names = self.field.coordinates
        for along in np.concatenate([self.frame.T, -self.frame.T]):
            x = self.start[:, None] + along[:, None] * q
            v = self.field.formula.evaluate(dict(zip(names, x, strict=True))) - self.v_min
            ratio = v / form
            clear = form > 1e-10 * size
            bent = np.flatnonzero(clear & ~(np.abs(ratio / ratio[np.argmax(clear)] - 1) <= BENT))
            if bent.size:
                found = min(found, float(form[bent[0]]))
        return found

    def _slack(self) -> float:
        return ON_AXIS * self.radius(self.end) * float(np.abs(self.frame[0]).max())

    def _line(self, region: Region) -> Line:
        """Lines to all points of the region: straight ones, or ones that suit arms which reach far along the axes."""
        back = np.linalg.inv(self.frame).T
        box = (region.points(beyond=True) - self.start) @ back
        low, high = box.min(axis=0), box.max(axis=0)
        points = region.points(beyond=False)
        points = points[:: max(1, len(points) // SEEN)]
        if self.share is not None:
            points = points[self.share(points.T) > FAINT]
        points = (points - self.start) @ back
        far = self.shape == "cube" and np.max(np.abs(points), initial=0.0) > FAR * self.radius(self.end)
        for stretch in (self.radius(self.end), None) if far else (None,):
            line = Line(
                self.field, self.start, self.frame, self.v_min, low, high, stretch, clear=False, region=region
            )
            flat = points if stretch is None else stretch * unstretched(points / stretch)
            steps = (np.arange(SIGHT) + 0.5) / SIGHT
            ways = line.points(np.broadcast_to(steps, (len(flat), SIGHT)), flat[:, None, :])
            if np.all(region.chart.value(ways) <= region.ceiling):
                return replace(line, clear=True)
        return line

    def _symmetries(self) -> tuple[set[int], tuple[int, ...]]:
        """The axes of the frame along which V and the walls are even about the bottom; two that may change places."""
        if self.ring:
            return set(), ()
        line, random, d = self.line, np.random.default_rng(7), len(self.start)
        unit = random.uniform(-1, 1, (PROBES, d))
        step = np.where(unit > 0, line.high, -line.low) * unit * random.uniform(0, 1, (PROBES, 1)) ** 2
        axes = [1] if self.shape == "about axis" else range(d)
        mirrors = {i for i in axes if self._alike(step, step * np.where(np.arange(d) == i, -1.0, 1.0))}
        pairs = combinations(range(d), 2) if self.shape == "cube" else []
        twins = (pair for pair in pairs if self._alike(step, _swapped(step, pair)))
        return mirrors, next(twins, ())

    def _alike(self, *steps: FloatArray) -> bool:
        """Whether V, the walls and the share take the same values at two sets of steps (n, d) in the frame."""
        formulas = (self.field.formula, *self.field.walls)
        places = [(self.start + step @ self.frame.T).T for step in steps]
        one, other = (
            list(evaluate_many(formulas, dict(zip(self.field.coordinates, x, strict=True)))) for x in places
        )
        if self.share is not None:
            one.append(self.share(places[0]))
            other.append(self.share(places[1]))
        return all(
            np.allclose(a, b, rtol=EVEN, atol=EVEN * float(np.max(np.abs(a), initial=0)), equal_nan=True)
            for a, b in zip(one, other, strict=True)
        )

    def _rays(self, side: FloatArray, point: FloatArray) -> Rays:
        unit = _directions(self.shape, side, point)
        one: FloatArray = np.ones(len(unit))
        swept: tuple[FloatArray, FloatArray]
        if self.shape == "about axis":
            swept = (0 * one, 2 * pi * np.sin(point[:, 0]))
        elif self.ring:
            swept = (self.ring * one, unit @ self.frame[0])
        else:
            twice: FloatArray = np.where(np.isin(side % 3, self.twins[:1]), 2.0, 1.0)
            swept = (0 * one, twice) if self.shape == "cube" else (one, 0 * one)
        begin = max(BEGIN * self.radius(self.end), EARLY * self.radius(self.scale) if self.degree else 0.0)
        return Rays(self.line, unit, self.end, begin, swept, self.share)


def _swapped(step: FloatArray, pair: tuple[int, int]) -> FloatArray:
    """Steps (n, d) with two axes in each other's place."""
    columns = list(range(step.shape[1]))
    columns[pair[0]], columns[pair[1]] = pair[1], pair[0]
    return np.asarray(step[:, columns])


def _first(shape: Shape, mirrors: set[int], twins: tuple[int, ...]) -> list[Box]:
    """The boxes of parameters that make up all directions, but for mirror images and the second of twin axes."""
    if shape == "cube":
        low = [0.0 if axis in mirrors else -1.0 for axis in range(3)]
        sides = [side for side in range(6) if side < 3 or side % 3 not in mirrors]
        sides = [side for side in sides if side % 3 not in twins[1:]]
        return [(side, (low[(side + 1) % 3], low[(side + 2) % 3]), (1.0, 1.0)) for side in sides]
    if shape == "about axis":
        halves = [(0.0, pi / 2)] if mirrors else [(0.0, pi / 2), (pi / 2, pi)]
        return [(0, (low,), (high,)) for low, high in halves]
    quarters = {(): (0, 1, 2, 3), (0,): (0, 3), (1,): (0, 1), (0, 1): (0,)}[tuple(sorted(mirrors))]
    return [(0, (k * pi / 2,), ((k + 1) * pi / 2,)) for k in quarters]


def _directions(shape: Shape, side: FloatArray, point: FloatArray) -> FloatArray:
    """Directions (n, d): of unit length, or, on a cube, as far as its sides, with int dn q^2 = int du dv q^2."""
    if shape == "circle":
        return np.stack([np.cos(point[:, 0]), np.sin(point[:, 0])], axis=1)
    if shape == "about axis":
        return np.stack([np.sin(point[:, 0]), np.cos(point[:, 0])], axis=1)
    axis, sign = side % 3, np.where(side < 3, 1.0, -1.0)
    found = np.empty((len(point), 3))
    rows = np.arange(len(point))
    found[rows, axis] = sign
    found[rows, (axis + 1) % 3] = point[:, 0]
    found[rows, (axis + 2) % 3] = point[:, 1]
    return found
