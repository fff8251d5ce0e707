"""The quantities of `derive` as expressions in T, N and alpha, from Z1 alone."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import sympy as sp

from eoscore.symbolic.integrals.rule import BETA
from eoscore.symbolic.inverse import density_of_states
from eoscore.symbolic.partition import ALPHA, Partition

if TYPE_CHECKING:
    from collections.abc import Callable

__all__ = ["ENERGY", "K_B", "NUMBER", "QUANTITIES", "TEMPERATURE", "Model", "critical_number"]

K_B = sp.Symbol("k_B", positive=True)
TEMPERATURE = sp.Symbol("T", positive=True)
NUMBER = sp.Symbol("N", positive=True)
ENERGY = sp.Symbol("E", positive=True)


@dataclass(frozen=True)
class Model:
    """Z1 for the number (particles minus antiparticles) and for the energy (particles plus antiparticles).

    The two are the same without antiparticles. `condensed` tells which side of T_c is meant; alpha is 0 there.
    """

    number: Partition
    energy: Partition
    condensed: bool

    @property
    def alpha(self) -> sp.Expr:
        """-mu/(k_B T) on this side of the transition."""
        return sp.Integer(0) if self.condensed else ALPHA


def _hot(expression: sp.Expr) -> sp.Expr:
    """At beta = 1/(k_B T), the powers of beta gathered first."""
    heat = K_B * TEMPERATURE
    if expression.has(sp.Sum):
        return expression.subs(BETA, 1 / heat)
    gathered = sp.powsimp(sp.expand_mul(expression)) if expression.is_Mul else sp.powsimp(expression)
    powers = {power: heat**-power.exp for power in gathered.atoms(sp.Pow) if power.base == BETA}
    return gathered.xreplace(powers).subs(BETA, 1 / heat)


def critical_number(model: Model) -> sp.Expr:
    """N_c(T) = sum over l of Z1(l/(k_B T))."""
    return _hot(model.number.total(sp.Integer(0)))


def _condensate_fraction(model: Model) -> sp.Expr:
    return 1 - critical_number(model) / NUMBER if model.condensed else sp.Integer(0)


def _energy(model: Model) -> sp.Expr:
    return _hot(-model.energy.total(model.alpha, slope=1))


def _entropy(model: Model) -> sp.Expr:
    """S = (U - J - mu N)/T with J = -k_B T sum Z1(l beta) e^{-l alpha}/l."""
    pressure = model.energy.total(model.alpha, index=-1)
    energy = -BETA * model.energy.total(model.alpha, slope=1)
    return _hot(K_B * (energy + pressure + model.alpha * model.number.total(model.alpha)))


def _heat_capacity(model: Model) -> sp.Expr:
    """C_N = k_B beta^2 (Z'' sum - (Z' sum)^2 / (l Z sum)); the second part is absent in the condensed gas."""
    own = model.energy.total(model.alpha, slope=2, index=1)
    if model.condensed:
        return _hot(K_B * BETA**2 * own)
    drag = model.energy.total(model.alpha, slope=1, index=1) ** 2 / model.number.total(model.alpha, index=1)
    return _hot(K_B * BETA**2 * (own - drag))


def _density_of_states(model: Model) -> sp.Expr | None:
    """rho(E) = sum of size E^{a-1}/Gamma(a), the inverse Laplace transform of Z1 (DLMF 5.9.1)."""
    if model.number.rest != 0:
        return density_of_states(model.number.rest, ENERGY)
    return sp.Add(*(p.size * ENERGY ** (p.exponent - 1) / sp.gamma(p.exponent) for p in model.number.powers))


def _g_function(model: Model) -> sp.Expr:
    """N_ex / N_scale with N_scale = Z1(1/(k_B T)), so that g -> e^{-alpha} for large alpha."""
    return _hot(model.number.total(ALPHA) / model.number.whole)


QUANTITIES: dict[str, Callable[[Model], sp.Expr | None]] = {
    "N_c": critical_number,
    "f_0": _condensate_fraction,
    "U": _energy,
    "S": _entropy,
    "C_N": _heat_capacity,
    "rho": _density_of_states,
    "g": _g_function,
}
