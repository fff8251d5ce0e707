"""Masses of isotopes, from the table of `periodictable`, which is imported only when a file names one."""

from __future__ import annotations

from typing import TYPE_CHECKING

from eoscore import constants
from eoscore.language.faults import listed

if TYPE_CHECKING:
    from eoscore.language.faults import Faults
    from eoscore.language.nodes import Isotope

__all__ = ["isotope_mass"]


def isotope_mass(node: Isotope, faults: Faults) -> float | None:
    """The mass of a neutral atom in kg; None with a fault where the table does not have it."""
    from periodictable import elements

    try:
        element = elements.symbol(node.symbol)
    except ValueError:
        symbols = [element.symbol for element in elements if element.number > 0]
        message = f"there is no element `{node.symbol}`"
        faults.add(node.span, message, listed(node.symbol, symbols, what="known elements"))
        return None
    if node.mass_number not in element.isotopes:
        known = sorted(element.isotopes, key=lambda number: abs(number - node.mass_number))[:6]
        near = ", ".join(f"{node.symbol}-{number}" for number in sorted(known))
        message = f"no mass is known of `{node.symbol}-{node.mass_number}`"
        faults.add(node.span, message, f"known isotopes near it: {near}; or give the mass itself, `m = 84 u`")
        return None
    return float(element[node.mass_number].mass) * constants.M_U
