"""A radius first, at every place of the other axes, then those: fields whose bias grows along an axis."""

from __future__ import annotations

from dataclasses import replace

import sympy as sp

from eoscore.symbolic.integrals.rule import BETA, Boltzmann, Solve, Task

__all__ = ["layers"]


def layers(task: Task, solve: Solve) -> Boltzmann | None:
    """Do the radius by the one-axis rules, with the rest as parameters; then the rest, term by term."""
    radii = [axis for axis in task.axes if axis.radius]
    if len(task.axes) != 2 or len(radii) != 1 or task.walls:
        return None
    (other,) = (axis for axis in task.axes if not axis.radius)
    stand_in = sp.Symbol(f"{other.symbol}_", positive=True)
    inner = solve(replace(task, function=task.function.subs(other.symbol, stand_in), axes=tuple(radii)))
    if inner is None or not other.whole:
        return None
    floor, layer = inner.minimum, inner.integral
    if sp.simplify(task.function.subs(other.symbol, -other.symbol) - task.function) != 0:
        return None
    least = floor.subs(stand_in, 0)
    rise = sp.expand(sp.simplify(floor - least))
    if not rise.is_polynomial(stand_in) or not all(c.is_positive for c in sp.Poly(rise, stand_in).coeffs()):
        return None
    terms = sp.Add.make_args(sp.expand(sp.simplify(layer)))
    integral = sp.Add(*(2 * sp.integrate(t * sp.exp(-BETA * rise), (stand_in, 0, sp.oo)) for t in terms))
    if integral.has(sp.Integral):
        return None
    step = f"then {other.symbol}, along the floor {floor.subs(stand_in, other.symbol)}"
    return replace(inner, minimum=least, integral=sp.simplify(integral), steps=(*inner.steps, step))
