"""The gases of questions, held in their places and kept for the next question or point that wants them."""

from __future__ import annotations

from collections import OrderedDict
from dataclasses import fields, replace
from typing import TYPE_CHECKING, Any, TypeVar

from eoscore.errors import NoAnswerError
from eoscore.gas import gas_of
from eoscore.language.facts import TrapFacts
from eoscore.place import TrapPlace, place_of
from eoscore.place.scaled import ScaledTrap, scale_between
from eoscore.state import hold

if TYPE_CHECKING:
    from collections.abc import Callable, Hashable

    from eoscore.gas.gas import Gas
    from eoscore.language.facts import GasFacts, PlaceFacts
    from eoscore.language.program import Binding
    from eoscore.place import Place
    from eoscore.state import HeldGas

__all__ = ["HeldGases"]

_MOST = 256  # of each kind that are kept, so that a long grid does not fill the memory
_SHORT = 1e-12  # relative, by which the top of a scaled measure may be rounded

_T = TypeVar("_T")


class HeldGases:
    """Gases that are held already: what does not change from one question, point or literal to the next is shared.

    Gases, places and both together are compared by their facts; a place that holds nothing is remembered with its
    reason too.
    """

    def __init__(self) -> None:
        self._gases, self._places, self._counted, self._held = _Kept(), _Kept(), _Kept(), _Kept()

    def of(self, binding: Binding, dimension: int | None = None, like: Binding | None = None) -> HeldGas:
        """The gas of a binding held in its place; `dimension` is that of a `uniform` place.

        Where V is a number times that of the binding `like`, it is scaled from there: one measure serves a whole
        grid over the power of a beam.

        Raises
        ------
        NoAnswerError
            Where the place holds nothing, or is open.
        """
        origin = None if like is None or like.place == binding.place else like.place
        facts = (dimension, binding.place, origin, *_facts(binding.gas))
        held: HeldGas = self._held.of(facts, lambda: self._hold(binding, dimension, origin))
        return held

    def _hold(self, binding: Binding, dimension: int | None, origin: PlaceFacts | None) -> HeldGas:
        gas: Gas = self._gases.of(_facts(binding.gas), lambda: gas_of(binding.gas))
        # What is counted does not know of a_s: gases that differ by it alone share their states.
        counted = (dimension, binding.place, origin, *_facts(replace(binding.gas, a_s=None)))
        held: HeldGas = self._counted.of(
            counted, lambda: hold(gas, self._place(binding.place, gas.mass, dimension, origin))
        )
        return held if held.gas is gas else replace(held, gas=gas)

    def _place(
        self, facts: PlaceFacts | None, mass: float | None, dimension: int | None, origin: PlaceFacts | None
    ) -> Place | None:
        if isinstance(facts, TrapFacts) and isinstance(origin, TrapFacts):
            factor = scale_between(facts, origin)
            scaled = None if factor is None else self._scaled(facts, mass, origin, factor)
            if scaled is not None:
                return scaled
        told = None if isinstance(facts, TrapFacts) else dimension
        place: Place | None = self._places.of((facts, told), lambda: place_of(facts, mass, told))
        if isinstance(facts, TrapFacts) and isinstance(place, TrapPlace) and place.mass != mass:
            return ScaledTrap(facts, place, 1.0, mass)  # only its frequencies know of a mass
        return place

    def _scaled(
        self, facts: TrapFacts, mass: float | None, origin: TrapFacts, factor: float
    ) -> ScaledTrap | None:
        """The trap scaled from its origin; None where that holds nothing, or is measured less high."""
        try:
            first = self._place(origin, mass, None, None)
            if not isinstance(first, TrapPlace):
                return None
            scaled = ScaledTrap(facts, first, factor, mass)
            return scaled if scaled.whole.top >= scaled.top * (1.0 - _SHORT) else None
        except NoAnswerError:
            if facts.e_max is origin.e_max is None:
                raise  # for the same reason
            return None


class _Kept:
    """Outcomes by what they depend on, the last used ones; reasons why there is none are outcomes too."""

    def __init__(self) -> None:
        self._outcomes: OrderedDict[Hashable, Any] = OrderedDict()

    def of(self, facts: Hashable, make: Callable[[], _T]) -> _T:
        if facts not in self._outcomes:
            try:
                self._outcomes[facts] = make()
            except NoAnswerError as fault:
                self._outcomes[facts] = fault
            if len(self._outcomes) > _MOST:
                self._outcomes.popitem(last=False)
        self._outcomes.move_to_end(facts)
        outcome = self._outcomes[facts]
        if isinstance(outcome, NoAnswerError):
            raise outcome
        kept: _T = outcome
        return kept


def _facts(gas: GasFacts) -> tuple[Hashable, ...]:
    """All that a gas depends on; formulas are shared, so equal ones are the same object."""
    plain = (getattr(gas, each.name) for each in fields(gas) if each.name != "parameters")
    return *plain, *sorted(gas.parameters.items())
