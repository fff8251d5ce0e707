"""Rules for all directions from a point, on a ladder of rising degrees."""

from __future__ import annotations

from functools import cache
from math import pi
from typing import TYPE_CHECKING, Literal

import numpy as np

from eoscore.measure.rules import legendre

if TYPE_CHECKING:
    from eoscore.measure.base import FloatArray

__all__ = ["LADDER", "Shape", "directions"]

Shape = Literal["sphere", "circle", "about axis"]  # `about axis`: (rho, z) directions, rho >= 0
LADDER = (17, 23, 29, 35, 47, 59, 77)  # degrees of the rules, on the sphere 110 to 2030 directions


@cache
def directions(shape: Shape, degree: int) -> tuple[FloatArray, FloatArray]:
    """Unit vectors (n, coordinates) and weights, sum 4 pi or 2 pi, exact up to a degree.

    On the sphere the rules of Lebedev and Laikov (1999), on the circle equal angles.
    """
    if shape == "sphere":
        from scipy.integrate import lebedev_rule

        x, w = lebedev_rule(degree)
        return np.asarray(x.T), np.asarray(w)
    if shape == "circle":
        angle = 2 * pi * np.arange(4 * degree) / (4 * degree)
        return np.stack([np.cos(angle), np.sin(angle)], axis=1), np.full(4 * degree, pi / (2 * degree))
    x, w = legendre(degree)
    cosine = 2 * x - 1
    return np.stack([np.sqrt(1 - cosine**2), cosine], axis=1), 4 * pi * w
