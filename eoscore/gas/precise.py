"""A few functions of decimal numbers, for the tables that are made once for each order.

All the coefficients of an order follow from the powers k^-s of the first integers. Decimal arithmetic (in C, in the
standard library) makes them in a few milliseconds, without the import of an arbitrary-precision library. With 70
digits an integer order needs no case of its own: it is moved by 1e-22, which loses 22 digits in the terms that
cancel and is far below a double.
"""

from __future__ import annotations

import math
from decimal import Context, Decimal, getcontext, localcontext
from functools import cache, lru_cache, wraps
from typing import TYPE_CHECKING, ParamSpec, TypeVar

if TYPE_CHECKING:
    from collections.abc import Callable, Sequence

__all__ = [
    "ORDERS",
    "PI",
    "TERMS",
    "checked_order",
    "cosine_sine",
    "eta_row",
    "even_eta",
    "gamma",
    "moved",
    "polynomial",
    "polynomial_value",
    "powers",
    "precisely",
    "reciprocal_gamma",
    "zeta_row",
]

TERMS = 100
"""How many powers k^-s are kept: e^-(k/2) falls below 1e-21 within them."""
ORDERS = 41
"""How many orders s, s - 1, s - 2 ... a row of zeta values has: (1/pi)^k falls below 1e-20 within them."""

_DIGITS = 70
_SHIFT = Decimal("1e-22")
_ALTERNATING = 60
PI = Decimal("3.141592653589793238462643383279502884197169399375105820974944592307816406286208998628")

P = ParamSpec("P")
R = TypeVar("R")


def precisely(function: Callable[P, R]) -> Callable[P, R]:
    """The same function, run with the digits that the tables need, whatever the caller's decimal context is."""

    @wraps(function)
    def run(*args: P.args, **kwargs: P.kwargs) -> R:
        with localcontext(Context(prec=_DIGITS)):
            return function(*args, **kwargs)

    return run


def checked_order(s: float) -> float:
    """The order as a float; ValueError outside [-6, 30], where the tables are not made to be exact."""
    if -6.0 <= s <= 30.0:
        return float(s)
    raise ValueError(f"the order is {s!r}; expected a number from -6 to 30; give such an order")


def moved(s: float) -> Decimal:
    """The order as a decimal; a whole one a little off, so that it is no pole of anything."""
    return Decimal(s) + (_SHIFT if abs(s - round(s)) < _SHIFT else 0)


@cache
def _logarithms() -> dict[int, Decimal]:
    """ln p for the primes up to TERMS."""
    return {k: Decimal(k).ln() for k in range(2, TERMS + 1) if all(k % j for j in range(2, k))}


@lru_cache(maxsize=64)
@precisely
def powers(order: Decimal) -> tuple[Decimal, ...]:
    """k^-s for k = 1 ... TERMS, products of those of the primes."""
    found = [Decimal(1)] * (TERMS + 1)
    for prime, log in _logarithms().items():
        power = (-order * log).exp()
        step = prime
        while step <= TERMS:
            for k in range(step, TERMS + 1, step):
                found[k] *= power
            step *= prime
    return tuple(found[1:])


@cache
@precisely
def _weights() -> tuple[Decimal, ...]:
    """(-1)^(k-1) (1 - d_(k-1) / d_n): the weights of P. Borwein's alternating sum, algorithm 2 of 2000.

    P. Borwein, "An efficient algorithm for the Riemann zeta function": the error is below 3 / (3 + sqrt 8)^n.
    """
    n, term, total, sums = _ALTERNATING, 1, 0, []
    for i in range(n + 1):
        total += term
        sums.append(total)
        term = term * 4 * (n - i) * (n + i) // ((2 * i + 1) * (2 * i + 2))
    return tuple((-1) ** k * Decimal(total - part) / total for k, part in enumerate(sums[:n]))


