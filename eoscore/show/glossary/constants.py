"""The constants that Tarn knows everywhere; their values are those of `eoscore.constants`."""

from __future__ import annotations

from typing import Final

__all__ = ["CONSTANTS"]

_EXACT = "exact, SI Brochure, 9th edition (2019)"
_MEASURED = "measured, CODATA as carried by SciPy"

# name: what it is, formula, source
CONSTANTS: Final[dict[str, tuple[str, str, str]]] = {
    "pi": ("circumference of a circle over its diameter", "4*atan(1)", "mathematics"),
    "hbar": ("reduced Planck constant", "h/(2*pi)", _EXACT),
    "h": ("Planck constant", "", _EXACT),
    "k_B": ("Boltzmann constant", "", _EXACT),
    "c": ("speed of light in vacuum", "", _EXACT),
    "e": ("elementary charge", "", _EXACT),
    "m_e": ("mass of the electron", "", _MEASURED),
    "m_u": ("atomic mass constant, a twelfth of the mass of a carbon-12 atom", "m(C-12)/12", _MEASURED),
    "mu_B": ("Bohr magneton", "e*hbar/(2*m_e)", _MEASURED),
    "mu_0": ("magnetic constant", "1/(epsilon_0*c^2)", _MEASURED),
    "epsilon_0": ("electric constant", "1/(mu_0*c^2)", _MEASURED),
    "a_0": ("Bohr radius", "4*pi*epsilon_0*hbar^2/(m_e*e^2)", _MEASURED),
    "g_n": ("standard acceleration of gravity", "", "conventional, 3rd CGPM (1901)"),
}
