"""The unit of a dimension as the documents write it: `J`, `1`, `m^-3`, `kg m s^-2`."""

from __future__ import annotations

from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from eoscore.language.dimension import Dimension

__all__ = ["quantity_unit", "unit_of_dimension"]

# tarn.md's table of quantities; d stands for the dimension of the place.
_UNITS = (
    dict.fromkeys(("T_c", "T"), "K")
    | dict.fromkeys(("n_c", "n", "n_peak"), "m^-d")
    | dict.fromkeys(("mu", "U", "depth", "V_min"), "J")
    | dict.fromkeys(("S", "C_N"), "J/K")
    | {
        "lambda_T": "m",
        "r_min": "m",
        "freq": "Hz",
        "rate_coll": "1/s",
        "pressure": "J/m^d",
        "kappa_T": "m^d/J",
    }
)


def quantity_unit(name: str, dimension: int | None) -> str:
    """The SI unit of a quantity of the language; `1` for pure numbers."""
    unit = _UNITS.get(name, "1")
    if "d" not in unit or dimension is None:
        return unit
    return unit.replace("^d", "" if dimension == 1 else f"^{dimension}").replace("-d", f"-{dimension}")


def unit_of_dimension(dimension: Dimension) -> str:
    """The symbol the trade uses where there is one, else the base units with their powers."""
    words = str(dimension)
    if words.endswith(")") and " (" in words:
        return words.rsplit(" (", 1)[1].removesuffix(")")
    bases = ("kg", "m", "s", "A", "K", "mol", "cd")
    powers = zip(bases, dimension.exponents, strict=True)
    return " ".join(base if power == 1 else f"{base}^{power}" for base, power in powers if power) or "1"
