"""Interactions that an ideal gas leaves out, told by their first-order shift and by the gas parameter."""

from __future__ import annotations

from typing import TYPE_CHECKING

from eoscore.answer.record import Caution

if TYPE_CHECKING:
    from collections.abc import Iterator

    from eoscore.answer.scene import Scene

_WORTH_SAYING = 0.01
_DILUTE = 1e-4  # n a^3 below this is called dilute; common practice, no source


def interactions(scene: Scene) -> Iterator[Caution]:
    """Caution where the scattering length moves T_c by more than a percent, or the gas is not dilute."""
    a_s = scene.binding.gas.a_s
    if not a_s:
        return
    shifts = scene.number("shift_int") if scene.binding.gas.treatment is None else None
    if shifts is not None and (shift := float(max(shifts.tolist(), key=abs))) and abs(shift) > _WORTH_SAYING:
        yield Caution(
            "interactions",
            f"interactions are left out: to first order in a_s they move T_c by {100.0 * shift:+.2g} % "
            "(see `shift_int`).",
        )
    density = scene.number("n_peak")
    if density is not None and (dilution := float(density.max()) * abs(a_s) ** 3) > _DILUTE:
        yield Caution(
            "not_dilute",
            f"n a_s^3 reaches {dilution:.1e}; above {_DILUTE:.0e} the first order in a_s is not enough.",
        )
