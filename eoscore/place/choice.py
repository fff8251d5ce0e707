"""From the facts of a place to the place."""

from __future__ import annotations

from typing import TYPE_CHECKING, assert_never

from eoscore.errors import NoAnswerError
from eoscore.language.facts import PlaceFacts, StatesFacts, TrapFacts, UniformFacts, VolumeFacts
from eoscore.place.flat import UniformPlace, VolumePlace
from eoscore.place.states import StatesPlace, anchored
from eoscore.place.trap import TrapPlace

if TYPE_CHECKING:
    from eoscore.place.base import Place

__all__ = ["place_of"]


def place_of(
    facts: PlaceFacts | None, mass: float | None = None, dimension: int | None = None
) -> Place | None:
    """The place of these facts; None stays None (a gas whose levels need no place).

    mass: of the particle, kg, for the frequencies. dimension: of the uniform place, 3 if not given.
    Raises NoAnswerError where the place holds nothing.
    """
    match facts:
        case None:
            return None
        case TrapFacts():
            place: Place = TrapPlace(facts.name, facts.field, facts.e_max, mass)
            place.levels = facts.levels
            return place
        case VolumeFacts():
            place = VolumePlace(facts.name, facts.volume, facts.dimension, facts.e_max)
            place.levels = facts.levels
            return place
        case UniformFacts():
            return UniformPlace(dimension or 3, facts.name)
        case StatesFacts():
            return _states(facts)
    assert_never(facts)


def _states(facts: StatesFacts) -> StatesPlace:
    if facts.density is not None:
        return StatesPlace.of_density(facts.name, facts.density)
    if facts.exponent is None or facts.anchor_number is None or facts.anchor_temperature is None:
        raise NoAnswerError(f"{facts.name} needs rho(E), or an exponent and an anchor `N_c = ... at T = ...`")
    return anchored(facts.name, facts.exponent, facts.anchor_number, facts.anchor_temperature)