@lru_cache(maxsize=64)
@precisely
def zeta_row(order: Decimal) -> tuple[Decimal, ...]:
    """zeta(s - j) for j = 0 ... ORDERS - 1: alternating sums, and reflected (DLMF 25.4.1) below 1/2."""
    known = powers(order)[:_ALTERNATING]
    direct = [weight * power for weight, power in zip(_weights(), known, strict=True)]
    mirror = [
        weight / (power * k) for k, (weight, power) in enumerate(zip(_weights(), known, strict=True), 1)
    ]
    row, factor, growth = [], Decimal(2) ** order, Decimal(0)
    cosine, sine = cosine_sine(PI * order / 2)
    signs = (sine, -cosine, -sine, cosine)
    for j in range(ORDERS):
        at = order - j
        if at >= Decimal("0.5"):
            row.append(sum(direct, Decimal(0)) / (1 - 2 * 2**j / factor))
            direct = [k * term for k, term in enumerate(direct, 1)]
        else:
            growth = growth * (-at) / (2 * PI) if growth else 2 * (2 * PI) ** (at - 1) * gamma(1 - at)
            row.append(growth * signs[j % 4] * sum(mirror, Decimal(0)) / (1 - factor / 2**j))
        mirror = [term / k for k, term in enumerate(mirror, 1)]
    return tuple(row)


@precisely
def eta_row(order: Decimal) -> list[Decimal]:
    """sum_k (-1)^(k-1) k^(j-s) for j = 0 ... ORDERS - 1, continued to every order."""
    return [value * (1 - 2 ** (1 - order + j)) for j, value in enumerate(zeta_row(order))]


@cache
@precisely
def even_eta(count: int) -> tuple[Decimal, ...]:
    """sum_k (-1)^(k-1) k^(-2j) for j = 0 ... count - 1."""
    row, terms = [], list(_weights())
    for _ in range(count):
        row.append(sum(terms, Decimal(0)))
        terms = [term / (k * k) for k, term in enumerate(terms, 1)]
    return tuple(row)


@precisely
def gamma(x: Decimal) -> Decimal:
    """Gamma(x) for 0 < x < 40, by the series of the incomplete function up to N = 200 (DLMF 8.7.1).

    Its rest, Gamma(x, N), is below 1e-38 of Gamma(x) at the worst, x = 40, and 1e-86 at x = 1.
    """
    top = Decimal(200)
    term = total = 1 / x
    step = x
    while term > total.scaleb(-_DIGITS):
        step += 1
        term *= top / step
        total += term
    return total * (x * top.ln() - top).exp()


@precisely
def reciprocal_gamma(x: Decimal) -> Decimal:
    """1 / Gamma(x) for -7 < x < 40."""
    product = Decimal(1)
    while x <= 0:
        product *= x
        x += 1
    return product / gamma(x)


def cosine_sine(x: Decimal) -> tuple[Decimal, Decimal]:
    """Cosine and sine with the digits of the context, by Taylor's series of an angle halved eight times and more."""
    halvings = 8 + int(abs(x)).bit_length()
    small = x / 2**halvings
    square, least = -small * small, Decimal(10) ** -getcontext().prec
    cosine = even = Decimal(1)
    sine = odd = small
    k = 2
    while abs(even) > least:
        even *= square / (k * (k - 1))
        odd *= square / (k * (k + 1))
        cosine, sine, k = cosine + even, sine + odd, k + 2
    for _ in range(halvings):
        cosine, sine = cosine * cosine - sine * sine, 2 * cosine * sine
    return cosine, sine


def polynomial_value(coefficients: Sequence[Decimal], x: Decimal) -> Decimal:
    """The polynomial with these coefficients, lowest first, at x."""
    result = Decimal(0)
    for coefficient in reversed(coefficients):
        result = result * x + coefficient
    return result


@precisely
def polynomial(
    function: Callable[[Decimal], Decimal], low: float, high: float, degree: int, about: float = 0.0
) -> list[Decimal]:
    """The coefficients in x - `about` of the polynomial that meets the function at Chebyshev's nodes.

    It is Newton's form, multiplied out: unstable in doubles, exact enough with 70 digits.
    """
    middle, half = (low + high) / 2, (high - low) / 2
    count = degree + 1
    nodes = [Decimal(middle + half * math.cos(math.pi * (j + 0.5) / count)) for j in range(count)]
    column = [function(node) for node in nodes]
    for step in range(1, count):
        for j in range(count - 1, step - 1, -1):
            column[j] = (column[j] - column[j - 1]) / (nodes[j] - nodes[j - step])
    result = [Decimal(0)] * count
    for top, node in zip(reversed(column), reversed(nodes), strict=True):
        shift = Decimal(about) - node
        result = [below + shift * same for below, same in zip([top, *result[:-1]], result, strict=True)]
    return result
