"""Arithmetic on the values of constant expressions: never an exception, infinity or nan where there is no number."""

from __future__ import annotations

import math
import operator
from fractions import Fraction
from typing import TYPE_CHECKING

from eoscore import formula
from eoscore.language.units import unit_of

if TYPE_CHECKING:
    from collections.abc import Callable, Sequence

    from eoscore.language.nodes import Number

__all__ = ["COMPARISONS", "binary_value", "call_value", "si_sigma", "si_value"]

COMPARISONS: dict[str, Callable[[float, float], bool]] = {
    "<": operator.lt,
    "<=": operator.le,
    ">": operator.gt,
    ">=": operator.ge,
}
_OPERATORS: dict[str, Callable[[float, float], float]] = {
    "+": operator.add,
    "-": operator.sub,
    "*": operator.mul,
    "/": operator.truediv,
    "^": math.pow,
}


def binary_value(sign: str, left: float | None, right: float | None) -> float | None:
    """The value of `left sign right`; None where a side has none."""
    if left is None or right is None:
        return None
    try:
        return _OPERATORS[sign](left, right)
    except (OverflowError, ZeroDivisionError):
        return math.inf
    except ValueError:  # a negative number to a broken power
        return math.nan


def call_value(name: str, values: Sequence[float | None]) -> float | None:
    """The value of a function of Tarn; None where an argument has none."""
    known = [value for value in values if value is not None]
    return float(formula.call(name, *known).value) if len(known) == len(values) else None


def si_value(node: Number) -> float:
    """A literal in SI, rounded once: `1.6 um` is the double nearest to 1.6e-6."""
    if node.unit is None or node.value == 0:
        return node.value
    factor = unit_of(node.unit)[0]
    inverse = round(1 / factor) if 1e-22 <= factor < 1 else 0
    if inverse and 1 / inverse == factor:
        return float(Fraction(node.text) / inverse)
    return node.value * factor


def si_sigma(node: Number) -> float:
    """The standard deviation of a literal in SI, 0 where it has none."""
    return (node.sigma or 0.0) * (unit_of(node.unit)[0] if node.unit else 1.0)
