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
from eoscore.state.overlap import RULE, over_place
from eoscore.state.reading import Reason

if TYPE_CHECKING:
    from eoscore.state.reading import FloatArray, Reading
    from eoscore.state.state import State

__all__ = ["of_interactions", "of_size"]

BOX = 1.32, 0.02  # of a_s n^(1/3): P. Arnold, G. Moore, Phys. Rev. Lett. 87, 120401 (2001)


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
    return state.read(value, error, unit, route, [Reason(words, state.shaped(np.isnan(value)))])


def of_size(state: State, unit: str) -> Reading:
    """The gas condenses at the energy of the lowest level, sum h f/2 above the bottom: -(dN/dmu E_0)/(T dN_c/dT).

    In a harmonic trap -zeta(2)/(2 zeta(3)^(2/3)) (mean f/geometric mean f) N^(-1/3) (Grossmann and Holthaus, Phys.
    Lett. A 208, 188, 1995).
    """
    held = state.held
    if held.gas.quanta:
        raise NoAnswerError("the levels are summed exactly: T_c holds for a finite number as it stands")
    _, kT = _critical(state)
    frequencies = held.frequencies()
    if not np.all(frequencies > 0):
        raise NoAnswerError(
            "the bottom is flat in some direction: its lowest level has no first-order energy h f/2"
        )
    whole = held.model.whole
    sums = whole.sums(np.zeros_like(kT), kT)
    if not np.any(np.isfinite(sums.B0)):
        raise NoAnswerError(
            "dN/dmu diverges at the transition (a <= 2): the shift is of no first order in h f/kT"
        )
    value = -sums.B0 / sums.B1 * H * float(frequencies.sum()) / 2 / kT
    error = np.abs(value) * (3 * whole.error + 1e-12)
    return _told(state, value, error, unit, "first order in h f/kT")


def of_interactions(state: State, unit: str) -> Reading:
    """A mean field 2 g n, g = 4 pi hbar^2 a_s/m, raises mu by its value at the bottom: the atoms outside feel less.

    -2 g int dn/dmu (n_0 - n) dV/(T dN_c/dT) to first order; -1.3255 (a_s/a_ho) N^(1/6) in a harmonic trap (Giorgini,
    Pitaevskii, Stringari, Phys. Rev. A 54, R4633, 1996). In a box the mean field does nothing, and 1.32 a_s n^(1/3)
    lies beyond it.
    """
    held = state.held
    gas = held.gas
    if gas.a_s is None:
        raise NoAnswerError(f"{gas.name} has no scattering length: give the gas a_s = ...")
    if not gas.mass or held.dimension != 3 or held.model.local is None:
        raise NoAnswerError("the shift by s-wave collisions is that of massive particles in three dimensions")
    number, kT = _critical(state)
    if held.position is None:
        size = gas.a_s * (number / (held.volume or 1.0)) ** (1 / 3)
        return _told(
            state, BOX[0] * size, np.abs(BOX[1] * size), unit, "published coefficient, beyond mean field"
        )
    local = held.model.local
    bottom, _ = local.count(np.zeros_like(kT), kT)

    def missing(n: FloatArray, slope: FloatArray) -> tuple[FloatArray, ...]:
        return (slope / kT * (bottom - n),)

    (total,) = over_place(held, np.zeros_like(kT), kT, missing)
    sums = held.model.whole.sums(np.zeros_like(kT), kT)
    value = -2 * (4 * pi * HBAR**2 * gas.a_s / gas.mass) * total / sums.B1
    error = np.abs(value) * (3 * held.model.whole.error + 100 * RULE + 8 * EPS)
    return _told(state, value, error, unit, "first order in a_s, local mean field")
