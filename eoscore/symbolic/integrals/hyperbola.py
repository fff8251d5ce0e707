"""sqrt(a + e r^2): relativistic energies and fields with a bias."""

from __future__ import annotations

import sympy as sp

from eoscore.symbolic.integrals.power import half, measure_of
from eoscore.symbolic.integrals.rule import BETA, Boltzmann, Solve, Task
from eoscore.symbolic.scaled import ScaledK

__all__ = ["hyperbola"]


def _scaled_k(order: sp.Expr, z: sp.Expr) -> list[sp.Expr]:
    """The terms of e^z K_order(z), powers for half an odd number (DLMF 10.49.12)."""
    n = order - sp.Rational(1, 2)
    if not n.is_integer:
        return [ScaledK(order, 0, z)]
    lead = sp.sqrt(sp.pi / (2 * z))
    weights = (sp.factorial(n + j) / (sp.factorial(j) * sp.factorial(n - j)) for j in range(int(n) + 1))
    return [lead * weight / (2 * z) ** j for j, weight in enumerate(weights)]


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
    a, e = square.subs(r, 0), sp.factor_terms(sp.diff(square, r, 2) / 2)
    if not (a.is_positive and e.is_positive):
        return None
    surface, n = measure_of(weight, r)
    rest = sp.sqrt(sp.factor(a))
    z = BETA * rest
    nu = (n + 1) / 2
    moment = z / n * sp.gamma(nu + sp.Rational(1, 2)) / sp.sqrt(sp.pi) * (2 / z) ** nu
    size = surface * (sp.factor(a) / e) ** (n / 2) * moment
    # Term by term, so that powers of a + ... cancel before anything is expanded.
    integral = sp.Add(*(size * term for term in _scaled_k(nu, z)))
    step = f"{task.axes[0].symbol}: sqrt(a + e r^2), r = sqrt(a/e) sinh(t), Bessel K of order {nu}"
    return Boltzmann(constant + rest, integral, (step,))
