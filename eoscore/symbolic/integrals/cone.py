"""A tilted cone, sqrt(x.A.x) + f.x: its level surfaces are ellipsoids with the tip in a focus."""

from __future__ import annotations

import sympy as sp

from eoscore.symbolic.axes import sphere
from eoscore.symbolic.integrals.rule import BETA, Boltzmann, Solve, Task

__all__ = ["cone"]


def _root_of(square: sp.Expr) -> sp.Expr:
    """The root of a perfect square, and any other expression as it is: both are below 1 together."""
    root = sp.sqrt(square)
    return square if any(power.exp == sp.Rational(1, 2) for power in root.atoms(sp.Pow)) else root


def cone(task: Task, solve: Solve) -> Boltzmann | None:  # noqa: ARG001 - every rule has the same signature
    """Gamma(d + 1) Omega(1) beta^-d, Omega(1) = V_d (1 - f.A^-1.f)^{-(d+1)/2} / sqrt(det A); needs f.A^-1.f < 1.

    |y| < 1 - g.y is an ellipsoid of revolution with eccentricity |g|, semi-axes 1/(1-g^2) and 1/sqrt(1-g^2).
    """
    if task.walls or not all(axis.whole for axis in task.axes):
        return None
    symbols = [axis.symbol for axis in task.axes]
    mirrored = task.function.subs({s: -s for s in symbols}, simultaneous=True)
    odd = sp.expand((task.function - mirrored) / 2)
    if odd == 0 or not odd.is_polynomial(*symbols) or sp.Poly(odd, *symbols).total_degree() != 1:
        return None
    square = sp.expand((task.function - odd) ** 2)
    if not square.is_polynomial(*symbols) or sp.Poly(square, *symbols).homogeneous_order() != 2:
        return None
    form = sp.hessian(square, symbols) / 2
    tilt = sp.Matrix([sp.diff(odd, s) for s in symbols])
    radii = [i for i, axis in enumerate(task.axes) if axis.radius]
    if any(tilt[i] != 0 or any(form[i, j] != 0 for j in range(len(symbols)) if i != j) for i in radii):
        return None
    d = sum(axis.dimension for axis in task.axes)
    # A radius stands for several directions, so its entry counts that often in the determinant.
    determinant = sp.factor(form.det()) * sp.Mul(
        *(form[i, i] ** (a.dimension - 1) for i, a in enumerate(task.axes))
    )
    steepness = sp.factor((tilt.T * form.LUsolve(tilt))[0])
    volume = sphere(d) / d * (1 - steepness) ** sp.Rational(-(d + 1), 2) / sp.sqrt(determinant)
    condition = sp.Lt(*sp.fraction(_root_of(steepness)))
    step = (
        f"a tilted cone: level surfaces are ellipsoids with the tip in a focus, eccentricity^2 = {steepness}"
    )
    return Boltzmann(sp.Integer(0), sp.gamma(d + 1) * volume * BETA**-d, (step,), (condition,))
