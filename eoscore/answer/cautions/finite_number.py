"""The finite number: how far T_c lies from its value for an infinite gas."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from eoscore.answer.record import Caution
from eoscore.answer.wording import percent

if TYPE_CHECKING:
    from collections.abc import Iterator

    from eoscore.answer.scene import Scene

_WORTH_SAYING = 0.01
# zeta(2)/(2 zeta(3)^(2/3)): Grossmann and Holthaus, Phys. Lett. A 208, 188 (1995); from memory.
_HARMONIC = -0.727503602287948


def finite_number(scene: Scene) -> Iterator[Caution]:
    """Caution where the first-order shift of T_c by the finite number is above one percent."""
    if scene.binding.gas.statistics != "bose" or getattr(scene.binding.place, "levels", None) == "exact":
        return
    shift = _shift(scene)
    if shift is not None and abs(shift) > _WORTH_SAYING:
        yield Caution(
            "finite_number",
            f"for this finite number T_c lies {percent(shift)} from the T_c of the infinite gas given here "
            "(first order).",
        )


def _shift(scene: Scene) -> float | None:
    frequencies = scene.frequencies
    if len(frequencies) != 3:
        # `shift_size` would solve for the levels here: far too much work for a caution that nobody asked for.
        return None
    shifts = scene.number("shift_size")
    if shifts is not None:
        return float(max(shifts.tolist(), key=abs))
    number = scene.number("N")
    if number is None:
        return None
    anisotropy = sum(frequencies) / 3.0 / math.prod(frequencies) ** (1.0 / 3.0)
    return float(_HARMONIC * anisotropy * number.min() ** (-1.0 / 3.0))
