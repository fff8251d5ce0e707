"""Bose, Fermi and classical functions whose integral stops at an upper energy x.

They count the momenta of a trap with an escape energy: E(p) + V < E_esc. By parts, the pressure integral with
-ln(1 - e^-(t+alpha)) (and with ln(1 + e^(eta-t))) is the function of the next order and a term at the upper end:
`bose_log_truncated` and `fermi_log_truncated`.

- x above 8 (or s): the whole function less the rest beyond x, by Gauss-Laguerre; the rest is the smaller part.
- Bose, below: 0 < t < 1 by Gauss-Jacobi with the weight t^(s-1); where alpha < 1/4 of that range the pole 1/(t+alpha)
  is taken out and integrated in closed form, what remains of 1/(e^w - 1) is smooth to |w| = 2 pi. Then panels
  1, 2, 4, 8, 16, 32 by Gauss-Legendre: t = 0 and the poles 2 pi i - alpha stay as far off as each is wide.
- Fermi, below: panels of width 6 (Gauss-Jacobi at t = 0), from 40 below the Fermi edge on; deeper all states are full.

Each part is good to some 1e-15; nothing cancels, so the result keeps its digits as x or alpha go to 0.
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

import numpy as np

from eoscore.gas.blocks import horner
from eoscore.gas.bose_function import bose
from eoscore.gas.fermi_function import fermi
from eoscore.gas.quadrature import jacobi, laguerre, legendre, pole_integral

if TYPE_CHECKING:
    from collections.abc import Callable

    from numpy.typing import ArrayLike

    from eoscore.gas.blocks import Block

    Branch = Callable[[float, Block, Block], Block]

__all__ = [
    "bose_log_truncated",
    "bose_truncated",
    "classical_truncated",
    "fermi_log_truncated",
    "fermi_truncated",
]

_CHUNK = 2048
_DEEP = 40.0
_WIDTH = 6.0
# B_2k / (2k)! of 1/(e^w - 1) = 1/w - 1/2 + sum_k B_2k w^(2k-1) / (2k)! (DLMF 24.2.1, 25.6.2)
_EVEN = (
    1 / 12,
    -1 / 720,
    1 / 30240,
    -1 / 1209600,
    1 / 47900160,
    *(
        (-1) ** (k + 1) * 2 * sum(j ** (-2.0 * k) for j in range(30, 0, -1)) / (2 * math.pi) ** (2 * k)
        for k in range(6, 14)
    ),
)


def bose_truncated(s: float, alpha: ArrayLike, x: ArrayLike) -> Block:
    """1/Gamma(s) int_0^x t^(s-1) / (e^(t+alpha) - 1) dt for s in (0, 30], alpha >= 0, 0 <= x <= inf, broadcast.

    inf at alpha = 0 where s <= 1 and x > 0; nan for a negative alpha or x. ValueError for an order out of range.
    """
    return _by_branches(s, alpha, x, _bose_below, _bose_above)


def fermi_truncated(s: float, eta: ArrayLike, x: ArrayLike) -> Block:
    """1/Gamma(s) int_0^x t^(s-1) / (e^(t-eta) + 1) dt for s in (0, 30], any eta, 0 <= x <= inf, broadcast.

    nan for a negative x. ValueError for an order out of range.
    """
    return _by_branches(s, eta, x, _fermi_below, _fermi_above, edge=True)


def classical_truncated(s: float, x: ArrayLike) -> Block:
    """1/Gamma(s) int_0^x t^(s-1) e^-t dt for s > 0, 0 <= x <= inf: the regularised incomplete Gamma function."""
    from scipy.special import gammainc

    return np.asarray(gammainc(s, np.asarray(x, dtype=np.float64)), dtype=np.float64)[()]


def bose_log_truncated(s: float, alpha: ArrayLike, x: ArrayLike) -> Block:
    """-1/Gamma(s) int_0^x t^(s-1) ln(1 - e^-(t+alpha)) dt, arguments as of `bose_truncated`, s in (0, 29]."""
    a, top = np.asarray(alpha, dtype=np.float64), np.asarray(x, dtype=np.float64)
    with np.errstate(all="ignore"):
        w = top + a
        end = np.where(w > math.log(2), -np.log1p(-np.exp(-w)), -np.log(-np.expm1(-w)))
        return bose_truncated(s + 1, a, top) + _end(s, top, end)


def fermi_log_truncated(s: float, eta: ArrayLike, x: ArrayLike) -> Block:
    """1/Gamma(s) int_0^x t^(s-1) ln(1 + e^(eta-t)) dt, arguments as of `fermi_truncated`, s in (0, 29]."""
    e, top = np.asarray(eta, dtype=np.float64), np.asarray(x, dtype=np.float64)
    with np.errstate(all="ignore"):
        return fermi_truncated(s + 1, e, top) + _end(s, top, np.logaddexp(0.0, e - top))


def _end(s: float, x: Block, factor: Block) -> Block:
    """x^s / Gamma(s+1) times a factor that decays exponentially, and 0 at both ends of x."""
    return np.where((factor == 0) | (x == 0), 0.0, x**s * factor / math.gamma(s + 1))


def _by_branches(
    s: float, first: ArrayLike, x: ArrayLike, below: Branch, above: Branch, *, edge: bool = False
) -> Block:
    """Each point by its branch; the upper one starts at 8 (or s), counted from the Fermi edge if there is one."""
    if not 0 < s <= 30:
        raise ValueError(f"the order is {s!r}; expected 0 < s <= 30; give such an order")
    firsts, tops = np.broadcast_arrays(np.asarray(first, dtype=np.float64), np.asarray(x, dtype=np.float64))
    shape, firsts, tops = tops.shape, firsts.ravel(), tops.ravel()
    result = np.empty(tops.size)
    for start in range(0, tops.size, _CHUNK):
        part = slice(start, start + _CHUNK)
        some, top = firsts[part], tops[part]
        with np.errstate(all="ignore"):
            high = top > max(8.0, s) + (np.maximum(some, 0.0) if edge else 0.0)
            value = np.where(top == 0, 0.0, np.nan)
            for where, branch in ((high, above), (~high & (top > 0), below)):
                if where.any():
                    value[where] = branch(float(s), some[where], top[where])
        result[part] = value
    return result.reshape(shape)[()]


def _bose_below(s: float, alpha: Block, x: Block) -> Block:
    first = np.minimum(x, 1.0)
    with_pole = alpha < first / 4
    total = np.empty(x.size)
    for where, piece in ((with_pole, _with_pole), (~with_pole, _regular)):
        if where.any():
            total[where] = piece(s, alpha[where], first[where])
    low = 1.0
    while low < x.max():
        total += _panel(s, low, np.clip(x, low, 2 * low), lambda t: 1 / np.expm1(t + alpha))
        low *= 2
    total[alpha < 0] = np.nan
    if s <= 1:
        total[alpha == 0] = np.inf
    return total / math.gamma(s)


def _regular(s: float, alpha: Block, x: Block) -> Block:
    rule = jacobi(s, 20)
    total: Block = (rule.weights / np.expm1(x * rule.nodes + alpha)).sum(axis=0)
    return x**s * total


def _with_pole(s: float, alpha: Block, x: Block) -> Block:
    rule = jacobi(s, 8)
    w = x * rule.nodes + alpha
    smooth = w * horner(_EVEN, w * w) - 0.5
    total: Block = (rule.weights * smooth).sum(axis=0)
    return x ** (s - 1) * pole_integral(s, alpha / x) + x**s * total


def _panel(s: float, low: float | Block, high: Block, occupation: Callable[[Block], Block]) -> Block:
    rule = legendre(20)
    width = high - low
    t = low + width * rule.nodes
    total: Block = (rule.weights * t ** (s - 1) * occupation(t)).sum(axis=0)
    return width * total


def _bose_above(s: float, alpha: Block, x: Block) -> Block:
    return bose(s, alpha) - _rest(s, x, lambda u: np.exp(-(x + alpha)) / -np.expm1(-(x + u + alpha)))


def _fermi_above(s: float, eta: Block, x: Block) -> Block:
    return fermi(s, eta) - _rest(s, x, lambda u: 1 / (np.exp(x - eta) + np.exp(-u)))


def _rest(s: float, x: Block, occupation: Callable[[Block], Block]) -> Block:
    """1/Gamma(s) int_x^inf, with e^u times the occupation at t = x + u given."""
    rule = laguerre(32)
    far = x > 1000.0
    rest = (rule.weights * (x + rule.nodes) ** (s - 1) * occupation(rule.nodes)).sum(axis=0) / math.gamma(s)
    return np.where(far, 0.0, rest)


def _fermi_below(s: float, eta: Block, x: Block) -> Block:
    def occupation(t: Block) -> Block:
        return 1 / (np.exp(t - eta) + 1)

    start = np.where(eta >= _DEEP + _WIDTH, eta - _DEEP, 0.0)
    full = np.minimum(start, x) ** s / s
    from_zero = np.minimum(x, _WIDTH)
    rule = jacobi(s, 24)
    edge = from_zero**s * (rule.weights * occupation(from_zero * rule.nodes)).sum(axis=0)
    total = np.where(start > 0, full + _panel(s, start, np.clip(x, start, start + _WIDTH), occupation), edge)
    low = start + _WIDTH
    while (low < x).any():
        total += _panel(s, low, np.clip(x, low, low + _WIDTH), occupation)
        low = low + _WIDTH
    return total / math.gamma(s)
