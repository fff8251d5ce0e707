"""kT against the level spacing: the semiclassical picture wants many levels within kT, in every direction."""

from __future__ import annotations

from typing import TYPE_CHECKING

from eoscore.answer.record import Caution
from eoscore.constants import K_B, H

if TYPE_CHECKING:
    from collections.abc import Iterator

    from eoscore.answer.scene import Scene

_FEW = 10.0  # levels within kT; common practice, no source


def level_spacing(scene: Scene) -> Iterator[Caution]:
    """Caution where kT is less than ten times the spacing of the stiffest direction."""
    exact = getattr(scene.binding.place, "levels", None) == "exact"
    if exact or scene.temperature is None or not scene.frequencies:
        return
    stiffest = scene.frequencies[-1]
    levels = K_B * scene.temperature / (H * stiffest)
    if levels < 1.0:
        yield Caution(
            "reduced_dimension",
            f"kT is {levels:.2g} times the level spacing h f of the stiffest direction (f = {stiffest:.4g} Hz): "
            "that direction is frozen and the counting of states as a continuum fails there; hold it as exact "
            "levels with `dispersion trapped`.",
        )
    elif levels < _FEW:
        yield Caution(
            "level_spacing",
            f"kT is only {levels:.2g} times the level spacing h f of the stiffest direction "
            f"(f = {stiffest:.4g} Hz); the levels are counted as a continuum, which is good to a relative order "
            f"of {1.0 / levels:.1g}.",
        )
