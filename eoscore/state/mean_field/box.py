"""A flat place: the density is given, and with it the phase."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np
from scipy.optimize import brentq

from eoscore.errors import NoAnswerError
from eoscore.state.mean_field.cloud import Cloud
from eoscore.state.mean_field.filling import Filled, Filling
from eoscore.state.mean_field.fluid import ORDER, Fluid

if TYPE_CHECKING:
    from collections.abc import Callable

    from numpy.typing import NDArray

    from eoscore.state.reading import FloatArray

__all__ = ["BoxFilling", "UniformCloud"]


@dataclass(frozen=True)
class UniformCloud(Cloud):
    """A cloud whose phase is known: y, and whether there is a condensate."""

    y: float = 0.0
    inside: bool = False

    def split(self, v: FloatArray) -> tuple[FloatArray, NDArray[np.bool_]]:
        """See `Cloud.split`."""
        return np.full(v.shape, self.y), np.full(v.shape, self.inside)

    @property
    def edge(self) -> float:
        """See `Cloud.edge`: a flat place has none."""
        return -1.0


class BoxFilling(Filling):
    """At fixed density the mean field lifts all levels alike, so that the gas condenses where the ideal one does.

    Just there the condensate of this approximation jumps to a fraction of the order of a_s/lambda_T.
    """

    def holding(self, number: float, kT: float) -> Filled:
        """See `Filling.holding`."""
        volume = float(self.setting.measure.volume(0.0))
        fluid = self.setting.cloud(0.0, kT).fluid
        ratio = number / volume / fluid.density
        if ratio > float(fluid.ideal(ORDER, np.zeros(1))[0]):
            return self._with_condensate(ratio, fluid)
        y = _rising_root(lambda y: ratio - float(fluid.ideal(ORDER, np.array([y]))[0]), 0.0, 1.0)
        return self._filled(fluid, 2 * fluid.G * ratio - y, y, inside=False)

    def _with_condensate(self, ratio: float, fluid: Fluid) -> Filled:
        if fluid.G < 0:
            raise NoAnswerError("a_s is negative: a condensate that nothing confines falls in on itself")
        if fluid.G == 0:
            full = float(fluid.ideal(ORDER, np.zeros(1))[0])
            volume = float(self.setting.measure.volume(0.0))
            beside = (ratio - full) * fluid.density * volume
            return Filled(UniformCloud(self.setting, 0.0, fluid), beside)
        # y + G F(y) = G n/A has two solutions near T_c: the larger is the stable one, above the turn of its left side
        least = fluid.turn
        y = _rising_root(
            lambda y: y / fluid.G + float(fluid.ideal(ORDER, np.array([y]))[0]) - ratio, least, 1.0
        )
        w = y + 2 * fluid.G * float(fluid.ideal(ORDER, np.array([y]))[0])
        return self._filled(fluid, w, y, inside=True)

    def _filled(self, fluid: Fluid, w: float, y: float, *, inside: bool) -> Filled:
        return Filled(UniformCloud(self.setting, w * fluid.kT, fluid, y, inside))


def _rising_root(rising: Callable[[float], float], low: float, high: float) -> float:
    while rising(high) < 0:
        high *= 2
    return low if rising(low) >= 0 else float(brentq(rising, low, high, xtol=1e-300, rtol=1e-14))
