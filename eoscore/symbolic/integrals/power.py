"""c |x|^s along a line, c x^s from a wall on, c r^s about a centre."""

from __future__ import annotations

from typing import TYPE_CHECKING

import sympy as sp

from eoscore.symbolic.algebra import monomial, vanishes
from eoscore.symbolic.integrals.rule import BETA, Boltzmann, Solve, Task

if TYPE_CHECKING:
    from eoscore.symbolic.axes import Axis

__all__ = ["half", "measure_of", "power"]


def half(function: sp.Expr, axis: Axis) -> tuple[sp.Expr, sp.Symbol, sp.Expr] | None:
    """Fold an axis onto a radius: F as a function of a positive symbol, that symbol, the weight on it.

    A whole line is folded where F is even; a line with one wall starts at the wall. None where neither fits.
    """
    x, r = axis.symbol, sp.Symbol("radius'", positive=True)
    if axis.radius:
        return (function.subs(x, r), r, axis.weight.subs(x, r)) if axis.whole else None
    if axis.whole:
        even = function.subs(x, -r)
        folded = function.subs(x, r)
        return (folded, r, sp.Integer(2)) if vanishes(folded - even) else None
    if axis.high == sp.oo:
        return function.subs(x, axis.low + r), r, sp.Integer(1)
    if axis.low == -sp.oo:
        return function.subs(x, axis.high - r), r, sp.Integer(1)
    return None


def measure_of(weight: sp.Expr, r: sp.Symbol) -> tuple[sp.Expr, sp.Expr]:
    """(surface, n) with weight = surface r^{n-1}."""
    surface, less = monomial(weight, r) or (weight, sp.Integer(0))
    return surface, less + 1


def power(task: Task, solve: Solve) -> Boltzmann | None:  # noqa: ARG001 - every rule has the same signature
    """Euler's integral: int_0^oo r^{n-1} e^{-beta c r^s} dr = Gamma(n/s) / (s (beta c)^{n/s}) (DLMF 5.9.1)."""
    if len(task.axes) != 1 or task.walls:
        return None
    folded = half(task.function, task.axes[0])
    if folded is None:
        return None
    function, r, weight = folded
    constant, varying = sp.expand(function).as_independent(r, as_Add=True)
    law = monomial(varying, r)
    if law is None or not law[1].is_positive or not law[0].is_positive:
        return None
    factor, exponent = law
    surface, n = measure_of(weight, r)
    integral = (
        surface * sp.gamma(n / exponent) / exponent / sp.expand_power_base((BETA * factor) ** (n / exponent))
    )
    step = f"{task.axes[0].symbol}: power {exponent}, Euler's integral gives beta^(-{n / exponent})"
    return Boltzmann(constant, integral, (step,))
