"""mu from the number, and T from the entropy or the energy."""

from __future__ import annotations

from math import exp, inf, log, pi, sqrt
from typing import TYPE_CHECKING, NamedTuple

import numpy as np
from scipy.optimize import brentq

from eoscore.constants import HBAR
from eoscore.errors import NoAnswerError
from eoscore.state.root import rising_root

if TYPE_CHECKING:
    from collections.abc import Callable

    from numpy.typing import NDArray

    from eoscore.state.mean_field.cloud import Cloud, Setting
    from eoscore.state.reading import FloatArray

__all__ = ["Filled", "Filling", "collapse_number"]

# N_0 |a_s|/a_ho of the largest condensate that holds against attraction: P. A. Ruprecht, M. J. Holland, K. Burnett,
# M. Edwards, Phys. Rev. A 51, 4704 (1995), from memory.
COLLAPSE = 0.575
DEEP = 700.0  # kT below the onset: the lowest mu
LOGARITHMS = (-130.0, -20.0)  # of kT in J: 1e-33 K to 1e14 K
COLD, HOT = 1e-6, 1e6
MET = 1e-7  # relative, of N
NEAR = 1e-16  # kT from the onset: the nearest mu


class Filled(NamedTuple):
    """A cloud, and a condensate that is not in its densities: of an ideal or an attractive gas, at the bottom."""

    cloud: Cloud
    beside: float = 0.0

    @property
    def number(self) -> float:
        """N."""
        return self.cloud.number + self.beside

    @property
    def condensate(self) -> float:
        """N_0."""
        return self.cloud.condensate + self.beside


