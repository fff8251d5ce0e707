"""Z1(beta) as a sum of terms, and the sums over l = 1, 2, ... that every quantity is made of."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import sympy as sp

from eoscore.symbolic.algebra import monomial
from eoscore.symbolic.integrals.rule import BETA

if TYPE_CHECKING:
    from collections.abc import Mapping

__all__ = ["ALPHA", "INDEX", "Partition", "Power", "partition_of"]

ALPHA = sp.Symbol("alpha", nonnegative=True)  # -mu/(k_B T)
INDEX = sp.Symbol("l", integer=True, positive=True)


@dataclass(frozen=True)
class Power:
    """`size * beta^-exponent`."""

    size: sp.Expr
    exponent: sp.Expr

    def at(self, beta: sp.Expr) -> sp.Expr:
        """Its value."""
        return self.size * beta**-self.exponent


@dataclass(frozen=True)
class Partition:
    """Z1 = sum of powers + `rest`; exactly one of the two is empty.

    `sign` is 1 for bosons, -1 for fermions, 0 for classical particles.
    """

    powers: tuple[Power, ...]
    rest: sp.Expr
    sign: int = 1

    @property
    def whole(self) -> sp.Expr:
        """Z1 as one expression in `BETA`."""
        return sp.Add(self.rest, *(power.at(BETA) for power in self.powers))

    @property
    def single(self) -> Power | None:
        """The one power it is, if it is one."""
        return self.powers[0] if len(self.powers) == 1 and self.rest == 0 else None

    def diverges(self, values: Mapping[str, float]) -> sp.Expr | None:
        """The exponent a <= 1 that forbids condensation, if there is one."""
        fixed = {symbol: values[symbol.name] for p in self.powers for symbol in p.exponent.free_symbols}
        return next((p.exponent for p in self.powers if float(p.exponent.subs(fixed)) <= 1), None)

    def total(self, alpha: sp.Expr, *, slope: int = 0, index: int = 0) -> sp.Expr:
        """sum over l of (+-1)^{l+1} e^{-l alpha} l^index (d/dbeta)^slope Z1 at l beta.

        With index = 0, slope = 0 it is N_ex; U = -total(slope=1); -J/(k_B T) = total(index=-1).
        """
        parts = [self._of_power(power, alpha, slope, index) for power in self.powers]
        if self.rest != 0:
            term = sp.diff(self.rest, BETA, slope).subs(BETA, INDEX * BETA) * INDEX**index
            parts.append(self._sum(term * sp.exp(-INDEX * alpha)))
        return sp.Add(*parts)

    def _of_power(self, power: Power, alpha: sp.Expr, slope: int, index: int) -> sp.Expr:
        a = power.exponent
        size = power.size * (-1) ** slope * sp.rf(a, slope) * BETA ** -(a + slope)
        return size * self.function(a + slope - index, alpha)

    def function(self, order: sp.Expr, alpha: sp.Expr) -> sp.Expr:
        """g_order(e^-alpha), f_order or e^-alpha, by the statistics (DLMF 25.12.10)."""
        if self.sign == 0:
            return sp.exp(-alpha)
        if alpha == 0 and self.sign == 1:
            return sp.zeta(order)
        return self.sign * sp.polylog(order, self.sign * sp.exp(-alpha))

    def _sum(self, term: sp.Expr) -> sp.Expr:
        if self.sign == 0:
            return term.subs(INDEX, 1)
        sign = 1 if self.sign == 1 else (-1) ** (INDEX + 1)
        return sp.Sum(sign * term, (INDEX, 1, sp.oo))


def partition_of(whole: sp.Expr, sign: int) -> Partition:
    """Take an expression in `BETA` apart into powers where it is a sum of them."""
    powers: dict[sp.Expr, sp.Expr] = {}
    for term in (whole,) if monomial(whole, BETA) else sp.Add.make_args(sp.expand(whole)):
        law = monomial(term, BETA)
        if law is None:
            return Partition((), whole, sign)
        powers[-law[1]] = powers.get(-law[1], sp.Integer(0)) + law[0]
    ordered = sorted(powers.items(), key=lambda item: sp.default_sort_key(item[0]), reverse=True)
    return Partition(
        tuple(Power(sp.factor(size) if size.is_Add else size, exponent) for exponent, size in ordered),
        sp.Integer(0),
        sign,
    )
