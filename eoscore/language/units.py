"""The units a Tarn number may carry: SI symbols with their prefixes, and the few others of the trade."""

from __future__ import annotations

from difflib import get_close_matches
from fractions import Fraction
from functools import cache, lru_cache
from typing import TYPE_CHECKING, Final

from eoscore import constants
from eoscore.language.dimension import ONE, Dimension
from eoscore.language.faults import Fault, Faults
from eoscore.language.reserved import LINE_WORDS, RESERVED
from eoscore.source import Span

if TYPE_CHECKING:
    from eoscore.language.nodes import UnitText

__all__ = ["ONE", "PLAIN", "PREFIXED", "PREFIXES", "Dimension", "known_unit", "unit_faults", "unit_of"]

# SI Brochure, 9th edition (2019, version 3.01), table 7. `µ` is spelt u, µ (U+00B5) or μ (U+03BC).
PREFIXES: Final = {
    "q": -30, "r": -27, "y": -24, "z": -21, "a": -18, "f": -15, "p": -12, "n": -9, "u": -6, "µ": -6, "μ": -6,
    "m": -3, "c": -2, "d": -1, "da": 1, "h": 2, "k": 3, "M": 6, "G": 9, "T": 12, "P": 15, "E": 18, "Z": 21,
    "Y": 24, "R": 27, "Q": 30,
}  # fmt: skip

_energy = Dimension.of(kg=1, m=2, s=-2)
_field = Dimension.of(kg=1, s=-2, A=-1)
_resistance = Dimension.of(kg=1, m=2, s=-3, A=-2)

# Symbols that take prefixes: the factor to the SI unit and the dimension (SI Brochure, tables 2 and 4).
PREFIXED: Final[dict[str, tuple[float | Fraction, Dimension]]] = {
    "m": (1, Dimension.of(m=1)),
    "g": (Fraction(1, 1000), Dimension.of(kg=1)),
    "s": (1, Dimension.of(s=1)),
    "A": (1, Dimension.of(A=1)),
    "K": (1, Dimension.of(K=1)),
    "mol": (1, Dimension.of(mol=1)),
    "cd": (1, Dimension.of(cd=1)),
    "rad": (1, ONE),
    "sr": (1, ONE),
    "Hz": (1, Dimension.of(s=-1)),
    "N": (1, Dimension.of(kg=1, m=1, s=-2)),
    "Pa": (1, Dimension.of(kg=1, m=-1, s=-2)),
    "J": (1, _energy),
    "W": (1, Dimension.of(kg=1, m=2, s=-3)),
    "C": (1, Dimension.of(A=1, s=1)),
    "V": (1, Dimension.of(kg=1, m=2, s=-3, A=-1)),
    "F": (1, Dimension.of(kg=-1, m=-2, s=4, A=2)),
    "ohm": (1, _resistance),
    "Ω": (1, _resistance),
    "S": (1, _resistance**-1),
    "Wb": (1, Dimension.of(kg=1, m=2, s=-2, A=-1)),
    "T": (1, _field),
    "H": (1, Dimension.of(kg=1, m=2, s=-2, A=-2)),
    "eV": (constants.E, _energy),
    "Da": (constants.M_U, Dimension.of(kg=1)),
    "G": (Fraction(1, 10**4), _field),  # gauss: SI Brochure, 8th edition, table 9
    "bar": (10**5, Dimension.of(kg=1, m=-1, s=-2)),
}

# Symbols that stand without a prefix.
PLAIN: Final[dict[str, tuple[float | Fraction, Dimension]]] = {
    "u": (constants.M_U, Dimension.of(kg=1)),
    "a0": (constants.A_0, Dimension.of(m=1)),
    "angstrom": (Fraction(1, 10**10), Dimension.of(m=1)),
    "Å": (Fraction(1, 10**10), Dimension.of(m=1)),
    "deg": (constants.PI / 180, ONE),
    "min": (60, Dimension.of(s=1)),
}

# What people write out, or borrow from elsewhere, and the symbol that is meant.
_SPELT_OUT: Final = {
    "kelvin": "K", "metre": "m", "meter": "m", "second": "s", "sec": "s", "gauss": "G", "tesla": "T", "joule": "J",
    "watt": "W", "hertz": "Hz", "micron": "um", "amu": "u", "volt": "V", "ampere": "A", "amp": "A", "newton": "N",
    "pascal": "Pa", "degree": "deg", "radian": "rad", "minute": "min", "bohr": "a0", "gram": "g", "kilogram": "kg",
    "electronvolt": "eV", "mole": "mol", "ang": "angstrom",
}  # fmt: skip
_LONGEST: Final = 12  # a longer word is no slip of a unit
_CELSIUS: Final = frozenset({"°C", "degC", "celsius", "°F", "degF", "fahrenheit", "℃"})


