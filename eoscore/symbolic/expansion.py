"""Leading terms of an implicit T_c, at both ends of its range."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import sympy as sp

from eoscore.symbolic.band_limit import above_band
from eoscore.symbolic.critical import explicit, number_of
from eoscore.symbolic.partition import Power, partition_of
from eoscore.symbolic.quantities import K_B, TEMPERATURE
from eoscore.symbolic.scaled import ScaledI, ScaledK, scaled

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

__all__ = ["Expansion", "cold_exponent", "expansions", "walked"]

_ORDER = 5  # terms of an exponential: two of a product are wanted, of which the first may cancel


@dataclass(frozen=True)
class Expansion:
    """T_c = `leading` (1 + `correction`), good where `small` is; both in N and the file's symbols."""

    limit: str
    leading: sp.Expr
    correction: sp.Expr
    small: sp.Expr

    @staticmethod
    def reach(
        walk: Sequence[tuple[float, float]],
        written: tuple[sp.Expr, sp.Expr],
        total: sp.Symbol,
        here: Mapping[sp.Symbol, float],
    ) -> float | None:
        """The largest `small` at which the two terms are within 1 % of the root; None where nowhere.

        walk: pairs of T in K and N_c(T), so that T is the exact answer for that N. written: T_c and `small`.
        """
        whole, small = (number_of(part, here, total) for part in written)
        best = None
        for temperature, number in walk:
            size = small(number)
            if abs(whole(number) / temperature - 1) < 0.01 and (best is None or size > best):
                best = size
        return best


def walked(count: sp.Expr, here: Mapping[sp.Symbol, float]) -> list[tuple[float, float]]:
    """T in K and N_c(T), four decades to either side of the temperature in `here`."""
    at = number_of(count, here)
    steps = (here[TEMPERATURE] * 10.0 ** (step / 4) for step in range(-16, 17))
    return [(temperature, number) for temperature in steps if (number := at(temperature)) > 0]


def expansions(whole: sp.Expr) -> list[Expansion]:
    """Both ends: high temperature (beta -> 0) and low (beta -> oo), where two powers of beta lead."""
    found = []
    for limit, powers in (("high temperature", _hot(whole)), ("low temperature", _cold(whole))):
        if len(powers) >= 2 and (powers[0].exponent - 1).is_positive:
            found.append(_expansion(limit, *powers[:2]))
    if (terms := above_band(whole)) is not None:
        found.append(Expansion("high temperature, far above the band", *terms, sp.Abs(terms[1])))
    return found


def cold_exponent(whole: sp.Expr) -> sp.Expr | None:
    """a with Z1 ~ beta^-a for beta -> oo; None where it falls faster than any power."""
    powers = _cold(whole)
    return powers[0].exponent if powers else None


def _expansion(limit: str, first: Power, second: Power) -> Expansion:
    """One Newton step from the leading power; the next power must itself have a converging sum (a > 1)."""
    leading = explicit(first)
    ratio = sp.powsimp(second.size / first.size) * (K_B * leading) ** (second.exponent - first.exponent)
    weight = sp.zeta(second.exponent) / (first.exponent * sp.zeta(first.exponent))
    correction = -weight * ratio if (second.exponent - 1).is_positive else sp.Integer(0)
    return Expansion(limit, leading, correction, sp.Abs(ratio))


def _hot(whole: sp.Expr) -> list[Power]:
    """Leading powers for beta -> 0, largest exponent first; Bessel K by DLMF 10.31.1, I by 10.25.2."""
    near = scaled(whole).replace(ScaledK, lambda n, _, x: sp.exp(x) * _small_k(n, x))
    near = near.replace(ScaledI, lambda n, _, x: sp.exp(-x) * (x / 2) ** n / sp.gamma(n + 1))
    near = near.replace(_is_ladder, lambda f: _short_ladder(-(1 - f.base).exp))
    near = near.replace(sp.exp, lambda y: sp.Add(*(y**k / sp.factorial(k) for k in range(_ORDER))))
    powers = partition_of(sp.expand(near), 1).powers
    return sorted(powers, key=lambda power: -float(power.exponent))


def _short_ladder(y: sp.Expr) -> sp.Expr:
    """1/(1 - e^-y), the first of Bernoulli's terms (DLMF 24.2.1)."""
    return 1 / y + sp.Rational(1, 2) + y / 12


def _small_k(order: sp.Expr, x: sp.Expr) -> sp.Expr:
    """Leading terms without a logarithm: K_1 -> 1/x, K_2 -> 2/x^2 - 1/2."""
    lead = sp.gamma(order) / 2 * (2 / x) ** order
    return lead - sp.gamma(order - 1) / 2 * (2 / x) ** (order - 2) / 2 if (order - 1).is_positive else lead


def _cold(whole: sp.Expr) -> list[Power]:
    """Leading powers for beta -> oo, smallest exponent first (DLMF 10.40.1, 10.40.2)."""
    far = scaled(whole).replace(ScaledK, lambda n, _, x: _large(n, x, 1) * sp.sqrt(sp.pi / (2 * x)))
    far = far.replace(ScaledI, lambda n, _, x: _large(n, x, -1) / sp.sqrt(2 * sp.pi * x))
    far = far.replace(_is_ladder, lambda _: sp.Integer(1))
    terms = [
        sp.powsimp(term, combine="exp")
        for term in sp.Add.make_args(sp.expand(sp.powsimp(far, combine="exp")))
    ]
    kept = [term for term in terms if not term.has(sp.exp)]
    left = sp.Add(*kept)
    powers = partition_of(left, 1).powers if left != 0 else ()
    return sorted(powers, key=lambda power: float(power.exponent))


def _is_ladder(expression: sp.Expr) -> bool:
    """1/(1 - exp(-beta ...)): at low temperature only the lowest level is left."""
    if not (isinstance(expression, sp.Pow) and expression.exp.is_negative):
        return False
    fall = 1 - expression.base
    return isinstance(fall, sp.exp) and bool(fall.exp.is_negative)


def _large(order: sp.Expr, x: sp.Expr, sign: int) -> sp.Expr:
    """1 +- (4 n^2 - 1)/(8 x)."""
    return 1 + sign * (4 * order**2 - 1) / (8 * x)
