"""Exact sums over the true levels of a place."""

from __future__ import annotations

from math import prod
from typing import TYPE_CHECKING

import numpy as np

from eoscore.errors import NoAnswerError
from eoscore.gas.multiples import multiples_of
from eoscore.state.ensemble import EPS, Ensemble
from eoscore.state.exact.direction import END, OnAtoms
from eoscore.state.exact.direction import Sums as OfLevels
from eoscore.state.sums import Sums

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from eoscore.state.exact.direction import Atoms, Direction
    from eoscore.state.reading import FloatArray

__all__ = ["ExactLevels"]


class ExactLevels(Ensemble):
    """Bosons or classical particles on the levels of independent directions; mu and U count from the lowest level.

    For bosons the sums leave the lowest level out: it holds the condensate, mu = its energy at saturation.
    """

    route = "exact sums over the levels of the place"

    def __init__(self, directions: tuple[Direction, ...], statistics: str, degeneracy: float) -> None:
        self.directions, self.statistics, self.degeneracy = directions, statistics, degeneracy
        self._asked = self.gap

    @property
    def lowest(self) -> float:
        """The energy of the lowest level, J from the bottom of V."""
        return sum(direction.lowest for direction in self.directions)

    @property
    def gap(self) -> float:
        """From the lowest level to the next, J."""
        return min(direction.gap for direction in self.directions)

    @property
    def error(self) -> float:
        """See `Ensemble.error`: at the temperature asked last."""
        return float(self.error_at(np.array([self._asked]))[0])

    def error_at(self, kT: FloatArray) -> FloatArray:
        """See `Ensemble.error_at`."""
        each = [sum(d.error_at(t) for d in self.directions) + 4000 * EPS for t in kT.tolist()]
        return np.asarray(each, dtype=float)

    @property
    def condenses(self) -> bool:
        """See `Ensemble.condenses`: the sum over discrete levels always ends."""
        return self.statistics == "bose"

    def all_sums(self, alpha: FloatArray, kT: FloatArray) -> Sums:
        """See `Ensemble.all_sums`."""
        for direction in self.directions:
            if isinstance(direction, OnAtoms):
                direction.atoms(float(kT.max()))  # so that it is not made again for each higher temperature
        columns = [self._point(a, t) for a, t in zip(alpha.tolist(), kT.tolist(), strict=True)]
        return Sums(*np.array(columns).T)

    def _point(self, alpha: float, kT: float) -> tuple[float, ...]:
        self._asked = kT
        only = self.directions[0]
        if self.statistics == "bose" and len(self.directions) == 1 and isinstance(only, OnAtoms):
            return self._occupied(only.atoms(kT), alpha, kT)
        total = np.zeros(6)
        for rule in multiples_of(self.statistics, alpha + self.gap / kT):
            with np.errstate(under="ignore"):
                weight = rule.weight * np.exp(-rule.at * alpha)
            z0, z1, z2 = self.partition(rule.at / kT, kT)
            z1, z2 = z1 / kT, z2 / kT**2
            for row, (power, z) in enumerate(((-1, z0), (0, z0), (0, z1), (1, z0), (1, z1), (1, z2))):
                total[row] += float(np.real((weight * rule.at**power * z).sum()))
        return self._ordered(total, alpha, kT)

    def _occupied(self, atoms: Atoms, alpha: float, kT: float) -> tuple[float, ...]:
        """The sums of `_point`, level by level: n = 1/(e^x - 1), its slope n (1 + n)."""
        e = np.minimum(atoms.e / kT, END)
        n = 1 / np.expm1(np.minimum(e + alpha, END))
        y = np.log1p(n)
        b = n * (1 + n)
        total = (np.array([y, n, e * n, b, e * b, e * e * b]) * atoms.w).sum(axis=1)
        return self._ordered(total, alpha, kT)

    def _ordered(self, total: FloatArray, alpha: float, kT: float) -> tuple[float, ...]:
        y, n, x, b0, x1, x2 = (self.degeneracy * total).tolist()
        b1, b2 = x1 + alpha * b0, x2 + 2 * alpha * x1 + alpha**2 * b0
        return n, kT * x, y + x + alpha * n, y, b0, b1, b2

    def partition(self, beta: NDArray[np.inexact], kT: float) -> OfLevels:
        """The product over the directions, without the lowest level where bosons are counted."""
        known = {each: each.sums(beta, kT) for each in dict.fromkeys(self.directions)}  # equal ones once
        parts = [known[direction] for direction in self.directions]
        excited, mean, variance = 0.0 * beta, 0.0 * beta, 0.0 * beta
        for z0, z1, z2 in parts:
            excited = excited + np.log1p(z0)
            first = z1 / (1 + z0)
            mean, variance = mean + first, variance + z2 / (1 + z0) - first**2
        excited = np.expm1(excited)
        whole = excited + 1
        without = excited if self.statistics == "bose" else whole
        return OfLevels(without, whole * mean, whole * (mean**2 + variance))

    def below(self, number: FloatArray) -> FloatArray:
        """See `Ensemble.below`: climbing from below the first level."""
        kT, held = [0.2 * self.gap], [1e-3]
        while number.size and held[-1] < number.max():
            kT.append(2 * kT[-1])
            states = prod(1 + direction.below(kT[-1]) for direction in self.directions) - 1
            held.append(max(states, held[-1]))
        return np.exp(np.interp(np.log(np.maximum(number, 1e-3)), np.log(held), np.log(kT)))

    def saturated_kT(self, number: FloatArray) -> FloatArray | None:
        """See `Ensemble.saturated_kT`: None, but by halving where the search would begin above the last sum."""
        if not number.size:
            return None
        try:
            self._point(0.0, float(self.below(number).max()))
        except NoAnswerError:
            return np.array([self._halved(each) for each in number.tolist()])
        return None

    def _halved(self, number: float) -> float:
        """kT (J) from below, where sums over levels end before the temperature at which as many lie below kT."""
        low, high, words = 0.02 * self.gap, float(self.below(np.array([number]))[0]), None
        while high - low > 4 * EPS * high:
            middle = (low * high) ** 0.5
            try:
                above, ends = self._point(0.0, middle)[0] > number, None
            except NoAnswerError as error:
                above, ends = True, error
            low, high, words = (low, middle, ends) if above else (middle, high, words)
            if middle in (low, high) and (low * high) ** 0.5 in (low, high):
                break
        if words is not None:
            raise words
        return high

    def boltzmann(self, kT: FloatArray) -> tuple[FloatArray, FloatArray]:
        """See `Ensemble.boltzmann`."""
        sums = [self.partition(np.array([1 / t]), t) for t in kT.tolist()]
        z = np.array([float(s.z0[0]) for s in sums])
        return self.degeneracy * z, np.array([float(s.z1[0]) for s in sums]) / kT / z
