"""SI units of the quantities of `derive`; in the unbounded place all that counts particles is per volume."""

from __future__ import annotations

from typing import Final

__all__ = ["unit_of"]

_UNITS: Final = {
    "T_c": "K",
    "N_c": "1",
    "f_0": "1",
    "U": "J",
    "S": "J/K",
    "C_N": "J/K",
    "rho": "1/J",
    "g": "1",
    "DeltaC": "J/K",
}
_PER_PARTICLE: Final = ("T_c", "f_0", "g")


def unit_of(name: str, per: int = 0) -> str:
    """The unit; `per` is the dimension of the volume that everything is taken per, 0 for none."""
    unit = _UNITS[name]
    if not per or name in _PER_PARTICLE:
        return unit
    if unit == "1":
        return f"m^-{per}"
    return f"{unit}/m^{per}" if per > 1 else f"{unit}/m"
