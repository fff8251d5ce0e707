"""The uniform Bose gas with a mean field, which fills every place of a trap at its own chemical potential.

With w = (mu - V)/kT and G = g A/kT, g = 4 pi hbar^2 a_s/m and A F_s(y) the density of an ideal gas whose lowest
level lies y kT above mu (F_s = g_s(e^-y), s = 3/2, A = 1/lambda_T^3):

- without a condensate y = 2 g n/kT - w, so that w = 2 G F_s(y) - y;
- with one of density n_0 its own level is at mu, thermal particles lie y = g n_0/kT above, and w = y + 2 G F_s(y).

S. Giorgini, L. Pitaevskii, S. Stringari, J. Low Temp. Phys. 109, 309 (1997), from memory. For repulsion both hold in a
narrow range about w = 2 G F_s(0), of width G^2: the well-known first-order jump of this approximation. The one of the
larger pressure is taken, so that forces balance everywhere and the virial theorem holds exactly.
"""

from __future__ import annotations

from functools import cached_property
from math import exp, gamma, inf, log, pi, sqrt
from typing import TYPE_CHECKING, NamedTuple

import numpy as np
from numpy.polynomial import chebyshev
from scipy.optimize import brentq

from eoscore.gas.bose_function import bose
from eoscore.gas.truncated import bose_truncated
from eoscore.state.ensemble import EPS

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from eoscore.state.reading import FloatArray

__all__ = ["Fluid", "Onset"]

ORDER = 1.5  # of the density of an ideal gas of massive particles in three dimensions
FAR = 45.0  # an upper end this far, in kT, is none
FEW = 40
POINTS = 48  # of the series of what is missing beyond the upper end
CLOSE = 1e-9  # a relative step of Newton's method this short leaves an error of its square
SMALL = 2e-3  # of G, below which the jump is where its limit G -> 0 has it, to a relative G
# That limit: y = pi G^2 r^2 with a condensate and pi G^2 q^2 without, w = 2 G F_s(0) + pi G^2 (r^2 - 4 r). With
# F_s(y) = F_s(0) - 2 sqrt(pi y) both w agree where (r - 2)^2 + (q + 2)^2 = 8, and both pressures where
# r^4/2 - 8 r^3/3 + 4 r^2 = 4 q^3/3 + 4 q^2.
CONDENSED_SIDE, THERMAL_SIDE = 2.575023652788480, 0.7693587342079380


class Onset(NamedTuple):
    """Where the condensate begins: w, and y without and with a condensate."""

    w: float
    thermal: float
    condensed: float


def _series(x: FloatArray, coefficients: FloatArray) -> FloatArray:
    """A Chebyshev series; term by term only where there are many x."""
    if x.size > FEW:
        return np.asarray(chebyshev.chebval(x, coefficients))
    angle = np.arccos(np.clip(x, -1.0, 1.0))
    return np.asarray(np.cos(angle[..., None] * np.arange(coefficients.size)) @ coefficients)


