"""Quadrature rules on the unit interval, graded towards its start."""

from __future__ import annotations

from functools import cache
from typing import TYPE_CHECKING

import numpy as np
from numpy.polynomial.legendre import leggauss

if TYPE_CHECKING:
    from eoscore.measure.base import FloatArray

__all__ = ["graded", "legendre", "log_panels", "quartering"]

RATIO = 8.0  # of neighbouring panel edges: in ln v the poles of a Bose function stay i pi/2 away


@cache
def legendre(order: int) -> tuple[FloatArray, FloatArray]:
    """Gauss-Legendre nodes and weights on [0, 1]."""
    x, w = leggauss(order)
    return (1 + x) / 2, w / 2


def log_panels(lo: float, hi: float, order: int = 16) -> tuple[FloatArray, FloatArray]:
    """Nodes v and weights dv on [lo, hi], 0 < lo < hi: panels of equal length in ln v, each with `order` nodes.

    With ratio 8 and 16 nodes 1/(e^v - 1) and e^{-v} are integrated to 1e-15: in ln v they are analytic in the
    strip of half-width pi/2, the Bernstein ellipse has rho = 3.3, and the error falls as rho^(-2 order).
    """
    count = max(1, int(np.ceil(np.log(hi / lo) / np.log(RATIO))))
    edges = np.linspace(np.log(lo), np.log(hi), count + 1)
    x, w = legendre(order)
    y = (edges[:-1, None] + np.diff(edges)[:, None] * x).ravel()
    v = np.exp(y)
    return v, v * (np.diff(edges)[:, None] * w).ravel()


@cache
def graded(exponent: float, depth: int = 10) -> tuple[FloatArray, FloatArray]:
    """Nodes t and weights on [0, 1] for functions t^(exponent - 1) f(t), f smooth at every scale of t.

    Logarithmic panels down to 8^-depth, and Gauss-Jacobi with the power as weight in the first stretch.
    """
    from scipy.special import roots_jacobi

    start = RATIO**-depth
    x, w = roots_jacobi(12, 0.0, exponent - 1)
    first = start * (1 + x) / 2
    first_w = w * (start / 2) ** exponent * first ** (1 - exponent)
    t, weight = log_panels(start, 1.0)
    return np.concatenate([first, t]), np.concatenate([first_w, weight])


@cache
def quartering(panels: int = 11, order: int = 14) -> tuple[FloatArray, FloatArray]:
    """Nodes t and weights on [0, 1], in panels of ratio 4 towards 0: a singular place may lie just outside."""
    x, w = legendre(order)
    edges = np.concatenate([[0.0], 0.25 ** np.arange(panels - 1, -1, -1)])
    length = np.diff(edges)[:, None]
    return (edges[:-1, None] + length * x).ravel(), (length * w).ravel()
