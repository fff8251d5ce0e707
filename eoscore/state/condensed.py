"""States with a condensate: alpha = 0, and T and the condensate number are the unknowns."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.constants import K_B
from eoscore.errors import NoAnswerError
from eoscore.state.critical import saturated_kT
from eoscore.state.ensemble import EPS
from eoscore.state.solution import spread

if TYPE_CHECKING:
    from eoscore.state.model import Model
    from eoscore.state.reading import FloatArray
    from eoscore.state.solution import Solution

__all__ = ["of_condensate", "split_phases"]


def of_condensate(
    model: Model, first: str, second: str, values: tuple[FloatArray, FloatArray], solution: Solution
) -> None:
    """A state from f_0 or N_0 (`second`) and a further condition."""
    if not (model.bosons and model.whole.condenses):
        raise NoAnswerError(
            f"{second} fixes nothing here: {model.whole.why_not}, and {second} is 0 in every state"
        )
    if first in ("mu", "fugacity", "n_peak", "PSD"):
        raise NoAnswerError(
            f"{first} and {second} fix no state: with a condensate {first} does not know its size"
        )
    x, y = values
    if second == "f_0":
        _refuse_fractions(y, solution)
    if first == "f_0":
        _refuse_fractions(x, solution)
    if first == "N" and second == "N_0":
        solution.refuse(f"N_0 came as {spread(y[y >= x])}, not below N", y >= x)
    some = np.flatnonzero(solution.known)
    x, y = x[some], y[some]
    if first == "T":
        kT, told_by = K_B * x, "T"
    elif first in ("N", "f_0"):  # with f_0 the second is N_0, and N = N_0/f_0
        total = x if first == "N" else y / x
        kT, told_by = saturated_kT(model.whole, "N", total * (1 - y) if second == "f_0" else total - y), "N"
    else:
        kT, told_by = saturated_kT(model.whole, first, x / K_B if first == "S" else x), first
    solution.kT[some], solution.alpha[some] = kT, 0.0
    solution.condensate[some] = model.whole.saturated(kT) * y / (1 - y) if second == "f_0" else y
    solution.condensed[some] = True
    solution.dlog[some] = 8 * EPS if told_by == "T" else _dlog(model, told_by, kT)


def _refuse_fractions(f: FloatArray, solution: Solution) -> None:
    words = "every state above T_c has f_0 = 0: it fixes none; give a fraction between 0 and 1"
    solution.refuse(words, f == 0)
    solution.refuse(
        f"f_0 came as {spread(f[(f < 0) | (f >= 1)])}; it lies between 0 and 1, and reaches 1 at T = 0 alone",
        (f < 0) | (f >= 1),
    )


def _dlog(model: Model, name: str, kT: FloatArray) -> FloatArray:
    """Error of ln T where the excited states alone fix it."""
    x, _, by_log = model.value(name, np.zeros_like(kT), kT)
    return (model.whole.error_at(kT) + 8 * EPS) * np.abs(x / by_log)


def split_phases(
    model: Model, names: tuple[str, str], values: tuple[FloatArray, FloatArray], solution: Solution
) -> FloatArray:
    """Solve the points that are condensed, and return the least ln kT that the others can have.

    With N, that is T_c(N); with S, U or n_peak, the temperature at which a saturated gas has it; all for bosons.
    """
    low = np.full(solution.kT.shape, -np.inf)
    if not model.bosons:
        return low
    for name, x in zip(names, values, strict=True):
        some = np.flatnonzero(solution.known)
        ensemble, counted = (model.local, "N") if name == "n_peak" else (model.whole, name)
        if counted not in ("N", "S", "U") or ensemble is None or not some.size:
            continue
        if counted == "N" and not ensemble.condenses:
            continue
        value = x[some] / K_B if name == "S" else x[some]
        low[some] = np.fmax(low[some], np.log(saturated_kT(ensemble, counted, value)))
        if name == "N" and names[1] in ("S", "U"):
            _condense(model, names[1], values, np.exp(low), solution)
            break
    return np.where(solution.condensed, np.nan, low)


def _condense(
    model: Model, name: str, values: tuple[FloatArray, FloatArray], critical: FloatArray, solution: Solution
) -> None:
    """The points of (N, S) or (N, U) whose S or U is below that at T_c."""
    some = np.flatnonzero(solution.known)
    most = model.value(name, np.zeros(some.size), critical[some])[0]
    some = some[values[1][some] <= most]
    if not some.size:
        return
    x = values[1][some] / (K_B if name == "S" else 1.0)
    kT = np.minimum(saturated_kT(model.whole, name, x), critical[some])
    solution.kT[some], solution.alpha[some] = kT, 0.0
    solution.condensed[some] = True
    solution.condensate[some] = np.maximum(values[0][some] - model.whole.saturated(kT), 0.0)
    solution.dlog[some] = _dlog(model, name, kT)
