"""The elastic collision rate."""

from __future__ import annotations

from math import pi
from typing import TYPE_CHECKING

import numpy as np

from eoscore.errors import NoAnswerError
from eoscore.state.overlap import mean_density

if TYPE_CHECKING:
    from eoscore.state.reading import Reading
    from eoscore.state.state import State

__all__ = ["rate"]


def rate(state: State, unit: str) -> Reading:
    """Elastic collisions per particle and second, n sigma v averaged over the non-condensed density.

    8 pi a_s^2 sqrt(16 kT/(pi m)) int n^2 / int n: the s-wave cross-section of identical bosons and the mean
    relative speed of a classical gas; one-component fermions do not meet (0).
    """
    gas, s = state.held.gas, state.solution
    if gas.statistics == "fermi" and gas.degeneracy == 1:
        zero = np.where(s.known, 0.0, np.nan)
        return state.read(zero, zero, unit, "one-component fermions have no s-wave collisions")
    if gas.statistics == "fermi":
        raise NoAnswerError("the collision rate of fermions in several spin states is not defined here")
    if gas.a_s is None:
        raise NoAnswerError(f"{gas.name} has no scattering length: give the gas a_s = ...")
    if not gas.mass:
        raise NoAnswerError(
            f"{gas.name} has no mass, and its particles no thermal speed: give the gas m = ..."
        )
    if state.held.dimension != 3:
        raise NoAnswerError("the s-wave cross-section is that of three dimensions; this gas moves in fewer")
    if gas.quanta:
        raise NoAnswerError("the collision rate is not defined for a gas with directions held as levels")
    density, error = mean_density(state)
    speed = 8 * pi * gas.a_s**2 * np.sqrt(16 * s.kT / (pi * gas.mass))
    value = speed * density
    route = f"{state.held.model.whole.route}; n^2 over the place"
    return state.read(value, speed * error + value * (state.doubt[1] / 2 + 1e-15), unit, route)
