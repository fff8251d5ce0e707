"""The density of states behind a Z1 that holds a Bessel function: the inverse Laplace transform in closed form."""

from __future__ import annotations

import sympy as sp

from eoscore.symbolic.algebra import monomial
from eoscore.symbolic.integrals.rule import BETA
from eoscore.symbolic.scaled import ScaledK, scaled

__all__ = ["density_of_states"]


def density_of_states(whole: sp.Expr, energy: sp.Symbol) -> sp.Expr | None:
    """rho(E) with Z1 = int_0^oo rho(E) e^{-beta E} dE; None where a term has no closed form here."""
    expanded = sp.expand(scaled(whole))
    terms = [_of_term(term, energy) for term in sp.Add.make_args(expanded)]
    return None if None in terms else sp.factor_terms(sp.Add(*terms))


def _of_term(term: sp.Expr, energy: sp.Symbol) -> sp.Expr | None:
    """size beta^{n - nu} e^z K_nu(z), z = a beta, by DLMF 10.32.8 with t = 1 + E/a; n derivatives d/dE for beta^n."""
    functions = term.atoms(ScaledK)
    if not functions:
        law = monomial(term, BETA)
        return None if law is None else law[0] * energy ** (-law[1] - 1) / sp.gamma(-law[1])
    if len(functions) > 1:
        return None
    (bessel,) = functions
    order, slope, argument = bessel.args
    law, rate = monomial(sp.cancel(term / bessel), BETA), sp.cancel(argument / BETA)
    if law is None or slope != 0 or BETA in rate.free_symbols:
        return None
    n = law[1] + order
    # Every derivative taken must itself start from 0, or delta functions would be lost.
    if not (n.is_integer and n.is_nonnegative and (order - n + sp.Rational(1, 2)).is_positive):
        return None
    shape = (energy * (energy + 2 * rate)) ** (order - sp.Rational(1, 2))
    size = law[0] * sp.sqrt(sp.pi) / (sp.gamma(order + sp.Rational(1, 2)) * (2 * rate) ** order)
    return sp.factor(size * sp.diff(shape, energy, int(n)))
