"""The coefficients of a Fermi function of one order; `fermi_function` says what they are for."""

from __future__ import annotations

import math
from dataclasses import dataclass
from decimal import Decimal
from functools import lru_cache
from itertools import pairwise
from threading import Lock
from typing import TYPE_CHECKING

from eoscore.gas.matsubara import power_part
from eoscore.gas.precise import (
    ORDERS,
    eta_row,
    moved,
    polynomial,
    polynomial_value,
    powers,
    precisely,
)

if TYPE_CHECKING:
    from collections.abc import Callable, Sequence

__all__ = ["EDGES", "SHOULDER", "FermiTable", "fermi_table"]

EDGES = (0.0, 2.0, 4.5, 9.0, 17.0, 32.0)
"""Where the panels meet: each is about as wide as its lower end is far from the poles +-i pi."""
SHOULDER = (-4.5, -1.75, -0.5)
"""The same for the orders that change sign at eta < 0."""
_LOCK = Lock()

Coefficients = tuple[float, ...]


@dataclass(frozen=True)
class FermiTable:
    """The coefficients of one order, lowest first."""

    order: float
    centre: float
    """c of v = z / (c + z)."""
    below: Coefficients
    """Q(v) in F = z - z v Q(v), z = e^eta."""
    shoulder: tuple[tuple[float, Coefficients], ...]
    """F as polynomials in eta - origin, one for each pair of `SHOULDER`: orders below -1/2, which change sign."""
    middle: Coefficients
    """F for |eta| < 1/2, Taylor's series, for the same orders."""
    mirror: float
    """-cos(pi s): the share of the mirror image F(-eta) for eta > 0."""
    whole: Coefficients
    """Y / eta^(s % 2) as a polynomial in eta^2, for whole orders."""
    panels: tuple[tuple[float, Coefficients], ...]
    """Y as polynomials in eta - origin, one for each pair of `EDGES`."""
    far: Coefficients
    """Y / eta^s as a polynomial in 1 / eta^2, beyond the last edge."""


@lru_cache(maxsize=512)
def fermi_table(s: float) -> FermiTable:
    """The table of an order, made once: some 10 ms, and 60 ms for orders that are not whole."""
    with _LOCK:
        return _make(s)


@precisely
def _make(s: float) -> FermiTable:
    taylor = [value / math.factorial(k) for k, value in enumerate(eta_row(moved(s)))]
    is_whole, turns = s == round(s), s < -0.5
    if is_whole and s <= 0:
        # eta(-2), eta(-4) ... are zero: what the shift of the order left of them is dropped.
        taylor = [value if abs(value) > Decimal("1e-19") else Decimal(0) for value in taylor]
    alternating = [(-1) ** k * power for k, power in enumerate(powers(moved(s)))]

    def at(eta: Decimal) -> Decimal:
        z = eta.exp()
        return z * polynomial_value(alternating, z) if z < Decimal("0.5") else polynomial_value(taylor, eta)

    shoulder = _pieces(at, SHOULDER, 20 - math.floor(2 * s)) if turns else ()
    centre, below = _below(alternating, SHOULDER[0] if turns else 0.0, taylor)
    panels, far = ((), ()) if is_whole else _panels(s)
    middle = _rounded(taylor[:32]) if turns else ()
    whole = _whole(round(s)) if is_whole else ()
    return FermiTable(s, centre, below, shoulder, middle, _mirror(s), whole, panels, far)


def _pieces(
    function: Callable[[Decimal], Decimal], edges: Sequence[float], degree: int, *, low_end: bool = False
) -> tuple[tuple[float, Coefficients], ...]:
    """The polynomials of the function between neighbouring edges, about the middle or the low end."""
    pieces = []
    for low, high in pairwise(edges):
        origin = low if low_end else (low + high) / 2
        pieces.append((origin, _rounded(polynomial(function, low, high, degree, origin))))
    return tuple(pieces)


def _rounded(coefficients: list[Decimal]) -> Coefficients:
    return tuple(map(float, coefficients))


def _mirror(s: float) -> float:
    """-cos(pi s), exact at whole and half orders."""
    off = s - round(s)
    return 0.0 if abs(off) == 0.5 else math.cos(math.pi * off) * (1.0 if round(s) % 2 else -1.0)


def _below(alternating: list[Decimal], low: float, taylor: list[Decimal]) -> tuple[float, Coefficients]:
    edge = math.exp(low)
    centre = 1.0 + math.sqrt(1.0 + edge)
    tail = [-value for value in alternating[1:]]

    def rest(v: Decimal) -> Decimal:
        z = Decimal(centre) * v / (1 - v)
        near = z > Decimal("0.5")
        quotient = (1 - polynomial_value(taylor, z.ln()) / z) / z if near else polynomial_value(tail, z)
        return (Decimal(centre) + z) * quotient

    return centre, _rounded(polynomial(rest, 0.0, edge / (centre + edge), 15))


def _whole(n: int) -> Coefficients:
    row = [value * 2 for value in eta_row(Decimal(ORDERS - 1) + moved(0.0))][::-1]
    found = [row[n - k] / math.factorial(k) for k in range(n % 2, n + 1, 2)] if n >= 0 else []
    return _rounded(found)


def _panels(s: float) -> tuple[tuple[tuple[float, Coefficients], ...], Coefficients]:
    order = Decimal(s)
    part = power_part(order)
    # Few degrees, so that orders share their nodes and the logarithms there.
    degree = 20 if 0 < s < 3 else 26 if -3 < s < 15 else 32
    # Above 1 all derivatives that count are positive: about the low end nothing cancels.
    panels = _pieces(part, EDGES, degree, low_end=s > 1)

    def relative(x: Decimal) -> Decimal:
        eta = 1 / x.sqrt()
        return part(eta) * (-order * eta.ln()).exp()

    return panels, _rounded(polynomial(relative, 0.0, EDGES[-1] ** -2, degree - 4))
