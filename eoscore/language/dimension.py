"""Physical dimensions as exponents of the SI base units."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Final

if TYPE_CHECKING:
    from fractions import Fraction

BASES: Final = ("kg", "m", "s", "A", "K", "mol", "cd")
_NOTHING: Final = (0,) * len(BASES)


def _plain(exponent: Fraction | int) -> Fraction | int:
    return exponent.numerator if exponent.denominator == 1 else exponent


@dataclass(frozen=True)
class Dimension:
    """Exponents of kg, m, s, A, K, mol, cd, in this order; whole ones are kept as int, which is faster."""

    exponents: tuple[Fraction | int, ...] = _NOTHING

    @classmethod
    def of(cls, **exponents: Fraction | int) -> Dimension:
        """Build from base units: `Dimension.of(kg=1, m=2, s=-2)`. Raises TypeError for another base."""
        if strange := exponents.keys() - set(BASES):
            msg = f"unknown base unit {min(strange)!r}; the base units are {', '.join(BASES)}"
            raise TypeError(msg)
        return cls(tuple(_plain(exponents.get(base, 0)) for base in BASES))

    def __mul__(self, other: Dimension) -> Dimension:
        return Dimension(tuple(_plain(a + b) for a, b in zip(self.exponents, other.exponents, strict=True)))

    def __truediv__(self, other: Dimension) -> Dimension:
        return Dimension(tuple(_plain(a - b) for a, b in zip(self.exponents, other.exponents, strict=True)))

    def __pow__(self, power: Fraction | int) -> Dimension:
        return Dimension(tuple(_plain(a * power) for a in self.exponents))

    def __bool__(self) -> bool:
        """False for a plain number."""
        return self.exponents != _NOTHING

    @property
    def base_symbols(self) -> str:
        """In SI base units, such as `kg m2/s2`; `1` for a plain number."""
        above = [_symbol(b, e) for b, e in zip(BASES, self.exponents, strict=True) if e > 0]
        below = [_symbol(b, -e) for b, e in zip(BASES, self.exponents, strict=True) if e < 0]
        return "/".join([" ".join(above) or "1", *below])

    def __str__(self) -> str:
        known = _NAMED.get(self)
        return f"{self.base_symbols} ({known})" if known else self.base_symbols


def _symbol(base: str, exponent: Fraction | int) -> str:
    if exponent == 1:
        return base
    return f"{base}{exponent}" if isinstance(exponent, int) else f"{base}^({exponent})"


ONE: Final = Dimension()

# The names under which a physicist knows a dimension at once (SI Brochure, 9th edition, table 4).
_NAMED: Final = {
    Dimension.of(s=-1): "Hz",
    Dimension.of(kg=1, m=1, s=-2): "N",
    Dimension.of(kg=1, m=-1, s=-2): "Pa",
    Dimension.of(kg=1, m=2, s=-2): "J",
    Dimension.of(kg=1, m=2, s=-3): "W",
    Dimension.of(kg=1, m=2, s=-2, K=-1): "J/K",
    Dimension.of(A=1, s=1): "C",
    Dimension.of(kg=1, m=2, s=-3, A=-1): "V",
    Dimension.of(kg=-1, m=-2, s=4, A=2): "F",
    Dimension.of(kg=1, m=2, s=-3, A=-2): "ohm",
    Dimension.of(kg=1, m=2, s=-2, A=-1): "Wb",
    Dimension.of(kg=1, s=-2, A=-1): "T",
    Dimension.of(kg=1, m=2, s=-2, A=-2): "H",
    Dimension.of(m=2, A=1): "J/T",
}
