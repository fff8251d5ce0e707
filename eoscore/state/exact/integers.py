"""Sums over whole numbers of a smooth function: the first terms by themselves, the rest as an integral."""

from __future__ import annotations

from functools import cache
from typing import TYPE_CHECKING

import numpy as np
from scipy.special import bernoulli

if TYPE_CHECKING:
    from eoscore.state.reading import FloatArray

__all__ = ["joined"]

ENDS = 10  # terms before the integral that join it to the sum


def joined(count: int) -> FloatArray:
    """Weights of f(0) ... f(count - 1) that with the integral of f from count - 1 on make the sum of all f(n).

    Gregory's formula with ten terms, or five eighths of `count`: that of Euler and Maclaurin (DLMF 2.10.1) with
    differences for derivatives.
    """
    weights = np.ones(count)
    ends = min(ENDS, count * 5 // 8)
    weights[count - ends :] += _ends(ends)[::-1]
    return weights


@cache
def _ends(order: int) -> FloatArray:
    """What the terms at 0, -1, -2, ... get beside 1: right for powers n^k, where sum less integral is zeta(-k)."""
    k = np.arange(order)
    zeta = -bernoulli(order)[1:] / (k + 1)
    zeta[0] = -0.5  # the sum begins after 0
    return np.asarray(np.linalg.solve((-k.astype(float)) ** k[:, None], zeta))
