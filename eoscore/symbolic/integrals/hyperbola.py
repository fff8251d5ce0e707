"""sqrt(a + e r^2): relativistic energies and fields with a bias."""

from __future__ import annotations

import sympy as sp

from eoscore.symbolic.integrals.power import half
from eoscore.symbolic.integrals.rule import BETA, Boltzmann, Solve, Task

__all__ = ["hyperbola"]


def hyperbola(task: Task, solve: Solve) -> Boltzmann | None:  # noqa: ARG001 - every rule has the same signature
    """Bessel K by r = sqrt(a/e) sinh(t) and DLMF 10.32.8; elementary where its order is half an odd number."""
    if len(task.axes) != 1 or task.walls:
        return None
    folded = half(task.function, task.axes[0])
    if folded is None:
        return None
    function, r, weight = folded
    constant, varying = sp.expand(function).as_independent(r, as_Add=True)
    square = sp.expand(sp.expand(varying**2, force=True))
    if not square.is_polynomial(r) or sp.Poly(square, r).degree() != 2 or sp.diff(square, r).subs(r, 0) != 0:
        return None
    a, e = square.subs(r, 0), sp.simplify(sp.diff(square, r, 2) / 2)
    if not (a.is_positive and e.is_positive):
        return None
    n = sp.simplify(1 + r * sp.diff(weight, r) / weight)
    surface = sp.simplify(weight / r ** (n - 1))
    rest = sp.sqrt(sp.factor(a))
    z = BETA * rest
    nu = (n + 1) / 2
    bessel = sp.expand_func(sp.besselk(nu, z)) if nu.is_integer is False else sp.besselk(nu, z)
    moment = z / n * sp.gamma(nu + sp.Rational(1, 2)) / sp.sqrt(sp.pi) * (2 / z) ** nu * bessel
    integral = surface * (sp.factor(a) / e) ** (n / 2) * moment * sp.exp(z)
    if nu.is_integer is False:
        integral = sp.expand(sp.simplify(integral))
    step = f"{task.axes[0].symbol}: sqrt(a + e r^2), r = sqrt(a/e) sinh(t), Bessel K of order {nu}"
    return Boltzmann(constant + rest, integral, (step,))
