"""The Bose function g_s(e^-alpha) = Li_s(e^-alpha) for every real order, to the last bits.

Two expansions meet at a seam, alpha = 1/2 for s >= 1/2 and at 1 - s, at most 2, below:

- Near alpha = 0: Gamma(1-s) alpha^(s-1) + sum_k zeta(s-k) (-alpha)^k / k!, convergent for alpha < 2 pi (Robinson,
  Phys. Rev. 83, 678 (1951); DLMF 25.12.12). The sum is one polynomial, the power is made of roots and products for
  half-integer orders. For s near an integer m + 1 > 0 the power and the term k = m both diverge; with eps = s - 1 - m
  and A = -eps Gamma(1-s) (-1)^m m! they are, without loss, (-alpha)^m / m! times
  [zeta(1+eps) - A/eps] - A (alpha^eps - 1)/eps (D. Wood, "The computation of polylogarithms", 1992, section 9).
- Beyond: z + z v Q(v) with z = e^-alpha, the polynomial taken in v = z / (c - z), c = 1 + sqrt(1 - z_seam). That map
  puts the cut of Li_s, z >= 1, equally far from both ends of the range of v, so that Q needs 2/3 of the terms.

The terms of the first cancel as alpha grows (a factor of 3 at 1/2 for s = 3/2; less for s < 0, where the power
prevails, hence the later seam), the second needs more terms as it shrinks. Coefficients are made with 70 digits
once for each order; both polynomials are good to 1e-17 of the function, so what is left is a few roundings.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from decimal import Decimal
from functools import lru_cache
from threading import Lock
from typing import TYPE_CHECKING, overload

import numpy as np

from eoscore.gas.blocks import blockwise, horner, horner_scalar
from eoscore.gas.precise import (
    checked_order,
    moved,
    polynomial,
    polynomial_value,
    powers,
    precisely,
    zeta_row,
)
from eoscore.gas.singular import AbstractSingular, singular_of

if TYPE_CHECKING:
    from numpy.typing import ArrayLike

    from eoscore.gas.blocks import Block

__all__ = ["bose"]

_LOCK = Lock()


@dataclass(frozen=True)
class _Table:
    """The coefficients of one order, lowest first."""

    order: float
    seam: float
    singular: AbstractSingular
    regular: tuple[float, ...]
    rest: float
    """What the first coefficient of `regular` lost when it was rounded."""
    centre: float
    beyond: tuple[float, ...]
    limit: float


@lru_cache(maxsize=512)
def _table(s: float) -> _Table:
    with _LOCK:
        return _make(s)


@precisely
def _make(s: float) -> _Table:
    order, seam = moved(s), min(max(0.5, 1.0 - s), 2.0)
    row = list(zeta_row(order))
    limit = float(row[0]) if s > 1 else math.inf
    singular = singular_of(s, row)
    taylor, factorial = [], Decimal(1)
    for k, value in enumerate(row):
        factorial *= -max(k, 1)
        taylor.append(-value / factorial)
    regular = polynomial(lambda x: polynomial_value(taylor, x), 0.0, seam, 10 if seam < 1 else 16)
    centre = 1.0 + math.sqrt(-math.expm1(-seam))
    tail = powers(order)[1:]

    def beyond(v: Decimal) -> Decimal:
        z = Decimal(centre) * v / (1 + v)
        return (Decimal(centre) - z) * polynomial_value(tail, z)

    edge = math.exp(-seam)
    far = polynomial(beyond, 0.0, edge / (centre - edge), 17)
    first = float(regular[0])
    rest = float(regular[0] - Decimal(first))
    return _Table(s, seam, singular, tuple(map(float, regular)), rest, centre, tuple(map(float, far)), limit)


def _near(table: _Table, alpha: Block) -> Block:
    result = horner(table.regular[1:], alpha)
    result *= alpha
    result += table.rest
    result += table.singular(alpha)
    result += table.regular[0]
    if 1.0 < table.order < 1.5:
        # So close to the pole of zeta the two parts are large, and their sum could pass its limit by a rounding.
        np.minimum(result, table.limit, out=result)
    return result


def _beyond(table: _Table, alpha: Block) -> Block:
    z = np.negative(alpha)
    np.exp(z, out=z)
    v = np.subtract(table.centre, z)
    np.divide(z, v, out=v)
    result = horner(table.beyond, v)
    result *= v
    result *= z
    result += z
    return result


def _block(table: _Table, alpha: Block) -> Block:
    near = alpha < table.seam
    inside = np.flatnonzero(near)
    if inside.size == 0:
        result = _beyond(table, alpha)
    elif inside.size == alpha.size:
        result = _near(table, alpha)
    else:
        np.logical_not(near, out=near)
        outside = np.flatnonzero(near)
        result = np.empty(alpha.size)
        result[inside] = _near(table, alpha.take(inside))
        result[outside] = _beyond(table, alpha.take(outside))
    if inside.size and not alpha.min() > 0:
        result[alpha == 0] = table.limit
        result[alpha < 0] = np.nan
    return result


def _scalar(table: _Table, alpha: float) -> float:
    if alpha >= table.seam:
        z = math.exp(-alpha)
        v = z / (table.centre - z)
        return z + z * (v * horner_scalar(table.beyond, v))
    if not alpha > 0:
        return table.limit if alpha == 0 else math.nan
    regular = alpha * horner_scalar(table.regular[1:], alpha) + table.rest
    total = table.regular[0] + (regular + table.singular.scalar(alpha))
    return min(total, table.limit) if 1.0 < table.order < 1.5 else total


@overload
def bose(s: float, alpha: float, out: None = None) -> float: ...
@overload
def bose(s: float, alpha: ArrayLike, out: Block | None = None) -> Block: ...
def bose(s: float, alpha: float | ArrayLike, out: Block | None = None) -> Block | float:
    """Li_s(e^-alpha) for a real order s in [-6, 30] and alpha in [0, inf], elementwise; nothing has a unit.

    At alpha = 0 it is zeta(s) for s > 1 and inf for s <= 1; for a negative alpha it is nan. The result has the
    shape of alpha, or is a float where alpha is one; it is written to `out` where that is given.
    ValueError is raised for an order out of range and for an `out` of another shape or type.
    """
    table = _table(checked_order(s))
    if out is None and isinstance(alpha, float | int):
        return _scalar(table, float(alpha))
    return blockwise(lambda block: _block(table, block), np.asarray(alpha, dtype=np.float64), out)[()]
