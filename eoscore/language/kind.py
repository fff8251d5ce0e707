"""What is known of an expression before it is computed: its dimension, and its value where it is constant."""

from __future__ import annotations

import re
from enum import Enum
from fractions import Fraction
from functools import cache
from typing import NamedTuple

from eoscore.language.nodes import UnitText
from eoscore.language.units import ONE, Dimension, unit_of
from eoscore.source import Source, Span

__all__ = [
    "PURE",
    "UNKNOWN",
    "Dim",
    "Kind",
    "Wild",
    "alike",
    "dimension",
    "divided",
    "power",
    "times",
    "told",
    "unit",
]


class Wild(Enum):
    """Dimensions that fit any other: of the literal 0, and of an expression that is at fault already."""

    ZERO = "the literal 0"
    FAULTY = "at fault already"


Dim = Dimension | Wild


class Kind(NamedTuple):
    """The dimension of an expression, and its SI value where no coordinate or argument decides it."""

    dimension: Dim
    value: float | None = None


UNKNOWN = Kind(Wild.FAULTY)
_FACTOR = re.compile(r"([./]?)([^\W\d]+0?)([+-]?\d+)?")


@cache
def unit(text: str) -> tuple[float, Dimension]:
    """SI factor and dimension of a unit as Tarn writes it (`kg.m/s`), `1` for a pure number."""
    if text == "1":
        return 1.0, ONE
    factors = tuple(
        (symbol, (-1 if joint == "/" else 1) * int(exponent or 1))
        for joint, symbol, exponent in _FACTOR.findall(text)
    )
    nowhere = Span(Source("<unit>", text), 0, len(text))
    return unit_of(UnitText(span=nowhere, factors=factors))


def dimension(text: str) -> Dimension:
    """The dimension of a unit as Tarn writes it."""
    return unit(text)[1]


PURE = ONE


@cache
def times(a: Dim, b: Dim) -> Dim:
    """The dimension of a product; with the literal 0 as a factor it is 0 itself and fits any other."""
    if isinstance(a, Wild) or isinstance(b, Wild):
        return Wild.FAULTY if Wild.FAULTY in (a, b) else Wild.ZERO
    return a * b


@cache
def divided(a: Dim, b: Dim) -> Dim:
    """The dimension of a quotient; 0 divided by anything stays 0."""
    if isinstance(a, Wild) or isinstance(b, Wild):
        return Wild.FAULTY if Wild.FAULTY in (a, b) else a
    return a / b


@cache
def power(base: Dim, exponent: float) -> Dim:
    """The dimension of a power; the exponent is taken as the fraction it is written as."""
    return base if isinstance(base, Wild) else base ** Fraction(exponent).limit_denominator(10**6)


def alike(a: Dim, b: Dim) -> bool:
    """Whether two expressions may be added or compared."""
    return a == b or isinstance(a, Wild) or isinstance(b, Wild)


def told(dim: Dim) -> str:
    """A dimension in words for a message."""
    if isinstance(dim, Wild):
        return dim.value
    return "a pure number" if dim == PURE else str(dim)
