"""Slow changes of the place: the number and the entropy stay."""

from __future__ import annotations

from math import inf
from typing import TYPE_CHECKING

import numpy as np
from scipy.special import gammaincc

from eoscore.constants import K_B
from eoscore.errors import NoAnswerError
from eoscore.state.treatment import state_of

if TYPE_CHECKING:
    from eoscore.state.held import HeldGas
    from eoscore.state.state import State

__all__ = ["bring", "spill_of"]

WORTH_TELLING = 1e-4  # of the atoms


def bring(held: HeldGas, before: State) -> State:
    """The gas of `before` after a slow change into another place.

    NoAnswerError where the places hold different gases, or the gas has no number (uniform). Points without a state
    before have none after.
    """
    if held.gas.name != before.held.gas.name or held.gas.statistics != before.held.gas.statistics:
        raise NoAnswerError(
            f"{before.held.gas.name} cannot become {held.gas.name}: a slow change keeps the gas"
        )
    number, entropy = before.reading("N"), before.reading("S")
    for reading in (number, entropy):
        if reading.why is not None and reading.missing.all():
            raise NoAnswerError(f"in the first place: {reading.why}")
    after = state_of(held, {"N": number.value, "S": entropy.value})
    after.spill = tuple(words for words in [spill_of(after)] if words)
    return after


def spill_of(state: State) -> str:
    """A warning where a place with an escape energy would let atoms out; empty where hardly any would go.

    The share is that of the classical gas with the state's own mean energy: the part of its Gamma distribution of
    energies that lies above the escape. Where no state below the escape energy has that entropy, more must go.
    """
    top, solution = state.held.top, state.solution
    known = solution.known
    if top == inf:
        return ""
    if not known.any() and state.held.model.bosons:
        return (
            f"so many atoms with so much entropy do not fit below the escape energy, {top / K_B:.3g} K: they spill "
            "while the trap changes, until the rest fits"
        )
    if not known.any():
        return ""
    kT = solution.kT[known]
    ratio = top / kT
    exponent = np.maximum(state.held.model.whole.boltzmann(kT)[1], 0.1)
    share = gammaincc(exponent, ratio)
    worst = int(np.argmax(share))
    if share[worst] < WORTH_TELLING:
        return ""
    return (
        f"about {100 * share[worst]:.2g} % of the atoms would lie above the escape energy, which is "
        f"{ratio[worst]:.3g} kT at T = {kT[worst] / K_B:.3g} K: they spill while the trap changes"
    )
