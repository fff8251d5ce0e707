"""What a rule for a Boltzmann integral receives and gives back."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from typing import TYPE_CHECKING, Protocol

import sympy as sp

if TYPE_CHECKING:
    from eoscore.symbolic.axes import Axis

__all__ = ["BETA", "Boltzmann", "Constant", "Rule", "Solve", "Task", "integral_in_words", "symbols_of"]

# 1/(k_B T), in 1/J. The prime of this and other names made here is a sign that no name of a file can have.
BETA = sp.Symbol("beta'", positive=True)


Constant = tuple[sp.Symbol, float, str, frozenset[sp.Symbol]]


@dataclass(frozen=True)
class Task:
    """The integral of e^{-beta F} over axes, inside walls (expressions that are positive inside)."""

    function: sp.Expr
    axes: tuple[Axis, ...]
    walls: tuple[sp.Expr, ...] = ()
    values: tuple[tuple[sp.Symbol, float], ...] = ()
    patient: bool = True  # whether SymPy's own integrator may be tried, which can take seconds to say no


@dataclass(frozen=True)
class Boltzmann:
    """A done integral: the least value of F, and the integral of e^{-beta (F - minimum)} in `BETA`.

    `conditions` must hold for it to converge; `constants` names pure numbers that have no closed form:
    (symbol, value, the integral in words, the symbols it depends on).
    """

    minimum: sp.Expr
    integral: sp.Expr
    steps: tuple[str, ...] = ()
    conditions: tuple[sp.Expr, ...] = ()
    constants: tuple[Constant, ...] = ()


Solve = Callable[["Task"], "Boltzmann | None"]


class Rule(Protocol):
    """A rule answers None where it does not apply; `solve` does an inner integral by all rules."""

    def __call__(self, task: Task, solve: Solve) -> Boltzmann | None:
        """The integral, or None."""


def symbols_of(task: Task) -> set[sp.Symbol]:
    """The integration symbols of a task."""
    return {axis.symbol for axis in task.axes}


def integral_in_words(task: Task) -> str:
    """Its integrand and its directions, as a reader of an answer sees them."""
    names = " ".join(f"d{axis.symbol}".replace("'", "") for axis in task.axes)
    inside = ", ".join(f"{wall} > 0" for wall in task.walls)
    text = f"the integral of exp(-beta*({task.function})) {names}" + (f" where {inside}" if inside else "")
    return text.replace("**", "^").replace("'", "")
