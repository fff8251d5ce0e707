"""From the facts of a binding to a held gas."""

from __future__ import annotations

from typing import TYPE_CHECKING

from eoscore.gas import gas_of
from eoscore.place import place_of
from eoscore.state import hold

if TYPE_CHECKING:
    from eoscore.language.program import Binding
    from eoscore.state import HeldGas

__all__ = ["held_gas"]


def held_gas(binding: Binding, dimension: int | None = None) -> HeldGas:
    """The gas of a binding held in its place; `dimension` is that of a `uniform` place.

    Raises
    ------
    NoAnswerError
        Where the place holds nothing, or is open.
    """
    gas = gas_of(binding.gas)
    return hold(gas, place_of(binding.place, gas.mass, dimension))
