"""F = 0 between walls: the volume."""

from __future__ import annotations

import sympy as sp

from eoscore.symbolic.integrals.rule import Boltzmann, Solve, Task

__all__ = ["flat"]


def flat(task: Task, solve: Solve) -> Boltzmann | None:  # noqa: ARG001 - every rule has the same signature
    """The volume of a flat floor; needs walls on every axis."""
    if task.function != 0 or task.walls or any(sp.oo in (axis.high, -axis.low) for axis in task.axes):
        return None
    volume = sp.Integer(1)
    for axis in task.axes:
        x = axis.symbol
        volume *= sp.integrate(axis.weight, (x, axis.low, axis.high))
    return Boltzmann(sp.Integer(0), volume, (f"flat floor of volume {volume}",))
