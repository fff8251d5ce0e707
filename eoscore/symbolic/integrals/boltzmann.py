"""The rules in their order, and the way through them."""

from __future__ import annotations

from dataclasses import replace

import sympy as sp

from eoscore.symbolic.axes import with_walls
from eoscore.symbolic.integrals.band import band
from eoscore.symbolic.integrals.by_sympy import by_sympy
from eoscore.symbolic.integrals.cone import cone
from eoscore.symbolic.integrals.ellipsoid import ellipsoid
from eoscore.symbolic.integrals.flat import flat
from eoscore.symbolic.integrals.homogeneous import homogeneous
from eoscore.symbolic.integrals.hyperbola import hyperbola
from eoscore.symbolic.integrals.layers import layers
from eoscore.symbolic.integrals.power import power
from eoscore.symbolic.integrals.power_of_sum import power_of_sum
from eoscore.symbolic.integrals.product import product
from eoscore.symbolic.integrals.quadratic import quadratic
from eoscore.symbolic.integrals.rule import Boltzmann, Rule, Solve, Task, integral_in_words, symbols_of

__all__ = ["Boltzmann", "StopError", "boltzmann"]

RULES: tuple[Rule, ...] = (
    flat,
    product,
    quadratic,
    power,
    hyperbola,
    band,
    ellipsoid,
    cone,
    power_of_sum,
    layers,
    by_sympy,
    homogeneous,
)


class StopError(Exception):
    """No rule does this integral; the sentence names it."""

    def __init__(self, task: Task) -> None:
        self.task = task
        super().__init__(f"no closed form was found for {integral_in_words(task)}")


def boltzmann(task: Task) -> Boltzmann:
    """The Boltzmann integral of a task, by the first rule that can.

    Raises `StopError` where none can; it names the innermost integral that was in the way.
    """
    axes, walls = with_walls(task.axes, task.walls)
    stuck: list[Task] = []

    def solve(part: Task) -> Boltzmann | None:
        done = _by_rules(part, solve)
        if done is None and part.patient:
            stuck.append(part)
        return done

    done = solve(replace(task, axes=axes, walls=walls))
    if done is None:
        raise StopError(min(stuck, key=lambda part: len(part.axes)))
    return done


def _by_rules(task: Task, solve: Solve) -> Boltzmann | None:
    constant, varying = sp.expand(task.function).as_independent(*symbols_of(task), as_Add=True)
    inner = replace(task, function=varying)
    for rule in RULES:
        done = _tried(rule, inner, solve)
        if done is not None:
            return replace(done, minimum=done.minimum + constant)
    return None


def _tried(rule: Rule, task: Task, solve: Solve) -> Boltzmann | None:
    try:
        return rule(task, solve)
    except Exception:  # noqa: BLE001 - SymPy's inner works may raise anything, and another rule may do it
        return None
