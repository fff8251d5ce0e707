"""The energy of a dispersion, written in Tarn, as a formula and as a SymPy expression."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from eoscore.formula.field import Field
from eoscore.language.kind import dimension

if TYPE_CHECKING:
    from eoscore.formula import Formula
    from eoscore.gas.dispersion import Dispersion
    from eoscore.language.units import Dimension

__all__ = ["compiled", "symbolic"]

MOMENTUM, ENERGY = "kg.m/s", "J"


def compiled(dispersion: Dispersion) -> Field:
    """The energy text and its walls as formulas of the momenta.

    TarnError where a text does not read, names what is not known, or has another dimension.
    """
    return Field(
        dispersion.momentum,
        _formula(dispersion, dispersion.energy, ENERGY),
        tuple(_formula(dispersion, wall, MOMENTUM) for wall in dispersion.walls),
    )


def _formula(dispersion: Dispersion, text: str, unit: str) -> Formula:
    from eoscore.language.compile import compile_text

    momenta = {name: dimension(MOMENTUM) for name in dispersion.momentum}
    values: dict[str, tuple[float, Dimension]] = {
        p.name: (dispersion.values[p.name], dimension(p.unit))
        for p in dispersion.parameters
        if p.name in dispersion.values
    }
    if dispersion.mass is not None:
        values["m"] = (dispersion.mass, dimension("kg"))
    return compile_text(text, momenta, values, dimension(unit))


def symbolic(dispersion: Dispersion) -> Any:
    """The energy text over SymPy symbols of the momenta, the parameters and m."""
    from eoscore.language.symbolic import symbolic_text

    return symbolic_text(
        dispersion.energy, [*dispersion.momentum, *(p.name for p in dispersion.parameters), "m"]
    )
