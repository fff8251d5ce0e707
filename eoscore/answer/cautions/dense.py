"""A density at which recombination of three particles usually limits the life of the gas."""

from __future__ import annotations

from typing import TYPE_CHECKING

from eoscore.answer.record import Caution

if TYPE_CHECKING:
    from collections.abc import Iterator

    from eoscore.answer.scene import Scene

_DENSE = 1e20  # m^-3, 1e14 cm^-3; common practice, no source


def dense(scene: Scene) -> Iterator[Caution]:
    """Caution for atoms in three dimensions above 1e14 cm^-3."""
    gas, density = scene.binding.gas, scene.density
    if gas.mass is None or gas.dispersion != "free" or not gas.a_s or density is None or density < _DENSE:
        return
    yield Caution(
        "three_body_loss",
        f"the peak density reaches {density * 1e-6:.2g} cm^-3; above about 1e14 cm^-3 loss by three-body "
        "recombination usually matters (common practice).",
    )
