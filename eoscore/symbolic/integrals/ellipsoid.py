"""F depends on some axes only through one quadratic form: they become a single radius."""

from __future__ import annotations

from dataclasses import replace

import sympy as sp

from eoscore.symbolic.algebra import constant_in
from eoscore.symbolic.axes import Axis, with_walls
from eoscore.symbolic.integrals.rule import Boltzmann, Solve, Task, symbols_of

__all__ = ["ellipsoid"]


def _stretch(function: sp.Expr, x: sp.Symbol, y: sp.Symbol, all_symbols: set[sp.Symbol]) -> sp.Expr | None:
    """q > 0 with F a function of x^2 + q y^2, from (F_y/y)/(F_x/x) = q; None where that is not constant."""
    slope = sp.diff(function, x) / x
    if slope == 0:
        return None
    ratio = constant_in(sp.diff(function, y) / y / slope, all_symbols)
    return ratio if ratio is not None and ratio.is_positive else None


def ellipsoid(task: Task, solve: Solve) -> Boltzmann | None:
    """Group whole axes that share a quadratic form; the Jacobian is prod q_i^{-d_i/2}."""
    symbols = symbols_of(task)
    whole = [axis for axis in task.axes if axis.whole]
    for lead in whole:
        stretches = {}
        for other in whole:
            if other is lead:
                continue
            found = {_stretch(f, lead.symbol, other.symbol, symbols) for f in _forms(task, lead, other)}
            if len(found) == 1 and None not in found:
                stretches[other] = found.pop()
        if stretches:
            return _grouped(task, lead, stretches, solve)
    return None


def _forms(task: Task, lead: Axis, other: Axis) -> list[sp.Expr]:
    pair = {lead.symbol, other.symbol}
    return [f for f in (task.function, *task.walls) if f.free_symbols & pair]


def _grouped(task: Task, lead: Axis, stretches: dict[Axis, sp.Expr], solve: Solve) -> Boltzmann | None:
    dimension = lead.dimension + sum(axis.dimension for axis in stretches)
    jacobian = sp.Mul(*(q ** sp.Rational(-axis.dimension, 2) for axis, q in stretches.items()))
    r = sp.Symbol(f"{lead.symbol}'", positive=True)
    to_radius = {lead.symbol: r} | {axis.symbol: sp.Integer(0) for axis in stretches}
    radius = Axis(r, sp.Integer(0), sp.oo, dimension, radius=True)
    rest = tuple(axis for axis in task.axes if axis is not lead and axis not in stretches)
    axes, walls = with_walls((radius, *rest), [wall.subs(to_radius) for wall in task.walls])
    inner = solve(replace(task, function=task.function.subs(to_radius), axes=axes, walls=walls))
    if inner is None:
        return None
    names = ", ".join(str(axis.symbol) for axis in (lead, *stretches))
    step = (
        f"{names} enter through one quadratic form: a radius in {dimension} dimensions, Jacobian {jacobian}"
    )
    return replace(inner, integral=jacobian * inner.integral, steps=(step, *inner.steps))
