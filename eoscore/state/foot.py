"""The share of a pure power below the first node, where 1/(e^t - 1) is 1/t to all digits."""

from __future__ import annotations

from functools import lru_cache
from typing import TYPE_CHECKING

import numpy as np
from scipy.special import exprel, roots_jacobi

if TYPE_CHECKING:
    from eoscore.state.reading import FloatArray

__all__ = ["foot_means"]

SEAM = 0.25


def foot_means(k: float, a: FloatArray) -> tuple[FloatArray, FloatArray]:
    """int_0^1 k u^{k-1}/(u + a) du and the same with (u + a)^-2, for a >= 0, k > 0; inf where they diverge.

    Above the seam by Gauss-Jacobi quadrature. Below it u = a s: up to s = 4 by Gauss-Jacobi, beyond it by
    1/(1 + r) = sum (-r)^n in r = 1/s, whose integrals over [a, 1/4] hold through k = 1, 2, ... as (e^y - 1)/y.
    The second follows by integration by parts. Relative error about 1e-15.
    """
    first = _first(k, a)
    with np.errstate(divide="ignore", invalid="ignore"):
        second = np.where(a > 0, (k / (1 + a) - (k - 1) * first) / a, np.inf)
    return first, np.where(a > 1, second, k * (_first(k - 1, a) - 1 / (1 + a))) if k > 1.05 else second


def _first(k: float, a: FloatArray) -> FloatArray:
    u, w = _rule(k)
    first = np.empty_like(a)
    near = a < SEAM
    first[near] = _small(k, a[near])
    first[~near] = (1 / (u + a[~near, None])) @ w
    return first


@lru_cache(maxsize=64)
def _rule(k: float) -> tuple[FloatArray, FloatArray]:
    """Nodes and weights of int_0^1 k u^{k-1} g(u) du."""
    x, w = roots_jacobi(24, 0.0, k - 1)
    return (1 + x) / 2, w * k / 2**k


def _small(k: float, a: FloatArray) -> FloatArray:
    u, w = _rule(k)
    with np.errstate(divide="ignore", invalid="ignore", over="ignore"):
        log = np.log(a / SEAM)
        lower = (a / SEAM) ** (k - 1) * float((w / (u + SEAM)).sum())
        total = np.zeros_like(a)
        for n in range(28):
            power = n + 1 - k
            total += (-1) ** n * SEAM**power * -log * exprel(power * log)
        value = lower + k * a ** (k - 1) * total
    limit = k / (k - 1) if k > 1 else np.inf
    # Where a is so small that a power of it overflows, what it takes off the limit is below all digits.
    return np.where((a > 0) & np.isfinite(value), value, limit)
