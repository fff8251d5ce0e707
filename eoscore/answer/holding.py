"""From the facts of a binding to a held gas, each held once."""

from __future__ import annotations

from collections import OrderedDict
from dataclasses import fields
from typing import TYPE_CHECKING

from eoscore.errors import NoAnswerError
from eoscore.gas import gas_of
from eoscore.place import place_of
from eoscore.state import hold

if TYPE_CHECKING:
    from collections.abc import Hashable

    from eoscore.language.program import Binding
    from eoscore.state import HeldGas

__all__ = ["HeldGases"]

_MOST = 256  # held gases that are kept, so that a long grid does not fill the memory


class HeldGases:
    """Gases that are held already: what does not change from one question, point or literal to the next is shared.

    Bindings are compared by their facts; a place that holds nothing is remembered with its reason too.
    """

    def __init__(self) -> None:
        self._kept: OrderedDict[Hashable, HeldGas | NoAnswerError] = OrderedDict()

    def of(self, binding: Binding, dimension: int | None = None) -> HeldGas:
        """The gas of a binding held in its place; `dimension` is that of a `uniform` place.

        Raises
        ------
        NoAnswerError
            Where the place holds nothing, or is open.
        """
        facts = (dimension, *_facts(binding))
        if facts not in self._kept:
            self._kept[facts] = _held(binding, dimension)
            if len(self._kept) > _MOST:
                self._kept.popitem(last=False)
        self._kept.move_to_end(facts)
        outcome = self._kept[facts]
        if isinstance(outcome, NoAnswerError):
            raise outcome
        return outcome


def _held(binding: Binding, dimension: int | None) -> HeldGas | NoAnswerError:
    try:
        gas = gas_of(binding.gas)
        return hold(gas, place_of(binding.place, gas.mass, dimension))
    except NoAnswerError as fault:
        return fault


def _facts(binding: Binding) -> tuple[Hashable, ...]:
    """All that a held gas depends on; formulas are shared, so equal ones are the same object."""
    gas = binding.gas
    plain = (getattr(gas, each.name) for each in fields(gas) if each.name != "parameters")
    return binding.place, *plain, *sorted(gas.parameters.items())
