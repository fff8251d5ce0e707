"""Which kind of state a gas has, by its treatment."""

from __future__ import annotations

from typing import TYPE_CHECKING

from eoscore.state.state import State

if TYPE_CHECKING:
    from collections.abc import Mapping

    from numpy.typing import ArrayLike

    from eoscore.state.held import HeldGas

__all__ = ["state_of"]


def state_of(held: HeldGas, given: Mapping[str, ArrayLike]) -> State:
    """The state of a held gas under conditions: ideal, or with the mean field of `treatment hartree_fock`."""
    if held.gas.treatment == "hartree_fock":
        from eoscore.state.mean_field import MeanFieldState

        return MeanFieldState(held, given)
    return State(held, given)
