"""A momentum zone has an edge, and a gas hot against its width feels it."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.answer.record import Caution
from eoscore.constants import K_B

if TYPE_CHECKING:
    from collections.abc import Iterator

    from eoscore.answer.scene import Scene

_NARROW = 5.0  # widths of the band below which its upper edge is felt at the level of e^-5


def zone(scene: Scene) -> Iterator[Caution]:
    """Caution where the band's width is less than five times kT."""
    energy = scene.binding.gas.energy
    temperatures = scene.number("T")
    if energy is None or not energy.walls or temperatures is None:
        return
    width = scene.held.gas.momentum_measure(len(energy.coordinates)).top
    if not np.isfinite(width) or width > _NARROW * K_B * float(temperatures.max()):
        return
    yield Caution(
        "momentum_zone",
        f"the band is {width / (K_B * float(temperatures.max())):.2g} kT wide: the gas fills its momentum zone to "
        "the edge, and states of higher bands are not counted.",
    )
