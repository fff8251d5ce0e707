"""One-dimensional Schroedinger problems between two points where the wave vanishes, by Legendre-Gauss-Lobatto points.

The kinetic energy of polynomials is exact, the potential is diagonal: for a smooth potential every level converges
faster than any power of the number of points (Manolopoulos and Wyatt, Chem. Phys. Lett. 152, 23 (1988), from memory).
"""

from __future__ import annotations

from functools import lru_cache
from typing import TYPE_CHECKING

import numpy as np
from scipy.special import eval_legendre, roots_jacobi

if TYPE_CHECKING:
    from collections.abc import Callable

    from eoscore.state.reading import FloatArray

__all__ = ["converged", "eigenvalues"]

# Pairs of grids, points on each, tried in turn. A library that shares a matrix of more than 63 rows among threads may
# lose a hundred times what it gains on a busy machine: the smallest pair mostly does.
GRIDS = ((54, 63), (80, 100), (130, 160), (220, 260), (380, 440))
EVEN = (
    0.94  # of the way from the spacing of Legendre points to an even one: fewer points for each wave length
)
WANTED = 1e-9  # relative difference of two grids that is good enough not to try the next pair
ROUGH = 1e-6  # an error below that another grid does not make much smaller is one of rounding
PATIENCE = 100  # points after which a smooth potential converges fast


def eigenvalues(
    potential: Callable[[FloatArray], FloatArray],
    low: FloatArray,
    high: FloatArray,
    kinetic: float,
    count: int,
    points: int,
    *,
    planar: bool = False,
) -> FloatArray:
    """The lowest `count` levels (J) of -kinetic d^2/dx^2 + V between each low and high, kinetic = hbar^2/2m in J m^2.

    low, high: (problems,), m; `potential` takes and gives (problems, points), J. The levels: (problems, count).
    planar: of -kinetic (d^2/dx^2 + (1/x) d/dx) + V, whose waves may have any value at low = 0.
    """
    length = (high - low)[:, None]
    if planar:
        x, still, rising = _radau(points)
        r = low[:, None] + length * (1 + x) / 2
        hamilton = low[:, None, None] * still + length[:, :, None] / 2 * rising
        hamilton *= kinetic * (2 / length[:, :, None]) ** 2 / np.sqrt(r[:, :, None] * r[:, None, :])
    else:
        x, matrix = _lobatto(points)
        hamilton = matrix * (kinetic * (2 / length[:, :, None]) ** 2)
    diagonal = np.arange(points)
    hamilton[:, diagonal, diagonal] += potential(low[:, None] + length * (1 + x) / 2)
    return np.asarray(np.linalg.eigvalsh(hamilton)[:, :count])


def converged(
    potential: Callable[[FloatArray], FloatArray],
    low: FloatArray,
    high: FloatArray,
    kinetic: float,
    count: int,
    *,
    planar: bool = False,
    noise: float = 0.0,
) -> tuple[FloatArray, float]:
    """`eigenvalues` on the first pair of grids that agree, and how far these are apart, relative.

    noise: the relative error of levels that comes with the rounding of the potential.
    """
    best, least = np.empty(0), np.inf
    for pair in GRIDS:
        if pair[0] < 2 * count and pair != GRIDS[-1]:
            continue
        first, second = (
            eigenvalues(potential, low, high, kinetic, count, points, planar=planar) for points in pair
        )
        error = float(np.max(np.abs(first - second) / (np.gradient(second, axis=1) + np.abs(second))))
        stuck = error > least / 4 and (least < ROUGH or pair[0] > PATIENCE)
        if error < least:
            best, least = second, error
        if error < WANTED + noise or stuck:
            break
    return best, least


@lru_cache(maxsize=8)
def _lobatto(points: int) -> tuple[FloatArray, FloatArray]:
    """The interior points of (-1, 1), and the matrix of -d^2/dx^2 between normalised polynomials."""
    n = points + 1
    inner, _ = roots_jacobi(n - 1, 1, 1)
    x = np.concatenate([[-1.0], inner, [1.0]])
    p = eval_legendre(n, x)
    w = 2 / (n * (n + 1) * p * p)
    gap = x[:, None] - x
    np.fill_diagonal(gap, 1.0)
    derivative = p[:, None] / (p * gap)
    np.fill_diagonal(derivative, 0.0)
    derivative[0, 0], derivative[-1, -1] = -n * (n + 1) / 4, n * (n + 1) / 4
    stretch = _stretch(x)
    scaled = derivative[:, 1:-1] / np.sqrt((w * stretch)[1:-1])
    return _even(inner), scaled.T @ ((w / stretch)[:, None] * scaled)


@lru_cache(maxsize=8)
def _radau(points: int) -> tuple[FloatArray, FloatArray, FloatArray]:
    """Points of [-1, 1) by the rule of Radau that ends at 1, and what -d/dx (1, 1 + x) d/dx are between polynomials."""
    n = points + 1
    inner, _ = roots_jacobi(points, 1, 0)
    x = np.append(inner, 1.0)
    w = (1 + x) / (n * eval_legendre(points, x)) ** 2
    gap = x[:, None] - x
    np.fill_diagonal(gap, 1.0)
    own = 1 / (2 * gap).prod(axis=1)
    derivative = own / (own[:, None] * gap)
    np.fill_diagonal(derivative, 0.0)
    np.fill_diagonal(derivative, -derivative.sum(axis=1))
    stretch, even = _stretch(x), _even(x)
    scaled = derivative[:, :-1] / np.sqrt((w * stretch)[:-1])
    still, rising = (scaled.T @ ((w / stretch * rise)[:, None] * scaled) for rise in (np.ones(n), 1 + even))
    return even[:-1], still, rising


def _even(x: FloatArray) -> FloatArray:
    """Points moved towards an even spacing (D. Kosloff, H. Tal-Ezer, J. Comput. Phys. 104, 457 (1993), from memory)."""
    return np.asarray(np.arcsin(EVEN * x) / np.arcsin(EVEN))


def _stretch(x: FloatArray) -> FloatArray:
    """The slope of that map."""
    return np.asarray(EVEN / (np.sqrt(1 - (EVEN * x) ** 2) * np.arcsin(EVEN)))
