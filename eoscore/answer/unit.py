"""The unit of a dimension as the documents write it: `J`, `1`, `m^-3`, `kg m s^-2`."""

from __future__ import annotations

from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from eoscore.language.dimension import Dimension

__all__ = ["unit_of_dimension"]


def unit_of_dimension(dimension: Dimension) -> str:
    """The symbol the trade uses where there is one, else the base units with their powers."""
    words = str(dimension)
    if words.endswith(")") and " (" in words:
        return words.rsplit(" (", 1)[1].removesuffix(")")
    bases = ("kg", "m", "s", "A", "K", "mol", "cd")
    powers = zip(bases, dimension.exponents, strict=True)
    return " ".join(base if power == 1 else f"{base}^{power}" for base, power in powers if power) or "1"
