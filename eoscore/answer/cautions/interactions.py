"""Interactions that an ideal gas leaves out, told by their first-order shift and by the gas parameter."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from eoscore.answer.record import Caution
from eoscore.answer.wording import percent
from eoscore.constants import HBAR

if TYPE_CHECKING:
    from collections.abc import Iterator

    from eoscore.answer.scene import Scene

_WORTH_SAYING = 0.01
_DILUTE = 1e-4  # n a^3 below this is called dilute; common practice, no source
# dT_c/T_c = -1.3255 (a/a_ho) N^(1/6): Giorgini, Pitaevskii, Stringari, Phys. Rev. A 54, R4633 (1996); from memory,
# the digits recomputed from the local-density integral.
_HARMONIC = -1.325502799507


def interactions(scene: Scene) -> Iterator[Caution]:
    """Caution where the scattering length moves T_c by more than a percent, or the gas is not dilute."""
    gas = scene.binding.gas
    if not gas.a_s:
        return
    shift = _shift(scene) if gas.treatment is None and gas.statistics == "bose" else None
    if shift is not None and abs(shift) > _WORTH_SAYING:
        yield Caution(
            "interactions",
            f"interactions are left out: to first order in a_s they move T_c by {percent(shift)}.",
        )
    if scene.density is not None and (dilution := scene.density * abs(gas.a_s) ** 3) > _DILUTE:
        yield Caution(
            "not_dilute",
            f"n a_s^3 reaches {dilution:.1e}; above {_DILUTE:.0e} the first order in a_s is not enough.",
        )


def _shift(scene: Scene) -> float | None:
    shifts = scene.number("shift_int")
    if shifts is not None:
        return float(max(shifts.tolist(), key=abs))
    gas, number, frequencies = scene.binding.gas, scene.number("N"), scene.frequencies
    if gas.a_s is None or gas.mass is None or number is None or len(frequencies) != 3:
        return None
    omega = 2.0 * math.pi * math.prod(frequencies) ** (1.0 / 3.0)
    length = math.sqrt(HBAR / (gas.mass * omega))
    return float(_HARMONIC * gas.a_s / length * number.max() ** (1.0 / 6.0))
