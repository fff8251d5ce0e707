"""Masses of isotopes: of the neutral atom, AME2020 (Wang et al., Chin. Phys. C 45, 030003, 2021).

The table is the one that `periodictable` carries; it is imported when the first isotope is asked for. This file
imports no other of its room, so that whoever reads `isotope Sr-84` may ask it.
"""

from __future__ import annotations

from difflib import get_close_matches
from functools import cache

from eoscore.constants import M_U
from eoscore.errors import UnknownIsotopeError

__all__ = ["isotope_mass", "isotope_mass_uncertainty"]


@cache
def isotope_mass(symbol: str, mass_number: int) -> float:
    """Mass of the neutral atom in its ground state, in kg; UnknownIsotopeError with a suggestion if there is none."""
    return _entry(symbol, mass_number)[0] * M_U


@cache
def isotope_mass_uncertainty(symbol: str, mass_number: int) -> float:
    """One standard deviation of the mass as AME2020 gives it, in kg (that of the unit u itself is not in it)."""
    return _entry(symbol, mass_number)[1] * M_U


def _entry(symbol: str, mass_number: int) -> tuple[float, float]:
    """Mass and its standard deviation in u."""
    from periodictable import elements

    symbols = {element.symbol: element for element in elements if element.number > 0}
    if symbol not in symbols:
        raise UnknownIsotopeError(f"{symbol}-{mass_number}", _nearest_symbols(symbol, mass_number, symbols))
    element = symbols[symbol]
    if mass_number not in element.isotopes:
        near = sorted(sorted(element.isotopes, key=lambda a: abs(a - mass_number))[:5])
        raise UnknownIsotopeError(f"{symbol}-{mass_number}", [f"{symbol}-{a}" for a in near])
    isotope = element[mass_number]
    return float(isotope.mass), float(isotope._mass_unc)


def _nearest_symbols(symbol: str, mass_number: int, symbols: dict[str, object]) -> list[str]:
    """Isotopes whose symbol is like the one that came, the same in other letter case first."""
    same = [known for known in symbols if known.lower() == symbol.lower()]
    near = same or get_close_matches(symbol.capitalize(), symbols, n=3, cutoff=0.5)
    return [f"{known}-{mass_number}" for known in near]