class Fluid:
    """At kT (J), with coupling g (J m^3); `states`: C of the momenta below E, C E^s per m^3.

    reach: (E_esc - mu)/kT. Where a place has an escape energy only particles below it count, kinetic, potential and
    mean field together; that end is `reach` above mu everywhere.
    """

    def __init__(self, kT: float, coupling: float, states: float, reach: float = inf) -> None:
        self.kT, self.coupling = kT, coupling
        self.density: float = states * gamma(ORDER + 1) * kT**ORDER
        self.G: float = coupling * self.density / kT
        self.reach = reach if reach < FAR else inf
        self._tables: dict[float, FloatArray] = {}

    def ideal(self, order: float, y: FloatArray) -> FloatArray:
        """F_order(y): the Bose function, without what lies beyond the upper end."""
        whole = np.asarray(bose(order, y))
        if self.reach == inf:
            return whole
        end = sqrt(self.reach)
        root = np.sqrt(np.maximum(self.reach - y, 0.0))
        missing = _series(2 * root / end - 1, self._table(order))
        return np.where(y < self.reach, np.maximum(whole - missing, 0.0), 0.0)

    def _table(self, order: float) -> FloatArray:
        """What lies beyond the end, 1/Gamma int_reach (e - y)^(s-1)/(exp(e) - 1) de: entire in sqrt(reach - y)."""
        if order not in self._tables:
            end = sqrt(self.reach)
            x = np.cos(pi * (np.arange(POINTS) + 0.5) / POINTS)
            y = self.reach - (end * (1 + x) / 2) ** 2
            missing = np.asarray(bose(order, y)) - np.asarray(bose_truncated(order, y, self.reach - y))
            self._tables[order] = np.asarray(chebyshev.chebfit(x, missing, POINTS - 1), dtype=np.float64)
        return self._tables[order]

    def _one(self, order: float, y: float) -> float:
        return float(bose(order, y)) if self.reach == inf else float(self.ideal(order, np.array([y]))[0])

    @cached_property
    def turn(self) -> float:
        """y where 2 |G| F_(s-1)(y) = 1: beyond it the gas is stable on either side."""
        size = 2 * abs(self.G)

        def excess(x: float) -> float:
            return size * self._one(ORDER - 1, exp(x)) - 1

        guess = log(pi * size * size)
        return exp(brentq(excess, guess - 30, max(guess, 0.0) + 10, xtol=1e-14, rtol=1e-14))

    @cached_property
    def highest(self) -> float:
        """For attraction: the largest w of a stable gas. Above it the gas falls in on itself."""
        return 2 * self.G * self._one(ORDER, self.turn) - self.turn

    @cached_property
    def onset(self) -> Onset:
        """For repulsion: where both phases have the same pressure."""
        top = 2 * self.G * self._one(ORDER, 0.0)
        scale = pi * self.G**2
        y = Onset(
            top + scale * (CONDENSED_SIDE**2 - 4 * CONDENSED_SIDE),
            scale * THERMAL_SIDE**2,
            scale * CONDENSED_SIDE**2,
        )
        if self.G < SMALL:
            return y
        w = max(y.w, self.least)
        both = np.array([w, 0.0])
        for _ in range(60):
            if both[0] <= self.turn:
                both[0] = w  # not on the stable side: from above again, else from the solution before
            both = self._newton(both, np.full(2, w), np.array([1.0, -1.0]))
            pressures = self.pressure(both, np.array([both[0], 0.0]))
            densities = self.ideal(ORDER, both)
            rise = both[0] / self.G + densities[0] - densities[1]
            step = float((pressures[0] - pressures[1]) / rise)
            before, w = w, min(max(w - step, (w + self.least) / 2), (w + top) / 2)
            if abs(w - before) <= 1e-12 * scale:
                break
        return Onset(w, float(both[1]), float(both[0]))

    @cached_property
    def least(self) -> float:
        """For repulsion: the least w at which there can be a condensate."""
        return self.turn + 2 * self.G * self._one(ORDER, self.turn)

    @cached_property
    def jump(self) -> float:
        """Of the density at the onset, in units of `density`."""
        _, thermal, condensed = self.onset
        return condensed / self.G + self._one(ORDER, condensed) - self._one(ORDER, thermal)

    def slope(self, y: FloatArray, inside: NDArray[np.bool_]) -> FloatArray:
        """d(n/A)/dw, with a condensate where `inside`."""
        half = self.ideal(ORDER - 1, y)
        with np.errstate(divide="ignore", invalid="ignore", over="ignore"):
            thermal = 1 / (1 / half + 2 * self.G)
            condensed = (1 / self.G - half) / (1 - 2 * self.G * half) if self.G else thermal
        return np.where(inside, condensed, thermal)

    def pressure(self, y: FloatArray, field: FloatArray) -> FloatArray:
        """P/(A kT) of thermal particles at y with a condensate of g n_0 = `field` kT."""
        f = self.ideal(ORDER, y)
        return self.ideal(ORDER + 1, y) + self.G * f * f + field * field / (2 * self.G) + 2 * field * f

    def condensed(self, w: FloatArray) -> FloatArray:
        """y = g n_0/kT where there is a condensate: Newton's method from above on a convex function."""
        return self._newton(w.copy(), w, np.ones_like(w))

    def thermal(self, w: FloatArray, least: float) -> FloatArray:
        """y where there is none, at or above `least`: from below where convex (repulsion), else from above."""
        return self._newton(self._thermal_start(w, least), w, -np.ones_like(w))

    def _thermal_start(self, w: FloatArray, least: float) -> FloatArray:
        return np.maximum(-w, least if self.G >= 0 else self.turn)

    def _newton(self, y: FloatArray, w: FloatArray, sign: FloatArray) -> FloatArray:
        """Solve sign y + 2 G F_s(y) = w, sign = 1 with a condensate and -1 without."""
        tiny = max(pi * self.G**2, 1e-290) * 1e-3
        y = np.maximum(y, tiny)
        open_ = np.arange(y.size)
        for _ in range(80):
            now, goal, s = y[open_], w[open_], sign[open_]
            field = 2 * self.G * self.ideal(ORDER, now)
            value = s * now + field - goal
            slope = s - 2 * self.G * self.ideal(ORDER - 1, now)
            with np.errstate(divide="ignore", invalid="ignore"):
                step = np.where(slope * s > 0, value / slope, 0.0)
            y[open_] = following = np.maximum(now - step, tiny)
            rounding = 4 * EPS * (now + np.abs(field) + np.abs(goal))
            open_ = open_[(np.abs(following - now) > CLOSE * now) & (np.abs(value) > rounding)]
            if not open_.size:
                break
        return y

    def split(self, w: FloatArray) -> tuple[FloatArray, NDArray[np.bool_]]:
        """y at every w, and where there is a condensate; nan where an attractive gas is not stable."""
        if self.G <= 0:
            y = self.thermal(np.minimum(w, self.highest), self.turn) if self.G else -w
            return y, np.zeros(w.shape, dtype=bool)
        inside = w > self.onset.w
        start = np.where(inside, w, self._thermal_start(w, self.onset.thermal))
        return self._newton(start, w, np.where(inside, 1.0, -1.0)), inside