class Filling:
    """The states of one setting. `largest`: the most that an attractive condensate can hold; None if unknown."""

    def __init__(self, setting: Setting, largest: float | None) -> None:
        self.setting, self.largest = setting, largest

    def holding(self, number: float, kT: float) -> Filled:
        """N particles at kT (J). NoAnswerError where there is no such state."""
        onset = self.setting.at_onset(kT)
        if number <= onset.number:
            return Filled(self._thermal(number, onset))
        if self.setting.coupling > 0:
            return Filled(self._condensed(number, onset))
        return Filled(onset, self._beside(number - onset.number))

    def _beside(self, condensate: float) -> float:
        if self.setting.coupling == 0:
            return condensate
        if self.largest is None:
            raise NoAnswerError(
                "a_s is negative and the bottom is not harmonic: how large a condensate may grow before it falls in "
                "on itself is known here for harmonic bottoms only; make a_s positive, or raise T above T_c"
            )
        if condensate > self.largest:
            raise NoAnswerError(
                f"a_s is negative: a condensate of {condensate:.4g} particles falls in on itself; this trap holds at "
                f"most {self.largest:.4g} (N_0 |a_s|/a_ho = {COLLAPSE}); take fewer particles or a smaller |a_s|"
            )
        return condensate

    def _thermal(self, number: float, onset: Cloud) -> Cloud:
        if number >= onset.number * (1 - 1e-15):
            return onset
        return self._root(number, onset, -1.0, log(onset.number / number), DEEP)

    def _condensed(self, number: float, onset: Cloud) -> Cloud:
        """mu starts from that of the condensate alone."""
        kT, setting = onset.fluid.kT, self.setting
        k = setting.measure.exponent
        share = float(setting.measure.volume(kT)) * kT / (k + 1) / setting.coupling  # N at mu = kT
        alone = ((number - onset.number) / share) ** (1 / (k + 1))
        reach = (setting.top * (1 - 1e-12) - onset.mu) / kT
        most = (
            setting.cloud(onset.mu + kT * reach, kT).number
            if 0 < reach < inf
            else inf
            if reach > 0
            else onset.number
        )
        if most < number:
            raise NoAnswerError(
                f"the mean field lifts mu above the escape energy before {number:.4g} particles are held: at most "
                f"{most:.4g} are, at this temperature"
            )
        return self._root(number, onset, 1.0, min(alone, reach / 2), min(1e3 * (alone + 1), reach))

    def _root(self, number: float, onset: Cloud, sign: float, start: float, end: float) -> Cloud:
        """The cloud of N particles at mu = that of the onset + `sign` e^x kT: Newton's method for ln N against x."""
        kT = onset.fluid.kT
        made: dict[float, Cloud] = {}

        def cloud(x: float) -> Cloud:
            return self.setting.cloud(onset.mu + sign * kT * exp(sign * x), kT)

        def work(x: FloatArray, _: NDArray[np.intp]) -> tuple[FloatArray, FloatArray]:
            here = made[float(x[0])] = cloud(float(x[0]))
            slope = here.slope / here.number * kT * np.exp(sign * x)
            return np.array([np.log(here.number / number)]), slope

        first, last = (np.array([x]) for x in sorted((sign * log(NEAR), sign * log(end))))
        x = rising_root(work, first, last, np.array([sign * log(start)]))
        found = made.get(float(x[0])) or cloud(float(x[0]))
        if abs(found.number / number - 1) > MET:
            raise NoAnswerError(
                "the flat floor of this place is about to condense, where the density of this approximation jumps: no "
                "state has just this number; change N or T by a fraction of the order of a_s/lambda_T"
            )
        return found

    def at_potential(self, mu: float, kT: float) -> Filled:
        """The gas at mu (J from the bottom) and kT. NoAnswerError where the gas has no such mu."""
        onset = self.setting.at_onset(kT)
        if self.setting.coupling <= 0 and mu > onset.mu:
            raise NoAnswerError(
                f"mu came as {mu:.6g} J; without repulsion it is at most {onset.mu:.6g} J at this temperature"
            )
        if mu >= self.setting.top:
            raise NoAnswerError(f"mu came as {mu:.6g} J, which is above the escape energy")
        return Filled(self.setting.cloud(mu, kT))

    def with_entropy(self, number: float, entropy: float) -> Filled:
        """N particles with this entropy, in k_B."""
        return self._at_value(number, lambda fill: fill.cloud.entropy - entropy, "S")

    def with_energy(self, number: float, energy: float) -> Filled:
        """N particles with this energy, J."""

        def excess(fill: Filled) -> float:
            return (fill.cloud.kinetic + fill.cloud.potential + fill.cloud.interaction) / energy - 1

        found = self._at_value(number, excess, "U")
        if found.beside and self.setting.coupling < 0:
            raise NoAnswerError(
                "a_s is negative and this energy is that of a gas with a condensate, which is not known here; give T"
            )
        return found

    def _at_value(self, number: float, excess: Callable[[Filled], float], name: str) -> Filled:
        """The temperature is bracketed from that at which as many states lie below kT as there are particles."""
        setting = self.setting
        guess = brentq(
            lambda x: log(setting.states * exp(1.5 * x) * float(setting.measure.volume(exp(x))) / number),
            *LOGARITHMS,
        )
        low = high = exp(guess)

        def here(kT: float) -> float:
            try:
                return excess(self.holding(number, kT))
            except NoAnswerError:
                if setting.coupling >= 0:
                    raise
                return -1.0  # fallen in: too cold

        while here(low) > 0:
            low /= 2
            if low < COLD * exp(guess):
                less = "the condensate alone has more" if name == "U" else "it is nothing but rounding"
                raise NoAnswerError(f"no temperature gives so small a value of {name}: {less}")
        while here(high) < 0:
            high *= 2
            if high > HOT * exp(guess):
                raise NoAnswerError(f"no temperature gives so large a value of {name}")
        kT = exp(brentq(lambda x: here(exp(x)), log(low), log(high), xtol=1e-13))
        return self.holding(number, kT)


def collapse_number(mass: float, a_s: float, frequencies: tuple[float, ...]) -> float | None:
    """N_0 at which an attractive condensate falls in, by the geometric mean of three frequencies in Hz."""
    if len(frequencies) != 3 or min(frequencies) <= 0 or a_s >= 0:
        return None if a_s < 0 else inf
    omega = 2 * pi * (frequencies[0] * frequencies[1] * frequencies[2]) ** (1 / 3)
    return COLLAPSE * sqrt(HBAR / (mass * omega)) / -a_s
