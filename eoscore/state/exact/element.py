"""Stretches of a line on which waves are polynomials: points, weights, and the kinetic energy between polynomials.

Points of Legendre, Gauss and Lobatto (or Radau). Where waves have died out at the ends, points may be moved towards an
even spacing (D. Kosloff, H. Tal-Ezer, J. Comput. Phys. 104, 457 (1993), from memory), which the ends pay for.
"""

from __future__ import annotations

from functools import lru_cache
from typing import TYPE_CHECKING, NamedTuple

import numpy as np
from scipy.special import eval_legendre, roots_jacobi

if TYPE_CHECKING:
    from eoscore.state.reading import FloatArray

__all__ = ["Element", "lobatto", "radau"]

EVEN = (
    0.94  # of the way from the spacing of Legendre points to an even one: fewer points for each wave length
)


class Element(NamedTuple):
    """On [-1, 1]: points (n,), weights of an integral (n,), and int f' g' and int (1 + x) f' g' dx (n, n)."""

    x: FloatArray
    weight: FloatArray
    still: FloatArray
    rising: FloatArray


@lru_cache(maxsize=64)
def lobatto(points: int, *, even: bool) -> Element:
    """With points at both ends."""
    n = points - 1
    inner, _ = roots_jacobi(n - 1, 1, 1)
    x = np.concatenate([[-1.0], inner, [1.0]])
    p = eval_legendre(n, x)
    w = 2 / (n * (n + 1) * p * p)
    gap = x[:, None] - x
    np.fill_diagonal(gap, 1.0)
    derivative = p[:, None] / (p * gap)
    np.fill_diagonal(derivative, 0.0)
    derivative[0, 0], derivative[-1, -1] = -n * (n + 1) / 4, n * (n + 1) / 4
    return _element(_evened(x, w) if even else (x, w, w), derivative)


@lru_cache(maxsize=64)
def radau(points: int, *, even: bool) -> Element:
    """With a point at 1 only."""
    inner, _ = roots_jacobi(points - 1, 1, 0)
    x = np.append(inner, 1.0)
    w = (1 + x) / (points * eval_legendre(points - 1, x)) ** 2
    gap = x[:, None] - x
    np.fill_diagonal(gap, 1.0)
    own = 1 / (2 * gap).prod(axis=1)
    derivative = own / (own[:, None] * gap)
    np.fill_diagonal(derivative, 0.0)
    np.fill_diagonal(derivative, -derivative.sum(axis=1))
    return _element(_evened(x, w) if even else (x, w, w), derivative)


def _evened(x: FloatArray, w: FloatArray) -> tuple[FloatArray, FloatArray, FloatArray]:
    """The points moved, with their weights for functions and for slopes."""
    stretch = EVEN / (np.sqrt(1 - (EVEN * x) ** 2) * np.arcsin(EVEN))
    return np.arcsin(EVEN * x) / np.arcsin(EVEN), w * stretch, w / stretch


def _element(rule: tuple[FloatArray, FloatArray, FloatArray], derivative: FloatArray) -> Element:
    x, weight, of_slopes = rule
    still, rising = (derivative.T @ ((of_slopes * rise)[:, None] * derivative) for rise in (1.0, 1 + x))
    return Element(x, weight, still, rising)
