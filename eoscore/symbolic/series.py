"""Sums over l = 1, 2, ... of smooth terms, in double precision: a head, an integral and its end correction."""

from __future__ import annotations

from itertools import pairwise
from typing import TYPE_CHECKING

import numpy as np

if TYPE_CHECKING:
    from collections.abc import Callable

    from numpy.typing import NDArray

__all__ = ["alternating_sum", "smooth_sum"]

_HEAD = 2000
_PIECES = (0.0, 0.02, 0.1, 0.3, 0.6, 1.0)
_POINTS = 40


def smooth_sum(term: Callable[[NDArray[np.float64]], NDArray[np.float64]]) -> float:
    """Sum of term(l) for l >= 1: 2000 terms, then the midpoint form of Euler and Maclaurin (DLMF 2.10(i)).

    The integral runs over u with l = 2000/u^2: a fall like l^-a with 2a whole is then smooth at u = 0, and an
    exponential one vanishes there with all its derivatives. The next end correction is below l^-4 of the sum.
    """
    ells = np.arange(1.0, _HEAD + 1)
    head = term(ells)
    start = _HEAD + 0.5
    x, w = np.polynomial.legendre.leggauss(_POINTS)
    tail = 0.0
    for low, high in pairwise(_PIECES):
        u = (high + low) / 2 + (high - low) / 2 * x
        tail += float(np.sum(w * term(start / u**2) * 2 * start / u**3)) * (high - low) / 2
    last = term(np.array([_HEAD, _HEAD + 1.0]))
    return float(np.sum(head[::-1])) + tail + float(last[1] - last[0]) / 24


def alternating_sum(term: Callable[[NDArray[np.float64]], NDArray[np.float64]]) -> float:
    """Sum of alternating terms by the linear acceleration of Cohen, Rodriguez Villegas and Zagier (2000)."""
    n = 40
    d = ((3 + np.sqrt(8.0)) ** n + (3 + np.sqrt(8.0)) ** -n) / 2
    b, c, total = -1.0, -d, 0.0
    values = np.abs(term(np.arange(1.0, n + 1)))
    for k in range(n):
        c = b - c
        total += c * float(values[k])
        b *= (k + n) * (k - n) / ((k + 0.5) * (k + 1))
    return total / float(d)
