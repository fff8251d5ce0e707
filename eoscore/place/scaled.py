"""A trap whose potential is a number times that of another: nothing is surveyed or measured again."""

from __future__ import annotations

from dataclasses import replace
from functools import cached_property
from typing import TYPE_CHECKING

from eoscore.formula.ratio import ratio
from eoscore.measure.stretched import stretched
from eoscore.place.trap import TrapPlace

if TYPE_CHECKING:
    from eoscore.language.facts import TrapFacts
    from eoscore.measure import Measure
    from eoscore.measure.landscape import Landscape, Minimum

__all__ = ["ScaledTrap", "scale_between"]


def scale_between(facts: TrapFacts, origin: TrapFacts) -> float | None:
    """The positive c with V = c V_origin between the same walls; None where the formulas do not show one."""
    one, other = facts.field, origin.field
    if one.coordinates != other.coordinates or one.walls != other.walls:
        return None
    factor = ratio(one.formula, other.formula)
    return factor if factor is not None and factor > 0.0 else None


class ScaledTrap(TrapPlace):
    """The trap of these facts, known to be `factor` times `origin`; `E_max` and the mass are its own."""

    def __init__(self, facts: TrapFacts, origin: TrapPlace, factor: float, mass: float | None = None) -> None:
        self.origin, self.factor = origin, factor
        super().__init__(facts.name, facts.field, facts.e_max, mass, _scaled(origin.landscape, factor))
        self.levels = facts.levels

    @cached_property
    def whole(self) -> Measure:
        """See `TrapPlace.whole`."""
        return self.origin.whole if self.factor == 1.0 else stretched(self.origin.whole, self.factor)


def _scaled(landscape: Landscape, factor: float) -> Landscape:
    """Every energy times the factor; places, kinds and directions stay."""
    escape, bottom = landscape.escape, landscape.bottom
    return replace(
        landscape,
        bottom=None if bottom is None else _minimum(bottom, factor),
        minima=tuple(_minimum(minimum, factor) for minimum in landscape.minima),
        escape=None if escape is None else replace(escape, energy=escape.energy * factor),
    )


def _minimum(minimum: Minimum, factor: float) -> Minimum:
    curvatures = minimum.curvatures
    return replace(
        minimum,
        value=minimum.value * factor,
        hessian=minimum.hessian * factor,
        curvatures=None if curvatures is None else tuple(bend * factor for bend in curvatures),
    )
