"""A momentum zone has an edge, and a gas hot against the width of its band feels it."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.answer.record import Caution
from eoscore.constants import K_B

if TYPE_CHECKING:
    from collections.abc import Iterator

    from eoscore.answer.scene import Scene

_NARROW = 5.0  # widths in kT below which the upper edge of the band is felt at the level of e^-5


def zone(scene: Scene) -> Iterator[Caution]:
    """Caution where the band's width is less than five times kT."""
    energy, temperatures = scene.binding.gas.energy, scene.number("T")
    if energy is None or not energy.walls or temperatures is None:
        return
    width = _width(scene, K_B * float(temperatures.max()))
    if width < _NARROW:
        yield Caution(
            "momentum_zone",
            f"the band is about {width:.2g} kT wide: the gas fills its momentum zone to the edge, and states of "
            "higher bands are not counted.",
        )


def _width(scene: Scene, kT: float) -> float:
    """The energy in kT below which all states of the zone lie, to a few percent; infinite above 100 kT."""
    energies = np.geomspace(1e-3, 100.0, 401)
    below = np.asarray(scene.held.momentum.volume(kT * energies))
    if below[-1] > (1.0 + 1e-9) * below[-20]:
        return np.inf
    return float(energies[np.argmax(below >= (1.0 - 1e-9) * below[-1])])
