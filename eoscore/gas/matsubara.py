"""What a Fermi function has beyond its mirror image: the part that grows as a power, to many digits.

F_s(eta) + cos(pi s) F_s(-eta) = Y_s(eta), and Y_s is a sum over the poles eta = i pi (2k + 1) of the occupation,
Y_s = 2 pi / Gamma(s) Im sum_k (eta + i pi (2k + 1))^(s-1), continued (Jonquiere's formula, DLMF 25.12.13, with the
Hurwitz zeta function written out). The terms from k = M on are summed by Euler and Maclaurin's formula, with
W = eta + 2 pi i M: 2 Re sum_j eta(2j) (s-1)(s-2)...(s-2j+1) W^(s-2j) / Gamma(s), eta(2j) the alternating zeta
function. For M = 0 this is Sommerfeld's expansion; with |W| >= 44, and 62 at s = -6, its least term is below
1e-18 of Y_s.
"""

from __future__ import annotations

import math
from decimal import Context, Decimal, getcontext, localcontext
from functools import cache, lru_cache
from typing import TYPE_CHECKING

from eoscore.gas.precise import PI, cosine_sine, even_eta, precisely, reciprocal_gamma

if TYPE_CHECKING:
    from collections.abc import Callable

__all__ = ["power_part"]

_TERMS = 50
_DIGITS = 64


def power_part(order: Decimal) -> Callable[[Decimal], Decimal]:
    """Y_s as a function of eta >= 0."""
    front = reciprocal_gamma(order)
    factors = _tail_factors(order)
    reach = 44 + 3 * max(0, -float(order))
    digits = 34 if order < 8 else _DIGITS

    def value(eta: Decimal) -> Decimal:
        with localcontext(Context(prec=digits)):
            count = _explicit_terms(eta, reach)
            total = sum((_power(eta, 2 * k + 1, order - 1)[1] for k in range(count)), Decimal(0)) * 2 * PI
            return front * (total + 2 * _tail(eta, count, order, factors))

    return value


@precisely
def _tail_factors(order: Decimal) -> list[Decimal]:
    """eta(2j) (s-1)(s-2)...(s-2j+1), for j = 0 ... ; the first is eta(0) / s."""
    factors, falling = [1 / (2 * order)], order - 1
    for j in range(1, _TERMS):
        factors.append(even_eta(_TERMS)[j] * falling)
        falling *= (order - 2 * j) * (order - 2 * j - 1)
    return factors


def _explicit_terms(eta: Decimal, reach: float) -> int:
    """How many poles are summed one by one, that |eta + 2 pi i M| may be large."""
    missing = reach**2 - float(eta) ** 2
    return 0 if missing <= 0 else int(missing**0.5 / 6.28) + 1


def _tail(eta: Decimal, count: int, order: Decimal, factors: list[Decimal]) -> Decimal:
    real, imaginary = _power(eta, 2 * count, order)
    square = eta * eta + 4 * PI * PI * count * count
    # 1 / W^2
    down, across = (eta * eta - 4 * PI * PI * count * count) / square**2, -4 * PI * eta * count / square**2
    total, last = Decimal(0), Decimal("inf")
    for factor in factors:
        size = abs(factor * real) + abs(factor * imaginary)
        if size >= last:
            break
        last = size
        total += factor * real
        real, imaginary = real * down - imaginary * across, real * across + imaginary * down
    return total


def _power(eta: Decimal, count: int, exponent: Decimal) -> tuple[Decimal, Decimal]:
    """(eta + i pi count)^exponent, its real and imaginary part."""
    whole = math.floor(exponent)
    real, imaginary = _root(eta, count, exponent - whole, getcontext().prec)
    step, height = eta, PI * count
    if whole < 0:
        square = eta * eta + height * height
        step, height = eta / square, -height / square
    for _ in range(abs(whole)):
        real, imaginary = real * step - imaginary * height, real * height + imaginary * step
    return real, imaginary


@lru_cache(maxsize=8192)
def _root(eta: Decimal, count: int, exponent: Decimal, digits: int) -> tuple[Decimal, Decimal]:  # noqa: ARG001
    """The power with an exponent in [0, 1): the same for all orders that differ by whole numbers.

    The digits are those of the context: an argument only so that the cache keeps them apart.
    """
    log, angle = _polar(eta, count)
    size = (exponent * log).exp()
    cosine, sine = cosine_sine(exponent * angle)
    return size * cosine, size * sine


@cache
def _polar(eta: Decimal, count: int) -> tuple[Decimal, Decimal]:
    """ln |eta + i pi count| and its angle, the angle of doubles mended to all digits: the same for all orders."""
    with localcontext(Context(prec=_DIGITS)):
        height = PI * count
        angle = Decimal(math.atan2(height, eta))
        cosine, sine = cosine_sine(angle)
        off = (height * cosine - eta * sine) / (eta * cosine + height * sine)
        return (eta * eta + height * height).ln() / 2, angle + off - off**3 / 3
