"""How well Omega must be known at an energy for sums at temperatures that hardly reach it."""

from __future__ import annotations

from collections.abc import Callable
from math import inf

import numpy as np

from eoscore.measure.base import FloatArray

__all__ = ["EASES", "Need", "Wanted", "eased_at"]

Wanted = Callable[[FloatArray, FloatArray], FloatArray]  # energies and Omega there -> the error that may stay

WANTED = 1e-10  # relative error of Omega where its whole share counts
SHARE = 1e-9  # of a sum, which energies far above kT may miss
LOOSEST = 1e-2  # of Omega, whatever its share
STEPS = 2  # of kT in an octave, for which measures are made
EASES = 10.0  # kT below a top, from which on the highest energies need less


class Need:
    """The relative error of Omega that may stay at an energy v, for int g dOmega with g falling like e^(-v/kT).

    A state at v has the share Omega(v) e^(-v/kT), times (v/kT)^2 in the heat capacity, of what the energies below
    hold; above kT, where that share is small, the error may be as much greater. kT: the highest one (J) that will
    be asked; inf where Omega itself is wanted.
    """

    def __init__(self, kT: float = inf, wanted: float = WANTED) -> None:
        self.kT, self.wanted = kT, wanted
        self._held = 0.0

    def allowed(self, v: FloatArray, omega: FloatArray, rise: float = 0.0) -> FloatArray:
        """The error that may stay, relative to `omega`, which is Omega at energies v + rise (J) or a part of it."""
        if self.kT == inf:
            return np.full(v.shape, self.wanted)
        x = (v + rise) / self.kT
        share = np.maximum(omega, 1e-300) * np.exp(-x)
        self._held = max(self._held, float(share.max(initial=0.0)))
        eased = SHARE * self._held / np.maximum(share * (1 + x) ** 2, 1e-300)
        return np.where(x > 1, np.clip(eased, self.wanted, LOOSEST), self.wanted)


def eased_at(kT: float, top: float) -> float:
    """The temperature (J) for which a measure is made that is asked up to kT; inf where all of it counts."""
    stepped = float(2.0 ** (np.ceil(STEPS * np.log2(kT) - 1e-9) / STEPS))
    return stepped if top > EASES * stepped else inf
