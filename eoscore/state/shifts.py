"""First-order relative shifts of T_c: finite number, and interactions.

Both move mu at the transition by a small amount, and T_c follows from dN_c = 0.
"""

from __future__ import annotations

from math import pi
from typing import TYPE_CHECKING

import numpy as np

from eoscore.constants import HBAR, H
from eoscore.errors import NoAnswerError
from eoscore.state.critical import saturated_kT
from eoscore.state.ensemble import EPS
from eoscore.state.exact_shift import against_levels
from eoscore.state.overlap import RULE, over_place
from eoscore.state.reading import Reason

if TYPE_CHECKING:
    from eoscore.state.held import HeldGas
    from eoscore.state.reading import FloatArray, Reading
    from eoscore.state.state import State
    from eoscore.state.sums import Sums

__all__ = ["BOX", "beyond_mean_field", "is_flat", "of_interactions", "of_size"]

BOX = 1.32, 0.02  # of x = a_s n^(1/3): P. Arnold, G. Moore, Phys. Rev. Lett. 87, 120401 (2001)
# (19.7518 ln x + 75.7(4)) x^2: P. Arnold, G. Moore, B. Tomasik, Phys. Rev. A 65, 013606 (2002); the first number is
# -64 pi zeta(1/2)/(3 zeta(3/2)^(5/3)).
BOX_NEXT = 19.7518415457, 75.7


def is_flat(held: HeldGas) -> bool:
    """Whether the density is the same everywhere: a volume, the unbounded place, or a flat floor between walls."""
    powers = held.position.powers() if held.position is not None else None
    return held.position is None or (powers is not None and len(powers) == 1 and powers[0][1] == 0)


def _range(values: FloatArray) -> str:
    finite = values[np.isfinite(values)]
    if not finite.size:
        return "unknown"
    least, most = float(finite.min()), float(finite.max())
    return f"{least:.1e}" if most - least <= 1e-3 * abs(least) else f"{least:.1e} to {most:.1e}"


def _critical(state: State) -> tuple[FloatArray, FloatArray]:
    """N and kT_c; NoAnswerError where the gas does not condense."""
    whole = state.held.model.whole
    if not whole.condenses:
        raise NoAnswerError(whole.why_not)
    number, _ = state.number
    kT = np.full_like(number, np.nan)
    kT[number > 0] = saturated_kT(whole, "N", number[number > 0])
    return number, kT


def _told(state: State, value: FloatArray, error: FloatArray, unit: str, route: str) -> Reading:
    words = "n must be above zero" if state.held.uniform else "N must be above zero"
    return state.read(value, error, unit, route, [Reason(words, state.shaped(np.isnan(value)))], of="N")


def of_size(state: State, unit: str) -> Reading:
    """The gas condenses at the energy of the lowest level, sum h f/2 above the bottom: -(dN/dmu E_0)/(T dN_c/dT).

    In a harmonic trap -zeta(2)/(2 zeta(3)^(2/3)) (mean f/geometric mean f) N^(-1/3) (Grossmann and Holthaus, Phys.
    Lett. A 208, 188, 1995).
    """
    held = state.held
    if held.gas.quanta or getattr(held.place, "levels", None) == "exact":
        raise NoAnswerError("the levels are summed exactly: T_c holds for a finite number as it stands")
    number, kT = _critical(state)
    whole = held.model.whole
    sums = whole.sums(np.zeros_like(kT), kT)
    try:
        frequencies = _all_rising(held, sums)
    except NoAnswerError as none:
        ratio, relative = against_levels(held, number, kT, none.why)
        return _told(state, ratio, relative, unit, "exact sum over levels, to all orders")
    value = -sums.B0 / sums.B1 * H * float(frequencies.sum()) / 2 / kT
    error = np.abs(value) * (3 * whole.error_at(kT) + 1e-12)
    return _told(state, value, error, unit, "first order in h f/kT")


def _all_rising(held: HeldGas, sums: Sums) -> FloatArray:
    """The frequencies in Hz, where they make a first order in h f/kT; else NoAnswerError."""
    frequencies = held.frequencies()
    if not np.all(frequencies > 0):
        raise NoAnswerError(
            "the bottom is flat in some direction: its lowest level has no first-order energy h f/2"
        )
    if not np.any(np.isfinite(sums.B0)):
        raise NoAnswerError(
            "dN/dmu diverges at the transition (a <= 2): the shift is of no first order in h f/kT"
        )
    return frequencies


def beyond_mean_field(x: FloatArray) -> tuple[FloatArray, FloatArray]:
    """The relative shift of T_c in a uniform gas, x = a_s n^(1/3): the first order in x, and the second."""
    with np.errstate(divide="ignore", invalid="ignore"):
        second = (BOX_NEXT[0] * np.log(np.abs(x)) + BOX_NEXT[1]) * x * x
    return BOX[0] * x, np.where(x == 0, 0.0, second)


def of_interactions(state: State, unit: str) -> Reading:
    """A mean field 2 g n, g = 4 pi hbar^2 a_s/m, raises mu by its value at the bottom: the atoms outside feel less.

    -2 g int dn/dmu (n_0 - n) dV/(T dN_c/dT) to first order; -1.3255 (a_s/a_ho) N^(1/6) in a harmonic trap (Giorgini,
    Pitaevskii, Stringari, Phys. Rev. A 54, R4633, 1996). In a box the mean field does nothing, and 1.32 a_s n^(1/3)
    lies beyond it; the next order of that is counted as its error.
    """
    held = state.held
    gas = held.gas
    if gas.a_s is None:
        raise NoAnswerError(f"{gas.name} has no scattering length: give the gas a_s = ...")
    if getattr(held.place, "levels", None) == "exact":
        raise NoAnswerError("the mean field is a local one, and `levels exact` is not: take that line out")
    if not gas.mass or held.dimension != 3 or held.model.local is None:
        raise NoAnswerError("the shift by s-wave collisions is that of massive particles in three dimensions")
    number, kT = _critical(state)
    if is_flat(held):
        content = held.volume or (held.position.floor if held.position is not None else 1.0)
        size = gas.a_s * (number / content) ** (1 / 3)
        first, second = beyond_mean_field(size)
        words = f"uniform gas, beyond mean field: 1.32(2) x, x = a_s n^(1/3); next order {_range(second)}"
        return _told(state, first, np.abs(BOX[1] * size) + np.abs(second), unit, words)
    local = held.model.local
    bottom, _ = local.count(np.zeros_like(kT), kT)

    def missing(n: FloatArray, slope: FloatArray) -> tuple[FloatArray, ...]:
        return (slope / kT * (bottom - n),)

    (total,) = over_place(held, np.zeros_like(kT), kT, missing)
    sums = held.model.whole.sums(np.zeros_like(kT), kT)
    value = -2 * (4 * pi * HBAR**2 * gas.a_s / gas.mass) * total / sums.B1
    error = np.abs(value) * (3 * held.model.whole.error_at(kT) + 100 * RULE + 8 * EPS)
    return _told(state, value, error, unit, "first order in a_s, local mean field")
