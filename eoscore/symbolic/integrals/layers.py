"""A radius first, at every place of the other axes, then those: fields whose bias grows along an axis."""

from __future__ import annotations

from dataclasses import replace

import sympy as sp

from eoscore.symbolic.algebra import monomial, vanishes
from eoscore.symbolic.integrals.rule import BETA, Boltzmann, Solve, Task

__all__ = ["layers"]


def layers(task: Task, solve: Solve) -> Boltzmann | None:
    """Do the radius by the one-axis rules, with the rest as parameters; then the rest, term by term."""
    radii = [axis for axis in task.axes if axis.radius]
    if len(task.axes) != 2 or len(radii) != 1 or task.walls:
        return None
    (other,) = (axis for axis in task.axes if not axis.radius)
    stand_in = sp.Symbol(f"{other.symbol}'", positive=True)
    inner = solve(
        replace(task, function=task.function.subs(other.symbol, stand_in), axes=tuple(radii), patient=False)
    )
    if inner is None or not other.whole:
        return None
    floor, layer = inner.minimum, inner.integral
    if not vanishes(task.function.subs(other.symbol, -other.symbol) - task.function):
        return None
    least = floor.subs(stand_in, 0)
    rise = sp.expand(floor - least)
    if not rise.is_polynomial(stand_in) or not all(c.is_positive for c in sp.Poly(rise, stand_in).coeffs()):
        return None
    moments = [_moment(term, rise, stand_in, task) for term in sp.Add.make_args(sp.expand(layer))]
    if None in moments:
        return None
    step = f"then {other.symbol}, along the floor {floor.subs(stand_in, other.symbol)}"
    return replace(inner, minimum=least, integral=sp.Add(*moments), steps=(*inner.steps, step))


def _moment(term: sp.Expr, rise: sp.Expr, z: sp.Symbol, task: Task) -> sp.Expr | None:
    """Twice int_0^oo term e^{-beta rise} dz: Euler's integral for powers of z, SymPy's integrator otherwise."""
    factor, law = monomial(term, z), monomial(rise, z)
    if (factor is None or law is None) and not task.patient:
        return None
    if factor is None or law is None:
        found = 2 * sp.integrate(term * sp.exp(-BETA * rise), (z, 0, sp.oo))
        return None if found.has(sp.Integral) else found
    (size, n), (slope, s) = factor, law
    return 2 * size * sp.gamma((n + 1) / s) / (s * (BETA * slope) ** ((n + 1) / s))
