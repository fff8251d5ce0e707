"""Sums of powers: the measures of power-law traps and of particles with E ~ p^s, exactly."""

from __future__ import annotations

from math import inf
from typing import TYPE_CHECKING

import numpy as np

from eoscore.measure.base import FloatArray, Foot, Measure, Nodes
from eoscore.measure.rules import log_panels

if TYPE_CHECKING:
    from collections.abc import Iterable

    from numpy.typing import ArrayLike

__all__ = ["Powers"]

EPS = float(np.finfo(float).eps)


class Powers(Measure):
    """Omega(v) = sum C v^k for v < top, from terms (C, k) with C > 0 and k >= 0; k = 0 is a flat floor."""

    def __init__(
        self,
        terms: Iterable[tuple[float, float]],
        top: float = inf,
        *,
        error: float = EPS,
        route: str = "closed form",
    ) -> None:
        gathered: dict[float, float] = {}
        for coefficient, exponent in terms:
            if not (coefficient >= 0 and exponent >= 0):
                message = f"came {coefficient} v^{exponent}; a measure wants C >= 0 and k >= 0"
                raise ValueError(message)
            gathered[exponent] = gathered.get(exponent, 0.0) + coefficient
        self.terms = tuple((c, k) for k, c in sorted(gathered.items()) if c > 0)
        if not self.terms:
            raise ValueError("came no term; a measure wants at least one C v^k with C > 0")
        (c, k), *others = self.terms
        scale = min(((c / c2) ** (1 / (k2 - k)) for c2, k2 in others), default=inf)
        super().__init__(k, top=top, error=error, route=route, scale=scale)

    def volume(self, v: ArrayLike) -> FloatArray:
        """See `Measure.volume`."""
        energy = np.minimum(np.asarray(v, dtype=float), self.top)
        omega = sum((c * np.maximum(energy, 0.0) ** k for c, k in self.terms), np.zeros_like(energy))
        return np.where(energy >= 0, omega, 0.0)

    def density(self, v: ArrayLike) -> FloatArray:
        """See `Measure.density`."""
        energy = np.asarray(v, dtype=float)
        inside = (energy > 0) & (energy < self.top)
        energy = np.where(inside, energy, 1.0)
        rising = (c * k * energy ** (k - 1) for c, k in self.terms if k > 0)
        return np.where(inside, sum(rising, np.zeros_like(energy)), 0.0)

    def nodes(self, upto: float = inf) -> Nodes:
        """See `Measure.nodes`."""
        end = self.end(upto)
        edge = end * 2.0**-60
        v, dv = log_panels(edge, end)
        coefficient = float(self.volume(edge)) / edge**self.exponent
        return Nodes(v, dv * self.density(v), Foot(coefficient, self.exponent, edge))

    def powers(self) -> tuple[tuple[float, float], ...]:
        """See `Measure.powers`."""
        return self.terms

    def scaled(self, factor: float) -> Powers:
        """See `Measure.scaled`."""
        terms = ((factor * c, k) for c, k in self.terms)
        return Powers(terms, self.top, error=self.error, route=self.route)

    def cut(self, top: float) -> Powers:
        """See `Measure.cut`."""
        return Powers(self.terms, min(top, self.top), error=self.error, route=self.route)
