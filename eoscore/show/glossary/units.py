"""The unit symbols of Tarn; their sizes are those of `eoscore.language.units`."""

from __future__ import annotations

from typing import Final

__all__ = ["UNITS"]

_SI = "SI Brochure, 9th edition (2019)"
_BESIDE = "SI Brochure, 9th edition (2019), table 8"
_CGS = "SI Brochure, 8th edition (2006), table 9"
_CODATA = "CODATA as carried by SciPy"

# symbol: what it is, source
UNITS: Final[dict[str, tuple[str, str]]] = {
    "m": ("metre, of length", _SI),
    "g": ("gram, of mass", _SI),
    "s": ("second, of time", _SI),
    "A": ("ampere, of electric current", _SI),
    "K": ("kelvin, of absolute temperature", _SI),
    "mol": ("mole, of amount", _SI),
    "cd": ("candela, of luminous intensity", _SI),
    "rad": ("radian, of angle; a plain number", _SI),
    "sr": ("steradian, of solid angle; a plain number", _SI),
    "Hz": ("hertz, of frequency", _SI),
    "N": ("newton, of force", _SI),
    "Pa": ("pascal, of pressure", _SI),
    "J": ("joule, of energy", _SI),
    "W": ("watt, of power", _SI),
    "C": ("coulomb, of charge", _SI),
    "V": ("volt, of voltage", _SI),
    "F": ("farad, of capacitance", _SI),
    "ohm": ("ohm, of resistance", _SI),
    "Ω": ("ohm, of resistance", _SI),
    "S": ("siemens, of conductance", _SI),
    "Wb": ("weber, of magnetic flux", _SI),
    "T": ("tesla, of magnetic flux density", _SI),
    "H": ("henry, of inductance", _SI),
    "eV": ("electronvolt, of energy", _BESIDE),
    "Da": ("dalton, of mass: the atomic mass constant", f"{_BESIDE}; {_CODATA}"),
    "G": ("gauss, of magnetic flux density", _CGS),
    "bar": ("bar, of pressure", _CGS),
    "u": ("atomic mass unit, the dalton", f"{_BESIDE}; {_CODATA}"),
    "a0": ("Bohr radius, of length, in which scattering lengths are told", _CODATA),
    "angstrom": ("angstrom, of length", _CGS),
    "Å": ("angstrom, of length", _CGS),
    "deg": ("degree of angle; a plain number", _BESIDE),
    "min": ("minute, of time", _BESIDE),
}
