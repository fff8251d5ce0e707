"""Quantities that come with a mean field, as the ideal gas has them."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.errors import NoAnswerError

if TYPE_CHECKING:
    from eoscore.state.reading import Reading
    from eoscore.state.state import State

__all__ = ["condensate_peak", "interaction_energy", "radii", "release_energy"]

MORE = "give the gas a_s and `treatment hartree_fock`"


def interaction_energy(state: State, unit: str) -> Reading:
    """0: the gas is treated as ideal."""
    zero = np.where(state.solution.known, 0.0, np.nan)
    return state.read(zero, zero, unit, "ideal gas")


def release_energy(_state: State, _unit: str) -> Reading:
    """Words: the ideal state knows the sum of kinetic and potential energy alone."""
    raise NoAnswerError(f"the release energy comes with the interactions: {MORE}")


def condensate_peak(_state: State, _unit: str) -> Reading:
    """Words: an ideal condensate has the size of the lowest level, which a semiclassical gas does not know."""
    raise NoAnswerError(f"the density of the condensate comes with the interactions: {MORE}")


def radii(_state: State, _unit: str) -> Reading:
    """Words, as for `condensate_peak`."""
    raise NoAnswerError(f"Thomas-Fermi radii come with the interactions: {MORE}")
