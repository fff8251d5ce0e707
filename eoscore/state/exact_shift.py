"""How far the levels of a place move T_c, counted one by one where there is no first order."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.errors import NoAnswerError
from eoscore.place import StatesPlace, TrapPlace
from eoscore.state.critical import saturated_kT

if TYPE_CHECKING:
    from eoscore.state.exact import ExactLevels
    from eoscore.state.held import HeldGas
    from eoscore.state.reading import FloatArray

__all__ = ["against_levels"]


def against_levels(
    held: HeldGas, number: FloatArray, kT: FloatArray, why: str
) -> tuple[FloatArray, FloatArray]:
    """T_c of the exact levels (N_ex = N at mu = E_0) over that of the continuum, less 1, and its error.

    `why` there is no first order; it is told, with NoAnswerError, where the levels cannot be had either.
    """
    levels = _levels(held, why)
    some = np.isfinite(kT)
    ratio = np.full(kT.shape, np.nan)
    ratio[some] = saturated_kT(levels, "N", number[some]) / kT[some] - 1
    error = np.full(kT.shape, np.nan)
    error[some] = levels.error_at(kT[some]) + held.model.whole.error_at(kT[some]) + 1e-12
    return ratio, error


def _levels(held: HeldGas, why: str) -> ExactLevels:
    """Solved once for a held gas."""
    if held.uniform:
        raise NoAnswerError("a uniform gas has no end, and so no finite number that would move its T_c")
    if isinstance(held.place, StatesPlace):
        raise NoAnswerError(f"{held.place.name} gives a continuous density of states, and no levels")
    if not isinstance(held.place, TrapPlace):
        raise NoAnswerError(
            f"{why}; a volume has no shape: give walls, V(x, y, z) = 0 J where x > 0 um, x < ..."
        )
    kept = held._cache.get("levels")
    if kept is None:
        from eoscore.state.exact import exact_levels

        try:
            kept = exact_levels(held.gas, held.place)
        except NoAnswerError as error:
            raise NoAnswerError(f"{why}; {error.why}") from None
        held._cache["levels"] = kept
    return kept  # type: ignore[return-value]
