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
    place = scene.binding.place
    gas = scene.binding.gas
    if place is None or gas.mass is None or gas.dispersion != "free" or not gas.a_s:
        return
    density = scene.number("n_peak")
    if density is None or float(density.max()) < _DENSE:
        return
    if scene.held.find(("n_peak",), scene.given)["n_peak"].unit != "m^-3":
        return
    yield Caution(
        "three_body_loss",
        f"the peak density reaches {float(density.max()) * 1e-6:.2g} cm^-3; above about 1e14 cm^-3 loss by "
        "three-body recombination usually matters (common practice).",
    )
