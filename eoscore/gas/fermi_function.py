"""The Fermi function -Li_s(-e^eta) for every real order."""

from __future__ import annotations

import math
from functools import lru_cache
from typing import TYPE_CHECKING

import numpy as np

if TYPE_CHECKING:
    from numpy.typing import ArrayLike, NDArray

__all__ = ["fermi"]

# B_2j(1/2) / (2j)!
_MIDPOINT = (-1 / 24, 7 / 5760, -31 / 967680, 127 / 154828800, -73 / 3503554560, 1414477 / 2678117105664000)


@lru_cache(maxsize=256)
def _tables(s: float) -> tuple[NDArray[np.float64], NDArray[np.float64], float]:
    import mpmath

    with mpmath.workdps(50):
        taylor = [float(mpmath.altzeta(mpmath.mpf(s) - k) / mpmath.factorial(k)) for k in range(60)]
        powers = [float(-((-1) ** k) * mpmath.mpf(k) ** -mpmath.mpf(s)) for k in range(1, 41)]
        scale = float(mpmath.rgamma(s))
    return np.array(taylor), np.array(powers), scale


def _matsubara(s: float, eta: NDArray[np.float64]) -> NDArray[np.float64]:
    """(2 pi)^s Im sum_k (y + i(k + 1/2))^(s-1), the tail by the midpoint Euler-Maclaurin formula."""
    y, count = eta / (2 * math.pi), 8
    total = sum(((y + 1j * (k + 0.5)) ** (s - 1)).imag for k in range(count))
    w = y + 1j * count
    tail = (w**s).real / s if s else np.log(np.abs(w)) * 0.0
    derivative, falling = 1j * w ** (s - 2), s - 1
    for j, c in enumerate(_MIDPOINT):
        tail = tail - c * (falling * derivative).imag
        falling *= (s - 2 - 2 * j) * (s - 3 - 2 * j)
        derivative = -derivative / w**2
    return (2 * math.pi) ** s * (total + tail)


def fermi(s: float, eta: ArrayLike, out: NDArray[np.float64] | None = None) -> NDArray[np.float64]:
    """-Li_s(-e^eta) for a real order s in [-6, 30], elementwise (no units)."""
    eta = np.asarray(eta, dtype=float)
    result = np.empty(eta.shape) if out is None else out
    taylor, powers, scale = _tables(float(s))
    polyval = np.polynomial.polynomial.polyval
    with np.errstate(all="ignore"):
        small = np.abs(eta)
        z = np.exp(-small)
        low = np.where(small < 1.5, polyval(-np.minimum(small, 1.5), taylor), z * polyval(z, powers))
        if s == 0:
            result[...] = np.where(eta > 0, 1 - low, low)
        else:
            high = scale * _matsubara(float(s), small) - math.cos(math.pi * s) * low
            result[...] = np.where(eta > 0, high, low)
    return result[()] if out is None else result
