"""A trap that is shallow against kT loses its hottest particles."""

from __future__ import annotations

from typing import TYPE_CHECKING

from eoscore.answer.record import Caution
from eoscore.constants import K_B

if TYPE_CHECKING:
    from collections.abc import Iterator

    from eoscore.answer.scene import Scene

_DEEP = 8.0  # eta at which evaporation is slow against the other losses; common practice, no source


def shallow(scene: Scene) -> Iterator[Caution]:
    """Caution where the depth is less than eight times kT."""
    depth = scene.number("depth") if scene.binding.place is not None else None
    temperatures = scene.number("T")
    if temperatures is None:
        temperatures = scene.number("T_c")
    if depth is None or temperatures is None:
        return
    eta = float(depth.min()) / (K_B * float(temperatures.max()))
    if eta < _DEEP:
        yield Caution(
            "shallow",
            f"the depth is only {eta:.3g} kT: the gas evaporates, and T will not stay where it is put. States "
            "above the escape energy are not counted.",
        )
