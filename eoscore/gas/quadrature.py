"""Gauss rules and the pole's own integral, for functions stopped at an upper energy."""

from __future__ import annotations

import math
from functools import lru_cache
from typing import TYPE_CHECKING, NamedTuple

import numpy as np

from eoscore.gas.blocks import horner
from eoscore.gas.singular import Absent, AbstractSingular, Logarithm, Power

if TYPE_CHECKING:
    from eoscore.gas.blocks import Block

__all__ = ["Rule", "jacobi", "laguerre", "legendre", "pole_integral"]


class Rule(NamedTuple):
    """Nodes and weights, as columns that meet a row of points."""

    nodes: Block
    weights: Block


def _rule(nodes: Block, weights: Block) -> Rule:
    return Rule(nodes[:, None], weights[:, None])


@lru_cache(maxsize=256)
def jacobi(s: float, count: int) -> Rule:
    """The integral over 0 < y < 1 with the weight y^(s-1), s > 0 (Golub and Welsch 1969; DLMF 18.9 for the matrix)."""
    n, b = np.arange(1.0, count), s - 1.0
    square = (2 * n + b) ** 2
    diagonal = np.concatenate([[b / (b + 2)], b * b / ((2 * n + b) * (2 * n + b + 2))])
    beside = np.sqrt(4 * n**2 * (n + b) ** 2 / (square * (square - 1)))
    matrix = np.diag(diagonal) + np.diag(beside, 1) + np.diag(beside, -1)
    values, vectors = np.linalg.eigh(matrix)
    return _rule((1 + values) / 2, vectors[0] ** 2 / s)


@lru_cache(maxsize=8)
def legendre(count: int) -> Rule:
    """The integral over 0 < y < 1."""
    nodes, weights = np.polynomial.legendre.leggauss(count)
    return _rule((1 + nodes) / 2, weights / 2)


@lru_cache(maxsize=8)
def laguerre(count: int) -> Rule:
    """The integral over y > 0 with the weight e^-y."""
    return _rule(*np.polynomial.laguerre.laggauss(count))


_TERMS = 28


@lru_cache(maxsize=256)
def _pole_table(s: float) -> tuple[tuple[float, ...], AbstractSingular]:
    m = math.ceil(s - 0.5) - 1
    eps = s - 1 - m
    regular = [(-1) ** k / (s - 1 - k) if k != m else 0.0 for k in range(_TERMS)]
    if m < 0:
        return tuple(regular), Power(math.pi / math.sin(math.pi * s), s, divided=True)
    if m >= _TERMS:
        return tuple(regular), Absent()
    angle = math.pi * eps
    full = angle / math.sin(angle) if eps else 1.0
    # (1 - full) / eps, by its series where the difference has lost its digits
    left = -(math.pi**2 / 6) * eps * (1 + 7 * angle**2 / 60) if abs(angle) < 1e-4 else (1 - full) / eps
    regular[m] = (-1) ** m * left
    return tuple(regular), Logarithm(-((-1) ** m) * full, m, eps)


def pole_integral(s: float, r: Block) -> Block:
    """int_0^1 y^(s-1) / (y + r) dy for 0 <= r <= 1/4, s > 0; inf at r = 0 where s <= 1.

    It is pi r^(s-1) / sin(pi s) + sum_k (-r)^k / (s-1-k) (expand 1/(y + r) beyond and below r); near a whole s
    the power and one term diverge and are taken together, as in the Bose function.
    """
    regular, singular = _pole_table(s)
    safe = np.maximum(r, 5e-324) if s > 1 else r
    return horner(regular, r) + singular(safe)
