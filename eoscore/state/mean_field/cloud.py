"""The gas in a place at one mu and T: both parts at every energy, and their integrals."""

from __future__ import annotations

from dataclasses import dataclass, field
from functools import cached_property, lru_cache
from math import inf
from typing import TYPE_CHECKING

import numpy as np
from scipy.optimize import brentq

from eoscore.errors import NoAnswerError
from eoscore.gas.truncated import bose_log_truncated, bose_truncated
from eoscore.state.mean_field.fluid import FAR, ORDER, Fluid
from eoscore.state.mean_field.panels import NODES, panels

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from eoscore.measure import Measure
    from eoscore.state.reading import FloatArray

__all__ = ["HOTTEST", "Cloud", "Setting"]

NEAR_TOP = 1e-9
STEPS = 5  # of an iteration that mostly converges at once
HOTTEST = 50.0  # kT over the depth; a mean field has long filled the place
REACH = 45.0  # kT above the edge of the condensate, or the bottom: e^-45 is dropped


_fluid = lru_cache(maxsize=64)(Fluid)


@dataclass(frozen=True)
class Setting:
    """What stays: the measure of the place, its top (J), g (J m^3), C of the momenta C E^(3/2) per m^3."""

    measure: Measure
    top: float
    coupling: float
    states: float

    def cloud(self, mu: float, kT: float) -> Cloud:
        """The gas at mu and kT, J."""
        reach = (self.top - mu) / kT if self.top < inf else inf
        return Cloud(self, mu, _fluid(kT, self.coupling, self.states, min(reach, FAR)))

    def at_onset(self, kT: float) -> Cloud:
        """The gas that is about to condense (repulsion, or none), or to fall in (attraction), at the bottom."""
        if kT > HOTTEST * self.top * (1 + 1e-9):
            raise NoAnswerError(
                f"kT is more than {HOTTEST:.0f} times the depth: nothing of a gas with a mean field is held so hot"
            )
        mu, most = 0.0, self.top * (1 - NEAR_TOP)
        for _ in range(STEPS):  # with an escape energy its distance in kT enters, in a cold gas weakly
            before, mu = mu, self._onset_at(mu, kT)
            if self.top == inf or abs(mu - before) <= 1e-14 * kT:
                return self.cloud(mu, kT)
            if mu >= most:
                break
        if self._onset_at(most, kT) < most:
            most = float(
                brentq(lambda x: self._onset_at(x, kT) - x, min(mu, 0.0) * 2, most, xtol=1e-14 * most)
            )
        return self.cloud(most, kT)

    def _onset_at(self, mu: float, kT: float) -> float:
        """mu at the onset, if the escape energy were as far above it as it is above `mu`."""
        fluid = self.cloud(mu, kT).fluid
        w = 0.0 if fluid.G == 0 else fluid.onset.w if fluid.G > 0 else fluid.highest
        return w * kT


@dataclass(frozen=True)
class Cloud:
    """mu in J from the bottom; densities in m^-3. order: of the rule on each panel of energies."""

    setting: Setting
    mu: float
    fluid: Fluid
    order: int = field(default=NODES, kw_only=True)

    @property
    def edge(self) -> float:
        """V at the edge of the condensate, J from the bottom; not above 0 where there is none."""
        if self.fluid.G <= 0:
            return -inf
        return self.mu - self.fluid.onset.w * self.fluid.kT

    @cached_property
    def nodes(self) -> tuple[FloatArray, FloatArray]:
        """V in J and dOmega in m^3."""
        kT = self.fluid.kT
        sharp = min(self.fluid.G**2, 1.0) * kT * 0.5
        return panels(self.setting.measure, self.edge, sharp, max(self.edge, 0.0) + REACH * kT, self.order)

    def split(self, v: FloatArray) -> tuple[FloatArray, NDArray[np.bool_]]:
        """y and whether there is a condensate, at energies V."""
        return self.fluid.split((self.mu - v) / self.fluid.kT)

    def parts(self, v: FloatArray) -> tuple[FloatArray, FloatArray]:
        """Densities of the condensate and of the thermal part where V is v J above the bottom."""
        y, inside = self.split(np.asarray(v, dtype=float))
        kT, g = self.fluid.kT, self.fluid.coupling
        condensed = np.where(inside, kT * y / g if g else 0.0, 0.0)
        return condensed, self.fluid.density * self.fluid.ideal(ORDER, y)

    @cached_property
    def _at_nodes(self) -> tuple[FloatArray, NDArray[np.bool_]]:
        return self.split(self.nodes[0])

    @cached_property
    def densities(self) -> tuple[FloatArray, FloatArray]:
        """Condensate and thermal part at the nodes."""
        y, inside = self._at_nodes
        kT, g = self.fluid.kT, self.fluid.coupling
        return np.where(inside, kT * y / g if g else 0.0, 0.0), self.fluid.density * self.fluid.ideal(
            ORDER, y
        )

    def over(self, function: FloatArray) -> float:
        """The integral over the place of a function at the nodes."""
        return float(np.sum(self.nodes[1] * function))

    @cached_property
    def condensate(self) -> float:
        """N_0."""
        return self.over(self.densities[0])

    @cached_property
    def number(self) -> float:
        """N."""
        return self.over(self.densities[0] + self.densities[1])

    @cached_property
    def slope(self) -> float:
        """dN/dmu in 1/J: of the parts, and of the edge, where the density jumps."""
        y, inside = self._at_nodes
        fluid = self.fluid
        smooth = self.over(fluid.slope(y, inside)) / fluid.kT
        jump = fluid.jump * float(self.setting.measure.density(self.edge)) if self.edge > 0 else 0.0
        return fluid.density * (smooth + jump)

    @cached_property
    def kinetic(self) -> float:
        """Kinetic energy of the thermal part, J; the condensate has none in the Thomas-Fermi limit."""
        y, _ = self._at_nodes
        return ORDER * self.fluid.kT * self.fluid.density * self.over(self._exact(y))

    def _exact(self, y: FloatArray) -> FloatArray:
        """F_(s+1) at y."""
        reach = self.fluid.reach
        if reach == inf:
            return self.fluid.ideal(ORDER + 1, y)
        return np.asarray(bose_truncated(ORDER + 1, y, np.maximum(reach - y, 0.0)))

    @cached_property
    def potential(self) -> float:
        """Energy in the trap, J from the bottom."""
        return self.over(self.nodes[0] * (self.densities[0] + self.densities[1]))

    @cached_property
    def interaction(self) -> float:
        """g int (n_0^2/2 + 2 n_0 n_T + n_T^2), J."""
        n0, nt = self.densities
        return self.fluid.coupling * self.over(n0 * n0 / 2 + 2 * n0 * nt + nt * nt)

    @cached_property
    def entropy(self) -> float:
        """S/k_B of the thermal part: its occupations alone have any."""
        y, _ = self._at_nodes
        second = self._exact(y)
        reach = self.fluid.reach
        cut = np.maximum(reach - y, 0.0)
        logs = second if reach == inf else np.asarray(bose_log_truncated(ORDER, y, cut))
        first = self.densities[1] / self.fluid.density
        return self.fluid.density * self.over(ORDER * second + y * first + logs)
