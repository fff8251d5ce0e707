"""Quadratic forms, shifted and rotated: completing the square."""

from __future__ import annotations

import sympy as sp

from eoscore.symbolic.integrals.rule import BETA, Boltzmann, Solve, Task

__all__ = ["quadratic"]


def quadratic(task: Task, solve: Solve) -> Boltzmann | None:  # noqa: ARG001 - every rule has the same signature
    """Gaussian integral: (2 pi / beta)^{d/2} / sqrt(det H), least value c - b.H^-1.b / 2."""
    symbols = [axis.symbol for axis in task.axes]
    if task.walls or any(axis.radius or not axis.whole for axis in task.axes):
        return None
    if not task.function.is_polynomial(*symbols) or sp.Poly(task.function, *symbols).total_degree() != 2:
        return None
    hessian = sp.hessian(task.function, symbols)
    determinant = sp.factor(hessian.det())
    if determinant == 0:
        return None
    at_zero = dict.fromkeys(symbols, 0)
    slope = sp.Matrix([sp.diff(task.function, symbol).subs(at_zero) for symbol in symbols])
    least = task.function.subs(at_zero) - (slope.T * hessian.LUsolve(slope))[0] / 2
    integral = (2 * sp.pi / BETA) ** sp.Rational(len(symbols), 2) / sp.sqrt(determinant)
    conditions = () if determinant.is_positive else (sp.Gt(sp.fraction(determinant)[0], 0),)
    names = ", ".join(map(str, symbols))
    step = f"quadratic in {names}: the Gaussian integral (2 pi/beta)^({len(symbols)}/2)/sqrt(det), det = {determinant}"
    return Boltzmann(least, integral, (step,), conditions)
