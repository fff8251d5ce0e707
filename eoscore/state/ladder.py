"""Gases that hold oscillator levels in some directions: the levels, and what is left free in each."""

from __future__ import annotations

from functools import reduce
from math import ceil
from typing import TYPE_CHECKING

import numpy as np

from eoscore.constants import K_B
from eoscore.errors import NoAnswerError
from eoscore.state.ensemble import EPS, Ensemble
from eoscore.state.sums import Sums

if TYPE_CHECKING:
    from collections.abc import Callable

    from eoscore.gas.levels import OscillatorLevels
    from eoscore.measure import Measure
    from eoscore.state.reading import FloatArray

__all__ = ["BelowTop", "OnLevels"]

MOST_LEVELS = 20_000


class OnLevels(Ensemble):
    """The states without a quantum, and all others as exact sums over oscillator levels.

    `ground` is the ensemble of the first; None where they are one level, in which bosons condense.
    """

    def __init__(self, levels: OscillatorLevels, ground: Ensemble | None) -> None:
        self.levels, self.ground = levels, ground
        self.statistics = levels.statistics
        self.route = "exact sums over levels"
        if ground is not None:
            self.route += f", {ground.route} in the other directions"

    @property
    def error(self) -> float:
        """See `Ensemble.error`."""
        # The entropy of degenerate fermions is a difference of two numbers mu/kT times as large: room for 1e3.
        return self.levels.rest.error + (5e6 if self.statistics == "fermi" else 4000) * EPS

    @property
    def condenses(self) -> bool:
        """See `Ensemble.condenses`."""
        return self.statistics == "bose" and (self.ground is None or self.ground.condenses)

    @property
    def why_not(self) -> str:
        """See `Ensemble.why_not`."""
        return self.ground.why_not if self.ground is not None else ""

    def all_sums(self, alpha: FloatArray, kT: FloatArray) -> Sums:
        """See `Ensemble.all_sums`."""
        held = self.levels.moments(-alpha * kT, kT / K_B)
        excited = Sums(held.N, held.U, held.S, held.Y, held.B0, held.B1, held.B2)
        return excited if self.ground is None else excited + self.ground.sums(alpha, kT)

    def below(self, number: FloatArray) -> FloatArray:
        """See `Ensemble.below`: that of the rest, times the levels that kT would reach."""
        quanta = np.array(self.levels.quanta)
        kT = np.full(number.shape, float(quanta.min()))
        for _ in range(60):
            reached = self.levels.rest.volume(kT) * np.prod(1 + kT[:, None] / quanta, axis=1)
            kT = kT * np.clip(number / reached, 1e-3, 1e3) ** 0.3
        return kT

    def boltzmann(self, kT: FloatArray) -> tuple[FloatArray, FloatArray]:
        """See `Ensemble.boltzmann`."""
        from eoscore.gas.rest import boltzmann_of

        beta = 1 / kT
        r0, r1, _ = (np.real(r) for r in boltzmann_of(self.levels.rest, kT, np.zeros_like(kT))(beta))
        z, mean = r0, r1 / r0
        for quantum in self.levels.quanta:
            z = z / -np.expm1(-beta * quantum)
            mean = mean + quantum / np.expm1(beta * quantum)
        if self.ground is None:
            z, mean = z - r0, mean * z / (z - r0)
        return z, mean * beta


class BelowTop(Ensemble):
    """Levels below an escape energy, one by one: each with the states of the other directions that are left to it."""

    def __init__(self, quanta: tuple[float, ...], rest: Measure, make: Callable[[Measure], Ensemble]) -> None:
        self.top = rest.top
        ladders = [np.arange(ceil(self.top / q)) * q for q in quanta]
        if np.prod([float(ladder.size) for ladder in ladders]) > MOST_LEVELS:
            why = (
                f"more than {MOST_LEVELS} levels lie below the escape energy: hold fewer directions as levels"
            )
            raise NoAnswerError(why)
        starts = np.sort(reduce(np.add.outer, ladders).ravel())
        self.shelves = [
            (float(e), make(rest.cut(self.top - e))) for e in starts if e < self.top * (1 - 1e-12)
        ]
        self.first = self.shelves[0][1]
        self.statistics = self.first.statistics
        self.route = f"exact sums over levels, {self.first.route}"
        self.capacity = sum(shelf.capacity for _, shelf in self.shelves)

    @property
    def error(self) -> float:
        """See `Ensemble.error`."""
        return max(shelf.error for _, shelf in self.shelves)

    @property
    def condenses(self) -> bool:
        """See `Ensemble.condenses`."""
        return self.first.condenses

    @property
    def why_not(self) -> str:
        """See `Ensemble.why_not`."""
        return self.first.why_not

    def all_sums(self, alpha: FloatArray, kT: FloatArray) -> Sums:
        """See `Ensemble.all_sums`."""
        total = self.first.sums(alpha, kT)
        for e, shelf in self.shelves[1:]:
            s = shelf.sums(alpha + e / kT, kT)
            total = total + Sums(s.N, s.U + e * s.N, s.S, s.Y, s.B0, s.B1, s.B2)
        return total

    def below(self, number: FloatArray) -> FloatArray:
        """See `Ensemble.below`."""
        return self.first.below(number / len(self.shelves))

    def boltzmann(self, kT: FloatArray) -> tuple[FloatArray, FloatArray]:
        """See `Ensemble.boltzmann`."""
        z, x = np.zeros((2, kT.size))
        for e, shelf in self.shelves:
            part, mean = shelf.boltzmann(kT)
            part = part * np.exp(-e / kT)
            z += part
            x += part * (mean + e / kT)
        return z, x / z
