"""F = c W^e where W itself has a power law: (|x|^p + |y|^q)^e."""

from __future__ import annotations

from dataclasses import replace

import sympy as sp

from eoscore.symbolic.algebra import monomial
from eoscore.symbolic.integrals.rule import BETA, Boltzmann, Solve, Task, symbols_of

__all__ = ["power_of_sum"]


def power_of_sum(task: Task, solve: Solve) -> Boltzmann | None:
    """Omega_W = C w^k gives the integral C Gamma(k/e + 1) (beta c)^{-k/e}."""
    factor, inner = task.function.as_independent(*symbols_of(task), as_Add=False)
    if (
        not isinstance(inner, sp.Pow)
        or inner.exp.free_symbols & symbols_of(task)
        or not inner.exp.is_positive
    ):
        return None
    base = solve(replace(task, function=sp.expand(inner.base), patient=False))
    if base is None or base.minimum != 0 or not factor.is_positive:
        return None
    law = monomial(base.integral, BETA)
    if law is None:
        return None
    k = -law[1]
    size = law[0] / sp.gamma(k + 1)
    integral = size * sp.gamma(k / inner.exp + 1) * (BETA * factor) ** (-k / inner.exp)
    return replace(base, integral=integral, steps=(*base.steps, f"raised to the power {inner.exp}"))
