"""Omega(v) of a well as an integral over all directions from its bottom."""

from __future__ import annotations

from math import pi, sqrt
from typing import TYPE_CHECKING

import numpy as np

from eoscore.formula import evaluate_many, gradient, variable
from eoscore.formula.field import Field
from eoscore.measure.directions import LADDER, Shape, directions
from eoscore.measure.rays import Declined, Rays

if TYPE_CHECKING:
    from eoscore.measure.base import FloatArray
    from eoscore.measure.landscape_record import Minimum

__all__ = ["Angular"]

WANTED = 1e-11  # relative difference between two rules at which the finer one is taken
ENOUGH = 1e-9  # and of the two finest ones
ON_AXIS = 1e-9  # of the width of a well: a bottom this close to the axis lies on it
ASIDE = 1e-10  # m beside the tip of a cone
HOPELESS = 1e-3  # and above which still finer ones are not tried
LEAST = 1e-13  # error of the finest rule: that of the roots


class Angular:
    """Omega(v) = det int dn int_0^q(n, v) r^(d-1) dr in coordinates whitened by the Hessian at the bottom.

    Star-shaped regions about a quadratic bottom or the tip of a cone; all else is declined.
    end: the greatest energy (J) that will be asked. power: of q in the integral, which is the dimension, and
    the number of coordinates for a ring. exponent: of Omega ~ v^exponent. limit: of Omega / v^exponent for
    v -> 0, exact, of a quadratic bottom. error: relative, the greatest so far.
    """

    def __init__(self, field: Field, bottom: Minimum, end: float) -> None:
        if bottom.kind not in ("quadratic", "ring", "cone"):
            raise Declined
        self.degree = 1 if bottom.kind == "cone" else 2
        self.frame = _cone_frame(field, bottom) if self.degree == 1 else _well_frame(bottom)
        self.start, self.v_min, self.end = np.array(bottom.position), bottom.value, end
        self.error = LEAST
        turning = field.coordinates == ("rho", "z")
        if (
            turning
            and self.degree == 2
            and abs(bottom.position[0]) <= ON_AXIS * sqrt(end) * np.abs(self.frame[0]).max()
        ):
            self.frame = np.diag(1 / np.sqrt(np.diag(np.asarray(bottom.hessian))))
        wide = float(np.abs(self.frame[0]).max())
        self.ring = float(self.start[0]) if turning and self.start[0] > ON_AXIS * sqrt(end) * wide else 0.0
        about_axis = turning and not self.ring
        walls = (*field.walls, variable("rho")) if self.ring else field.walls
        self.field = Field(field.coordinates, field.formula, walls)
        self.shape: Shape = "about axis" if about_axis else "sphere" if len(self.frame) == 3 else "circle"
        self.power = 3 if about_axis else len(self.frame)
        self.det = float(abs(np.linalg.det(self.frame))) * (
            2 * pi if self.ring else wide if about_axis else 1.0
        )
        if about_axis:
            self.start[0] = 0.0
        area = 2 * pi if self.shape == "circle" else 4 * pi
        self.limit = area * self.det * 2 ** (self.power / 2) / self.power * (self.ring or 1.0)
        self.exponent = self.power / self.degree
        self._rung = 0
        self._walked: dict[int, tuple[Rays, FloatArray]] = {}

    def __call__(self, v: FloatArray) -> FloatArray:
        """Omega at energies (n,), 0 < v <= end. Raises Declined."""
        coarse = self._by_rung(self._rung, v)
        for rung in range(self._rung + 1, len(LADDER)):
            fine = self._by_rung(rung, v)
            miss = float(np.max(np.abs(fine - coarse) / fine))
            if miss <= (WANTED if rung < len(LADDER) - 1 else ENOUGH):
                self._rung = rung - 1
                self.error = max(self.error, miss)
                return fine
            if miss > HOPELESS and rung >= 3:
                break
            coarse = fine
        raise Declined

    def radius(self, v: float) -> float:
        """q at an energy in the form that V has at the bottom: q^2/2, or q for a cone."""
        return sqrt(2 * v) if self.degree == 2 else v

    def _by_rung(self, rung: int, v: FloatArray) -> FloatArray:
        """Omega at energies by one of the rules, whose rays are walked once."""
        if rung not in self._walked:
            unit, weight = directions(self.shape, LADDER[rung])
            along = unit @ self.frame.T
            rays = Rays(self.field, self.start, self.v_min, along, self.end, self.radius(self.end))
            self._walked[rung] = rays, weight
        rays, weight = self._walked[rung]
        if self.ring:
            square, cube = rays.swept(v, (2, 3))
            return np.asarray(weight @ (self.ring * square / 2 + rays.along[:, :1] * cube / 3) * self.det)
        return np.asarray(weight @ rays.swept(v, (self.power,))[0] * (self.det / self.power))


def _well_frame(bottom: Minimum) -> FloatArray:
    """Columns along the principal axes, so long that V = q^2/2 along each."""
    curvature, axes = np.linalg.eigh(np.nan_to_num(np.asarray(bottom.hessian)))
    if curvature[0] <= 1e-10 * curvature[-1]:
        raise Declined
    return np.asarray(axes / np.sqrt(curvature))


def _cone_frame(field: Field, bottom: Minimum) -> FloatArray:
    """Columns along the coordinates, so long that V = q on the average of both sides of the tip."""
    d = len(field.coordinates)
    steps = ASIDE * np.concatenate([np.eye(d), -np.eye(d)])
    points = dict(zip(field.coordinates, (np.array(bottom.position) + steps).T, strict=True))
    slopes = [
        np.broadcast_to(g, 2 * d) for g in evaluate_many(gradient(field.formula, field.coordinates), points)
    ]
    steepness = np.array([(slope[i] - slope[d + i]) / 2 for i, slope in enumerate(slopes)])
    if not np.all(steepness > 0):
        raise Declined
    return np.diag(1 / steepness)
