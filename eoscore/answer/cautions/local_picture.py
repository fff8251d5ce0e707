"""The local density picture: the place must be even over the size of a wave, of the gas as of its condensate."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

import numpy as np

from eoscore.answer.record import Caution
from eoscore.constants import HBAR, K_B
from eoscore.errors import EoscoreError

if TYPE_CHECKING:
    from collections.abc import Iterator

    from eoscore.answer.scene import Scene

_WIDE = 10.0  # wavelengths, or N_0 a_s/a_ho, below which the picture is coarse; common practice, no source


def local_picture(scene: Scene) -> Iterator[Caution]:
    """Caution where kT reaches a region of few wavelengths, or a Thomas-Fermi condensate is small.

    Where the bottom is quadratic, the level spacing says the same of the gas, and more exactly.
    """
    if getattr(scene.binding.place, "levels", None) == "exact":
        return
    wide = None if scene.frequencies else _wavelengths(scene)
    if wide is not None and wide < _WIDE:
        yield Caution(
            "local_picture",
            f"the region that kT reaches is only {wide:.2g} thermal wavelengths wide: the gas is taken as even over a "
            f"wavelength, which is good to a relative order of {min(1.0, 1.0 / wide):.1g} here.",
        )
    repulsion = _repulsion(scene) if scene.binding.gas.treatment == "hartree_fock" else None
    if repulsion is not None and repulsion < _WIDE:
        yield Caution(
            "local_picture",
            f"N_0 a_s/a_ho is only {repulsion:.2g}: the condensate is taken in the Thomas-Fermi limit, without kinetic "
            f"energy, which wants it above about {_WIDE:g}.",
        )


def _wavelengths(scene: Scene) -> float | None:
    """The width of the region with V below kT, from its volume, in thermal wavelengths."""
    held, T = scene.held, scene.temperature
    if T is None:
        return None
    try:
        position = held.position
    except EoscoreError:
        return None
    wave = scene.number("lambda_T")
    if position is None or wave is None or not held.dimension:
        return None
    reached = np.array([min(K_B * T, held.top)])
    return float(position.volume(reached)[0] ** (1.0 / held.dimension) / wave.max())


def _repulsion(scene: Scene) -> float | None:
    """N_0 a_s/a_ho of the smallest condensate in play."""
    gas, frequencies, condensed = scene.binding.gas, scene.frequencies, scene.number("N_0")
    if gas.a_s is None or gas.mass is None or condensed is None or len(frequencies) != 3:
        return None
    some = condensed[condensed >= 1.0]
    omega = 2.0 * math.pi * math.prod(frequencies) ** (1.0 / 3.0)
    return float(some.min() * gas.a_s / math.sqrt(HBAR / (gas.mass * omega))) if some.size else None
