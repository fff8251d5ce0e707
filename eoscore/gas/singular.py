"""The singular part of the Bose function at alpha = 0, one class for each form it takes.

An order s = m + 1 + eps, m the nearest whole number, has the part Gamma(1-s) alpha^(s-1). From m = 17 on it is below
1e-18 of the function everywhere before the seam, and left out.
"""

from __future__ import annotations

import math
from abc import ABC, abstractmethod
from dataclasses import dataclass
from decimal import Decimal
from fractions import Fraction
from typing import TYPE_CHECKING

import numpy as np

from eoscore.gas.precise import gamma, moved, precisely

if TYPE_CHECKING:
    from eoscore.gas.blocks import Block

__all__ = ["Absent", "AbstractSingular", "Logarithm", "Power", "Root", "singular_of"]


class AbstractSingular(ABC):
    """A function of alpha > 0."""

    @abstractmethod
    def __call__(self, alpha: Block) -> Block:
        """The part at every alpha, as a new array."""

    @abstractmethod
    def scalar(self, alpha: float) -> float:
        """The part at one alpha: arrays would cost ten times as much there."""


class Absent(AbstractSingular):
    """Nothing."""

    def __call__(self, alpha: Block) -> Block:
        """The part at every alpha."""
        return np.zeros(alpha.size)

    def scalar(self, alpha: float) -> float:
        """The part at one alpha."""
        return 0.0 * alpha


@dataclass(frozen=True)
class Root(AbstractSingular):
    """factor * alpha^(whole - 1/2), whole >= 0: half-integer orders from 1/2 on."""

    factor: float
    whole: int

    def __call__(self, alpha: Block) -> Block:
        """The part at every alpha."""
        result = np.sqrt(alpha)
        if not self.whole:
            return np.divide(self.factor, result, out=result)
        result *= self.factor
        for _ in range(self.whole - 1):
            result *= alpha
        return result

    def scalar(self, alpha: float) -> float:
        """The part at one alpha."""
        return self.factor * math.sqrt(alpha) ** (2 * self.whole - 1)


@dataclass(frozen=True)
class Power(AbstractSingular):
    """factor * alpha^(s - 1), orders below 1/2; s - 1 is not always a double, then it is alpha^s / alpha."""

    factor: float
    order: float
    """s - 1, or s where the power is still to be divided by alpha."""
    divided: bool

    def __call__(self, alpha: Block) -> Block:
        """The part at every alpha."""
        result = np.power(alpha, self.order)
        if self.divided:
            result /= alpha
        result *= self.factor
        return result

    def scalar(self, alpha: float) -> float:
        """The part at one alpha."""
        try:
            power: float = alpha**self.order
            return self.factor * (power / alpha if self.divided else power)
        except OverflowError:
            return math.inf


@dataclass(frozen=True)
class Logarithm(AbstractSingular):
    """factor * alpha^whole * (alpha^eps - 1) / eps, with its limit ln alpha at eps = 0."""

    factor: float
    whole: int
    eps: float

    def __call__(self, alpha: Block) -> Block:
        """The part at every alpha."""
        result = np.log(alpha)
        if self.eps:
            result *= self.eps
            grown = np.flatnonzero(result > 1.0)
            if grown.size < result.size:
                np.expm1(result, out=result)
            # A rounded logarithm has no last bits left once it is multiplied by hundreds: the power itself has.
            if grown.size:
                result[grown] = np.power(alpha.take(grown), self.eps) - 1.0
            result /= self.eps
        result *= self.factor
        for _ in range(self.whole):
            result *= alpha
        return result

    def scalar(self, alpha: float) -> float:
        """The part at one alpha."""
        ratio = math.log(alpha)
        if self.eps:
            ratio *= self.eps
            ratio = (alpha**self.eps - 1.0 if ratio > 1.0 else math.expm1(ratio)) / self.eps
        return self.factor * ratio * alpha**self.whole


@precisely
def singular_of(s: float, zeta: list[Decimal]) -> AbstractSingular:
    """The singular part at the order s; the row zeta(s - k) is changed where it takes part of the pole."""
    order, m = moved(s), math.ceil(s - 0.5) - 1
    if s >= 17.5:
        zeta[m] = Decimal(0)
        return Absent()
    eps = order - 1 - m
    full = gamma(1 - eps)
    if m < 0:
        for j in range(-m - 1):
            full *= 1 - eps + j
        rounded = Fraction(s) - 1 != Fraction(s - 1)
        return Power(float(full), s if rounded else s - 1, rounded)
    for j in range(1, m + 1):
        full /= 1 + eps / j
    front = Decimal((-1) ** m) / math.factorial(m)
    if 2 * s == round(2 * s) and s != round(s):
        return Root(float(-full / eps * front), round(s + 0.5) - 1)
    zeta[m] -= full / eps
    return Logarithm(float(-full * front), m, s - 1 - m)
