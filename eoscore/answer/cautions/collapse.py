"""Attraction: a condensate larger than a critical number falls in on itself."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from eoscore.answer.record import Caution
from eoscore.constants import HBAR

if TYPE_CHECKING:
    from collections.abc import Iterator

    from eoscore.answer.scene import Scene

# N_cr |a|/a_ho = 0.575 for the isotropic trap: Ruprecht et al., Phys. Rev. A 51, 4704 (1995); from memory.
_CRITICAL = 0.575


def collapse(scene: Scene) -> Iterator[Caution]:
    """Caution where a_s < 0 and the condensate is larger than the harmonic trap's critical number."""
    gas, frequencies = scene.binding.gas, scene.frequencies
    if gas.statistics != "bose" or gas.mass is None or not gas.a_s or gas.a_s > 0 or len(frequencies) != 3:
        return
    omega = 2.0 * math.pi * math.prod(frequencies) ** (1.0 / 3.0)
    critical = _CRITICAL * math.sqrt(HBAR / (gas.mass * omega)) / -gas.a_s
    condensed = scene.number("N_0")
    largest = None if condensed is None else float(condensed.max())
    if largest is not None and largest > critical:
        yield Caution(
            "collapse",
            f"a_s is negative: a condensate of more than about {critical:.2g} particles collapses in this trap "
            f"(harmonic estimate), and {largest:.3g} are asked for.",
        )
