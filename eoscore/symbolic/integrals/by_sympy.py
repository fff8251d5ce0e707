"""One axis left to SymPy's own integrator."""

from __future__ import annotations

import sympy as sp

from eoscore.symbolic.deadline import OutOfTimeError
from eoscore.symbolic.integrals.power import half
from eoscore.symbolic.integrals.rule import BETA, Boltzmann, Solve, Task, integral_in_words

__all__ = ["by_sympy"]


def by_sympy(task: Task, solve: Solve) -> Boltzmann | None:  # noqa: ARG001 - every rule has the same signature
    """int weight e^{-beta F} by `sympy.integrate`, where F grows from the foot of the axis on."""
    if len(task.axes) != 1 or task.walls or not task.patient:
        return None
    folded = half(task.function, task.axes[0])
    if folded is None:
        return None
    function, r, weight = folded
    least = sp.limit(function, r, 0, "+")
    if not least.is_finite or not sp.diff(function, r).is_positive:
        return None
    try:
        integral = sp.integrate(weight * sp.exp(-BETA * sp.expand(function - least)), (r, 0, sp.oo))
    except OutOfTimeError:
        raise OutOfTimeError(integral_in_words(task)) from None
    if integral.has(sp.Integral, sp.Piecewise, sp.nan, sp.oo):
        return None
    return Boltzmann(least, integral, (f"{task.axes[0].symbol}: integrated by SymPy",))
