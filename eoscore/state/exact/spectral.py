"""One-dimensional Schroedinger problems between two points where the wave vanishes, by Legendre-Gauss-Lobatto points.

The kinetic energy of polynomials is exact, the potential is diagonal: for a smooth potential every level converges
faster than any power of the number of points (Manolopoulos and Wyatt, Chem. Phys. Lett. 152, 23 (1988), from memory).
"""

from __future__ import annotations

from functools import lru_cache
from typing import TYPE_CHECKING

import numpy as np
from scipy.linalg import eigh
from scipy.special import eval_legendre, roots_jacobi

if TYPE_CHECKING:
    from collections.abc import Callable

    from eoscore.state.reading import FloatArray

__all__ = ["eigenvalues"]


def eigenvalues(
    potential: Callable[[FloatArray], FloatArray],
    low: float,
    high: float,
    kinetic: float,
    count: int,
    points: int,
) -> FloatArray:
    """The lowest `count` levels (J) of -kinetic d^2/dx^2 + V on (low, high), kinetic = hbar^2/2m in J m^2."""
    x, matrix = _lobatto(points)
    length = high - low
    hamilton = matrix * (kinetic * (2 / length) ** 2)
    hamilton[np.diag_indices_from(hamilton)] += potential(low + length * (1 + x) / 2)
    return np.asarray(eigh(hamilton, eigvals_only=True, subset_by_index=(0, count - 1)))


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
    scaled = derivative[:, 1:-1] / np.sqrt(w[1:-1])
    return inner, scaled.T @ (w[:, None] * scaled)
