"""A chain of one-to-one operations on one formula, v = F(u), and its inverse for rises above a base."""

from __future__ import annotations

from dataclasses import dataclass
from math import inf, log
from typing import TYPE_CHECKING

import numpy as np
from numpy.polynomial import Polynomial

from eoscore.formula.polynomial import polynomial

if TYPE_CHECKING:
    from collections.abc import Sequence

    from eoscore.formula import Formula
    from eoscore.measure.base import FloatArray

__all__ = ["Chain", "Operation", "falls", "linked", "peeled"]

Operation = tuple[str, float]  # shift c, times c, invert, power p, exp, ln, tanh


def peeled(formula: Formula) -> tuple[list[Operation], Formula]:
    """The one-to-one operations around the part of a formula where its variables meet, outermost first."""
    found: list[Operation] = []
    while (link := _link(formula)) is not None:
        operations, formula = link
        found += operations
    return found, formula


def _link(formula: Formula) -> tuple[list[Operation], Formula] | None:
    """The outermost operation of a formula as canonical ones, and its operand; None where there is none."""
    args = formula.operands
    varying = [arg for arg in args if arg.variables]
    if len(varying) != 1:
        return None
    (inner,) = varying
    if len(args) == 1:
        one = {"neg": ("times", -1.0), "sqrt": ("power", 0.5)}.get(formula.op, (formula.op, 0.0))
        return ([one], inner) if one[0] in ("times", "power", "exp", "ln", "tanh") else None
    first = inner is args[0]
    c = args[1].value if first else args[0].value
    match formula.op:
        case "add":
            return [("shift", c)], inner
        case "sub":
            return ([("shift", -c)], inner) if first else ([("shift", c), ("times", -1.0)], inner)
        case "mul" if c:
            return [("times", c)], inner
        case "div" if c:
            return ([("times", 1 / c)], inner) if first else ([("times", c), ("invert", 0.0)], inner)
        case "pow" if first and c and not _folds(inner, c):
            return [("power", c)], inner
        case "pow" if not first and c > 0 and c != 1:
            return [("exp", 0.0), ("times", log(c))], inner
    return None


def _folds(inner: Formula, power: float) -> bool:
    """Whether a power takes two values of a coordinate to one, as x^2 does."""
    terms = polynomial(inner, sorted(inner.variables))
    return power % 2 == 0 and terms is not None and max(map(sum, terms), default=0) <= 1


@dataclass(frozen=True)
class Chain:
    """Operations, outermost first, with the value of each one's operand when the innermost is at its base.

    The whole rises with the innermost value.
    """

    operations: tuple[Operation, ...]
    bases: tuple[float, ...]

    def back(self, rise: FloatArray) -> FloatArray:
        """The rise of the innermost value above its base that lets the whole rise by `rise`."""
        for (op, c), base in zip(self.operations, self.bases, strict=True):
            rise = _back(op, c, base, rise)
        return rise

    def back_slope(self, rise: FloatArray) -> FloatArray:
        """Derivative of `back`."""
        slope = np.ones_like(rise)
        for (op, c), base in zip(self.operations, self.bases, strict=True):
            rise = _back(op, c, base, rise)
            slope = slope / _slope(op, c, base + rise)
        return slope

    def forth(self, rise: float) -> float:
        """The rise of the whole when the innermost value rises by `rise`, inf included."""
        u, start = self.bases[-1] + rise, self.bases[-1]
        for op, c in self.operations[::-1]:
            u, start = _apply(op, c, u), _apply(op, c, start)
        return u - start

    def back_polynomial(self) -> Polynomial | None:
        """`back` as a polynomial with coefficients >= 0; None where it is none."""
        result = Polynomial([0.0, 1.0])
        for (op, c), base in zip(self.operations, self.bases, strict=True):
            if op == "times" and c > 0:
                result = result / c
            elif op == "power" and base >= 0 and 0 < c < 1 and abs(1 / c - round(1 / c)) < 1e-12:
                result = (result + base**c) ** round(1 / c) - base
            elif op != "shift":
                return None
        return Polynomial(np.concatenate([[0.0], result.coef[1:]]))


def falls(operations: Sequence[Operation]) -> bool:
    """Whether the whole falls where the innermost value rises."""
    signs = [c < 0 if op in ("times", "power") else op == "invert" for op, c in operations]
    return sum(signs) % 2 == 1


def linked(operations: Sequence[Operation], base: float) -> Chain | None:
    """The chain on innermost values from a base upwards; None where it is not one-to-one there."""
    u, far, bases = base, inf, []
    for op, c in reversed(operations):
        bases.append(u)
        least, most = min(u, far), max(u, far)
        if least < 0 and ((op == "power" and c % 2 != 1) or op == "ln"):
            return None
        if least <= 0 <= most and far != 0 and (op == "invert" or (op == "power" and c < 0)):
            return None
        u, far = _apply(op, c, u), _apply(op, c, far)
    return Chain(tuple(operations), tuple(reversed(bases))) if np.isfinite([*bases, u]).all() else None


def _apply(op: str, c: float, u: float) -> float:
    with np.errstate(all="ignore"):
        match op:
            case "shift":
                return u + c
            case "times":
                return u * c
            case "invert":
                return float(np.divide(1.0, u))
            case "power":
                return float(np.power(u, c))
        return float({"exp": np.exp, "ln": np.log, "tanh": np.tanh}[op](u))


def _back(op: str, c: float, base: float, rise: FloatArray) -> FloatArray:
    """The rise of the operand above `base`, without differences of nearly equal numbers."""
    match op:
        case "shift":
            return rise
        case "times":
            return rise / c
        case "invert":
            return -base * rise / (1 / base + rise)
        case "power" if base == 0:
            return np.asarray(np.sign(rise) * np.abs(rise) ** (1 / c))
        case "power":
            return np.asarray(base * np.expm1(np.log1p(rise / base**c) / c))
        case "exp":
            return np.asarray(np.log1p(rise / np.exp(base)))
        case "ln":
            return np.asarray(base * np.expm1(rise))
    return np.asarray(np.arctanh(rise / (1 - np.tanh(base) * (np.tanh(base) + rise))))


def _slope(op: str, c: float, u: FloatArray) -> FloatArray:
    match op:
        case "shift":
            return np.ones_like(u)
        case "times":
            return np.full_like(u, c)
        case "invert":
            return -1 / u**2
        case "power":
            return np.asarray(c * u ** (c - 1))
        case "exp":
            return np.asarray(np.exp(u))
        case "ln":
            return 1 / u
    return np.asarray(1 - np.tanh(u) ** 2)
