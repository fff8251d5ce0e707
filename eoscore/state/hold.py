"""From a gas and a place to the gas held there."""

from __future__ import annotations

from typing import TYPE_CHECKING

from eoscore.errors import NoAnswerError
from eoscore.gas.levels import OscillatorLevels
from eoscore.measure import convolve
from eoscore.place import StatesPlace, UniformPlace, VolumePlace
from eoscore.state.ensembles import ensemble_of
from eoscore.state.held import HeldGas
from eoscore.state.ladder import BelowTop, OnLevels
from eoscore.state.model import Model

if TYPE_CHECKING:
    from eoscore.gas.gas import Gas
    from eoscore.measure import Measure
    from eoscore.place import Place
    from eoscore.state.ensemble import Ensemble

__all__ = ["hold"]


def hold(gas: Gas, place: Place | None) -> HeldGas:
    """A gas in a place; None for a gas whose every direction is held as levels.

    Energies above the place's top are not counted, kinetic and potential together. Raises NoAnswerError where gas
    and place do not fit (dimensions), or the place holds nothing.
    """
    if isinstance(place, StatesPlace):
        return _of_states(gas, place)
    if place is not None and place.levels == "exact":
        return _on_exact_levels(gas, place)
    dimension = 0 if place is None else place.dimension
    if place is None and not gas.quanta:
        raise NoAnswerError(f"{gas.name} moves freely: say in which place it is held")
    momentum = gas.momentum_measure(dimension)
    free = ensemble_of(gas, momentum)
    if place is None:
        return HeldGas(
            gas, None, Model(lambda: _on_levels(gas, momentum), None, None, gas.degeneracy), 0, momentum
        )
    local = _counted(gas, momentum.cut(place.top))
    if isinstance(place, UniformPlace):
        model = Model(lambda: local, local, free, gas.degeneracy)
        return HeldGas(gas, place, model, dimension, momentum, uniform=True)
    volume = place.volume if isinstance(place, VolumePlace) else None

    def whole() -> Ensemble:
        # Made when a state first needs it: a place whose states are without number still has its frequencies.
        combined = convolve(momentum, place.measure) if volume is None else momentum.scaled(volume)
        return _counted(gas, combined.cut(place.top))

    model = Model(whole, local, free, gas.degeneracy)
    return HeldGas(gas, place, model, dimension, momentum, top=place.top, volume=volume)


def _of_states(gas: Gas, place: StatesPlace) -> HeldGas:
    if gas.quanta:
        raise NoAnswerError(f"{gas.name} holds levels of its own, and {place.name} gives all states at once")
    model = Model(lambda: ensemble_of(gas, place.measure.cut(place.top)), None, None, gas.degeneracy)
    return HeldGas(gas, place, model, 0, place.measure, top=place.top)


def _on_exact_levels(gas: Gas, place: Place) -> HeldGas:
    """The true levels of the whole place; mu counts from the lowest. NoAnswerError where they are not to be had."""
    from eoscore.state.exact import exact_levels

    if gas.treatment == "hartree_fock":
        raise NoAnswerError(
            "`levels exact` counts the levels of an ideal gas: take out `treatment hartree_fock`"
        )
    model = Model(lambda: exact_levels(gas, place), None, None, gas.degeneracy)
    why = "with `levels exact` the gas is no local one: its density is not counted; take that line out for it"
    momentum = gas.momentum_measure(place.dimension)
    volume = place.volume if isinstance(place, VolumePlace) else None
    return HeldGas(gas, place, model, place.dimension, momentum, volume=volume, why_not_local=why)


def _counted(gas: Gas, measure: Measure) -> Ensemble:
    return _on_levels(gas, measure) if gas.quanta else ensemble_of(gas, measure)


def _on_levels(gas: Gas, rest: Measure) -> Ensemble:
    """Levels in some directions, and the measure of the others; bosons condense in a lowest level that is alone."""
    if rest.top < float("inf"):
        return BelowTop(gas.quanta, rest, lambda measure: ensemble_of(gas, measure))
    alone = rest.powers() is not None and rest.exponent == 0 and gas.statistics == "bose"
    ground = None if alone else ensemble_of(gas, rest)
    return OnLevels(OscillatorLevels(gas.quanta, rest, gas.statistics), ground)
