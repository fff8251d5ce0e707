"""F = F1(x) + F2(y, z): the integral is a product."""

from __future__ import annotations

from dataclasses import replace

import sympy as sp

from eoscore.symbolic.integrals.rule import Boltzmann, Solve, Task, symbols_of

__all__ = ["product"]


def _blocks(task: Task) -> list[set[sp.Symbol]]:
    """Sets of axes that no term and no wall ties together."""
    ties = [*sp.Add.make_args(task.function), *task.walls]
    blocks = [{symbol} for symbol in symbols_of(task)]
    for tie in ties:
        joined = [block for block in blocks if block & tie.free_symbols]
        if len(joined) > 1:
            blocks = [block for block in blocks if block not in joined] + [set().union(*joined)]
    return blocks


def product(task: Task, solve: Solve) -> Boltzmann | None:
    """One integral for each set of axes that the others do not touch."""
    blocks = _blocks(task)
    if len(blocks) < 2:
        return None
    done = []
    for block in sorted(blocks, key=str):
        inside = [term for term in sp.Add.make_args(task.function) if term.free_symbols & block]
        walls = tuple(wall for wall in task.walls if wall.free_symbols & block)
        axes = tuple(axis for axis in task.axes if axis.symbol in block)
        part = solve(replace(task, function=sp.Add(*inside), axes=axes, walls=walls))
        if part is None:
            return None
        done.append(part)
    return Boltzmann(
        sp.Add(*(part.minimum for part in done)),
        sp.Mul(*(part.integral for part in done)),
        tuple(step for part in done for step in part.steps),
        tuple(condition for part in done for condition in part.conditions),
        tuple(constant for part in done for constant in part.constants),
    )
