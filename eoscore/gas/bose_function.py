"""The Bose function g_s(e^-alpha) = Li_s(e^-alpha) for every real order."""

from __future__ import annotations

from functools import lru_cache
from typing import TYPE_CHECKING

import numpy as np

if TYPE_CHECKING:
    from numpy.typing import ArrayLike, NDArray

__all__ = ["bose"]


@lru_cache(maxsize=256)
def _tables(s: float) -> tuple[NDArray[np.float64], NDArray[np.float64], int, float, float, float]:
    import mpmath

    with mpmath.workdps(50):
        m, order = max(round(s) - 1, -1), mpmath.mpf(s)
        moved = order + mpmath.mpf(10) ** -25
        regular = [
            0.0 if k == m else float(mpmath.zeta(moved - k) * (-1) ** k / mpmath.factorial(k)) for k in range(30)
        ]
        powers = [float(mpmath.mpf(k) ** -order) for k in range(1, 61)]
        if m < 0:
            return np.array(regular), np.array(powers), m, 0.0, float(mpmath.gamma(1 - moved)), 0.0
        eps = moved - 1 - m
        front = (-1) ** m / mpmath.factorial(m)
        a = -mpmath.gamma(1 - moved) * eps / front
        d = front * (mpmath.zeta(1 + eps) - a / eps)
    return np.array(regular), np.array(powers), m, s - 1 - m, float(a * front), float(d)


def bose(s: float, alpha: ArrayLike, out: NDArray[np.float64] | None = None) -> NDArray[np.float64]:
    """Li_s(e^-alpha) for a real order s in [-6, 30] and alpha in [0, inf], elementwise (no units).

    At alpha = 0 it is zeta(s) for s > 1 and inf for s <= 1; it is nan for a negative alpha.
    """
    alpha = np.asarray(alpha, dtype=float)
    result = np.empty(alpha.shape) if out is None else out
    regular, powers, m, eps, a, d = _tables(float(s))
    with np.errstate(all="ignore"):
        z = np.exp(-alpha)
        far = z * np.polynomial.polynomial.polyval(z, powers)
        x = np.minimum(alpha, 1.0)
        near = np.polynomial.polynomial.polyval(x, regular)
        if m < 0:
            near += a * x ** (s - 1.0)
        else:
            log = np.log(x)
            ratio = np.expm1(eps * log) / eps if eps else log
            singular = x**m * (d - a * ratio)
            near += np.where(x > 0, singular, 0.0 if s > 1 else np.inf)
    result[...] = np.where(alpha < 0, np.nan, np.where(alpha < 1, near, far))
    return result[()] if out is None else result
