"""The measure of an energy function of momentum, by the same routes that serve a potential in space."""

from __future__ import annotations

from math import gamma, inf, pi
from typing import TYPE_CHECKING

from eoscore.constants import H
from eoscore.errors import NoAnswerError
from eoscore.formula.field import Field

if TYPE_CHECKING:
    from eoscore.measure.base import Measure

__all__ = ["axes_of", "ball", "momentum_measure"]

RADIAL = {1: ("x",), 2: ("rho",), 3: ("r",)}  # |p| as a coordinate of d dimensions
CARTESIAN = ("x", "y", "z")
WORDS = {0: "no", 1: "one", 2: "two", 3: "three"}


def axes_of(momentum: tuple[str, ...], d: int) -> tuple[str, ...]:
    """The coordinates that the momenta become in d dimensions; NoAnswerError where they do not fit."""
    if d not in RADIAL:
        raise NoAnswerError(
            f"the gas moves freely in {WORDS.get(d, d)} dimensions; it takes one, two or three"
        )
    if momentum == ("p",):
        return RADIAL[d]
    if len(momentum) != d:
        why = (
            f"the gas has E({', '.join(momentum)}), {WORDS[len(momentum)]} momentum"
            f"{' components' if len(momentum) > 1 else ' component'}, and the place has {WORDS[d]} dimension"
            f"{'s' if d > 1 else ''}: give the trap as many coordinates, or the gas E(p), which fits any dimension"
        )
        raise NoAnswerError(why)
    return CARTESIAN[:d]


def ball(d: int) -> float:
    """Volume of the ball of radius 1 in d dimensions (DLMF 5.19.4)."""
    return float(pi ** (d / 2) / gamma(d / 2 + 1))


def momentum_measure(field: Field, d: int) -> Measure:
    """States per m^d below an energy, h^-d included; NoAnswerError where there are infinitely many."""
    axes = axes_of(field.coordinates, d)
    from eoscore.measure import measure_of

    named = f"E({', '.join(field.coordinates)})"
    try:
        found = measure_of(_in_space(field, axes))
    except NoAnswerError as fault:
        why = f"the states of {named} cannot be counted; with E called V and its momenta {', '.join(axes)}"
        raise NoAnswerError(f"{why}: {fault.why}") from fault
    if found.top < inf:
        why = f"{named} stays below {found.top:.4g} J above its least value for momenta without end"
        raise NoAnswerError(f"{why}: say where its zone ends, as in `where abs(px) < pi*hbar/a`")
    return found.scaled(H**-d)


def _in_space(field: Field, axes: tuple[str, ...]) -> Field:
    """The same energy with the momenta called by the names of coordinates."""
    from eoscore.formula import call, variable

    axis = variable(axes[0])
    radial = field.coordinates == ("p",)
    first = call("abs", axis) if radial and axes == ("x",) else axis
    names = dict(zip(field.coordinates, [first, *map(variable, axes[1:])], strict=False))
    return Field(axes, field.formula.substitute(names), tuple(wall.substitute(names) for wall in field.walls))