@cache
def known_unit(symbol: str) -> tuple[Fraction | float, Dimension] | None:
    """Factor to SI and dimension of one symbol with or without a prefix; None if nobody knows it."""
    plain = PLAIN.get(symbol) or PREFIXED.get(symbol)
    if plain:
        return plain
    for length in (1, 2):
        prefix, rest = symbol[:length], symbol[length:]
        if prefix in PREFIXES and rest in PREFIXED:
            factor, dimension = PREFIXED[rest]
            return factor * Fraction(10) ** PREFIXES[prefix], dimension
    return None


@lru_cache(maxsize=1024)
def _product(factors: tuple[tuple[str, int], ...]) -> tuple[float, Dimension]:
    """Exact as long as the factors are, and rounded once; OverflowError where no double holds it."""
    total: Fraction | float = Fraction(1)
    dimension = ONE
    for symbol, exponent in factors:
        known = known_unit(symbol)
        if known is None:
            raise LookupError(symbol)
        total = total * known[0] ** exponent
        dimension = dimension * known[1] ** exponent
    return float(total), dimension


def unit_of(unit: UnitText) -> tuple[float, Dimension]:
    """The factor that turns a number in this unit into SI, and its dimension.

    Raises TarnError with the near known symbols for each symbol that is unknown.
    """
    if found := unit_faults(unit):
        faults = Faults()
        for fault in found:
            faults.append(fault)
        faults.raise_if_any()
    return _product(unit.factors)


def unit_faults(unit: UnitText) -> list[Fault]:
    """A fault for each unknown symbol, or one where the whole is out of the range of numbers."""
    try:
        _product(unit.factors)
    except LookupError:
        unknown = [symbol for symbol, _ in unit.factors if known_unit(symbol) is None]
        return [unknown_unit(symbol, _where(symbol, unit)) for symbol in unknown]
    except (OverflowError, ZeroDivisionError):
        message = f"`{unit.span.text}` came, a unit beyond the range of numbers"
        return [Fault(unit.span, message, "lower its exponents")]
    return []


def _where(symbol: str, unit: UnitText) -> Span:
    start = unit.span.start + max(unit.span.text.find(symbol), 0)
    return Span(unit.span.source, start, min(start + len(symbol), unit.span.end))


def unknown_unit(symbol: str, span: Span) -> Fault:
    """The fault of a word after a number that is no unit."""
    if symbol in _CELSIUS:
        message = f"`{symbol}` came after a number, but temperatures are absolute: there is no degree Celsius"
        return Fault(span, message, "write the temperature in K, mK, uK or nK")
    message = (
        f"`{symbol}` came after a number on its line, where a unit was expected, and no unit is called so"
    )
    if symbol in RESERVED or symbol in LINE_WORDS:
        return Fault(span, message, f"begin a new line before `{symbol}`")
    asked = " or ".join(f"`{name}`" for name in near_units(symbol))
    units = (
        f"did you mean {asked}?" if asked else "units are SI symbols with prefixes, such as `um` or `J.m2/W`;"
    )
    mend = f"` / {symbol}`" if span.source.text[max(span.start - 1, 0)] == "/" else f"`*{symbol}`"
    return Fault(
        span, message, f"{units} write {mend} if it is a name, or a new line before it if it opens one"
    )


def near_units(symbol: str) -> list[str]:
    """Up to three known symbols that look like this one, the nearest first."""
    spelt = _SPELT_OUT.get(symbol.lower()) or _SPELT_OUT.get(symbol.lower().removesuffix("s"))
    return [spelt] if spelt else _alike(symbol)


@cache
def _alike(symbol: str) -> list[str]:
    usual = [
        *PLAIN,
        *PREFIXED,
        *(p + s for s in PREFIXED for p in ("k", "M", "G", "c", "m", "u", "n", "p", "f")),
    ]
    if len(symbol) > _LONGEST:
        return []
    same = [u for u in usual if u.lower() == symbol.lower()]
    return (same + [u for u in get_close_matches(symbol, usual, 3, 0.6) if u not in same])[:3]
