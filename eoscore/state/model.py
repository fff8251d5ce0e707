"""A held gas as the solver sees it: the ensembles that are counted, and every condition with its slopes."""

from __future__ import annotations

from dataclasses import dataclass, field
from functools import cached_property
from math import inf
from typing import TYPE_CHECKING

import numpy as np

from eoscore.constants import K_B

if TYPE_CHECKING:
    from collections.abc import Callable, Hashable

    from eoscore.state.column import Line
    from eoscore.state.ensemble import Ensemble
    from eoscore.state.reading import FloatArray
    from eoscore.state.sums import Sums

__all__ = ["CONDITIONS", "Model"]

CONDITIONS = ("T", "N", "mu", "fugacity", "n_peak", "PSD", "U", "S", "f_0", "N_0")


@dataclass(frozen=True)
class Model:
    """`count` makes `whole`, the ensemble that N counts (per volume in a uniform gas); `local` is that at the bottom.

    `free` is the local ensemble without the cut of the place, spin states counted: it sets lambda_T. Both are None
    where every direction is held as levels. `lines` keeps the lines along which columns were counted.
    """

    count: Callable[[], Ensemble]
    local: Ensemble | None
    free: Ensemble | None
    degeneracy: float
    lines: dict[Hashable, Line | None] = field(default_factory=dict, compare=False)

    @cached_property
    def whole(self) -> Ensemble:
        """Everything that is counted. NoAnswerError where the states are without number."""
        return self.count()

    def value(
        self, name: str, alpha: FloatArray, kT: FloatArray, sums: Sums | None = None
    ) -> tuple[FloatArray, FloatArray, FloatArray]:
        """A condition at alpha and kT (J), with its slopes d/dalpha at fixed T and d/dlnT at fixed alpha."""
        if name == "T":
            return kT / K_B, np.zeros_like(kT), kT / K_B
        if name == "mu":
            return -alpha * kT, -kT, -alpha * kT
        if name == "fugacity":
            z = np.exp(-alpha)
            return z, -z, np.zeros_like(z)
        if name in ("n_peak", "PSD"):
            return self._density(name, alpha, kT)
        sums = sums or self.whole.sums(alpha, kT)
        unit = K_B if name == "S" else 1.0
        held: FloatArray = getattr(sums, name)
        by_alpha, by_log = sums.slopes(name, alpha, kT)
        return unit * held, unit * by_alpha, unit * by_log

    def _density(
        self, name: str, alpha: FloatArray, kT: FloatArray
    ) -> tuple[FloatArray, FloatArray, FloatArray]:
        if self.local is None or self.free is None:
            raise ValueError(f"{name} has no sense where every direction is held as levels")
        sums = self.local.sums(alpha, kT)
        n = sums.N
        by_alpha, by_log = sums.slopes("N", alpha, kT)
        if name == "n_peak":
            return n, by_alpha, by_log
        z, mean = self.free.boltzmann(kT)
        volume = self.degeneracy / z  # lambda_T^d
        return n * volume, by_alpha * volume, (by_log - mean * n) * volume

    def wavelength_volume(self, kT: FloatArray) -> FloatArray:
        """lambda_T^d in m^d."""
        if self.free is None:
            raise ValueError("there is no thermal wavelength where every direction is held as levels")
        return self.degeneracy / self.free.boltzmann(kT)[0]

    @property
    def bosons(self) -> bool:
        """Whether mu is bounded by the lowest level."""
        return self.whole.statistics == "bose"

    @property
    def capacity(self) -> float:
        """The most that N can be."""
        return self.whole.capacity

    def noise(self, name: str, value: FloatArray, sums: Sums, kT: FloatArray) -> FloatArray:
        """Absolute error of a condition as a function of alpha and T."""
        size = np.abs(value)
        if name == "N" and self.whole.highest < inf:
            size = size + sums.B0  # N is a difference; B0 counts particles and antiparticles
        return self.error_of(name, kT) * size

    def error_of(self, name: str, kT: FloatArray) -> FloatArray:
        """Relative error of a condition as a function of alpha and T."""
        if name in ("T", "mu", "fugacity"):
            return np.zeros_like(kT)
        if name not in ("n_peak", "PSD"):
            return self.whole.error_at(kT)
        return np.full(kT.shape, inf) if self.local is None else self.local.error_at(kT)
