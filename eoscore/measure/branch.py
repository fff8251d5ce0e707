"""A stretch of a line on which a potential rises from a low end, and the place where it reaches an energy."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from math import inf
from typing import TYPE_CHECKING

import numpy as np

from eoscore.measure.rules import legendre

if TYPE_CHECKING:
    from eoscore.formula import Formula
    from eoscore.measure.base import FloatArray

__all__ = ["FAR", "NEAR", "Branch"]

NEAR, FAR = 1e-40, 1e50  # m or kg m/s: all that matters of a branch without end lies between
FAINT, HUGE = 1e-120, 1e120  # J: all energies lie between
EPS = float(np.finfo(float).eps)


@dataclass(frozen=True)
class Branch:
    """V rises along x = start + sign * u, u in [0, length]; `base` is V(start) - V_min >= 0 in J."""

    name: str
    formula: Formula
    start: float
    sign: int
    length: float
    base: float

    def reach(self, v: FloatArray) -> FloatArray:
        """The u at which V - V_min = v (n,): 0 below the branch and `length` above it."""
        wanted = v - self.base
        u, rise = self._table
        place = np.clip(np.searchsorted(rise, wanted), 1, len(u) - 1)
        found = self._solve(wanted, u[place - 1], u[place])
        found = np.where(wanted <= 0, 0.0, found)
        return np.where(wanted >= rise[-1], self.length, found)

    def rise(self, u: FloatArray) -> FloatArray:
        """V(start + sign u) - V(start) at u (n,), without loss of digits near the start."""
        far = u > self._close
        rise = np.where(far, self._difference(u), 0.0)
        return rise if far.all() else np.where(far, rise, self._integral(np.where(far, 0.0, u)))

    @property
    def rises(self) -> FloatArray:
        """Some rises above 0, in ascending order, over the whole of the branch."""
        rise = self._table[1]
        return rise[(rise > FAINT) & (rise < HUGE)]

    @property
    def noise(self) -> float:
        """The rise below which rounding of V leaves less than four digits; 0 where all digits are kept."""
        return 0.0 if self._height == 0 or self._close > 0 else 1e4 * EPS * abs(self._height)

    @cached_property
    def _table(self) -> tuple[FloatArray, FloatArray]:
        """A grid of u, fine near both ends, and the rise of V along it."""
        if self.length == inf:
            u = np.concatenate([[0.0], np.geomspace(NEAR, FAR, 1200)])
        else:
            near = np.geomspace(min(NEAR / self.length, 1e-20), 0.5, 600)
            far = np.geomspace(1e-15, 0.5, 200)[-2::-1]
            u = self.length * np.concatenate([[0.0], near, 1 - far, [1.0]])
        u, rise = self._between_extremes(u, self.rise(u))
        good = np.isfinite(rise)
        return u[good], np.maximum.accumulate(rise[good])

    def _between_extremes(self, u: FloatArray, rise: FloatArray) -> tuple[FloatArray, FloatArray]:
        """With more points where V rises from nothing beyond all energies in one step, as x^1000000 does."""
        for _ in range(16):
            jump = int(np.argmax(~(rise <= FAINT)))
            if not jump or rise[jump] < HUGE:
                break
            more = np.linspace(u[jump - 1], u[jump], 100)[1:-1]
            u, rise = np.insert(u, jump, more), np.insert(rise, jump, self.rise(more))
        return u, rise

    @cached_property
    def _gradient(self) -> Formula:
        return self.formula.derivative(self.name)

    @cached_property
    def _curvature(self) -> Formula:
        return self._gradient.derivative(self.name)

    @cached_property
    def _height(self) -> float:
        """V at the start."""
        return float(self.formula.evaluate({self.name: self.start}))

    @cached_property
    def _close(self) -> float:
        """The u below which the rise is integrated from the second derivative, which loses no digits.

        The largest u up to which two orders of that rule agree, and at which they agree with V itself; 0 where
        there is none, as under |x|^1.5.
        """
        u = np.geomspace(NEAR, min(self.length, FAR), 271)
        with np.errstate(all="ignore"):
            fine, coarse, direct = self._integral(u), self._integral(u, 12), self._difference(u)
            agree = np.logical_and.accumulate(np.abs(fine - coarse) <= 1e-13 * np.abs(fine))
            agree &= np.abs(direct - fine) <= 1e-8 * np.abs(direct)
        usable = np.flatnonzero(agree & (direct > 0) & np.isfinite(direct))
        return float(u[usable[-1]]) if usable.size else 0.0

    @cached_property
    def _slope(self) -> float:
        """dV/du just beside the start; that of a minimum, found to rounding only, is taken as 0."""
        beside = max(NEAR, 4 * EPS * abs(self.start))
        bend = float(self._at(self._curvature, np.array([beside]))[0])
        slope = self.sign * float(self._at(self._gradient, np.array([beside]))[0])
        return 0.0 if abs(slope) <= 10 * abs(bend) * beside else slope - bend * beside

    def _difference(self, u: FloatArray) -> FloatArray:
        return self._at(self.formula, u) - self._height

    def _integral(self, u: FloatArray, order: int = 16) -> FloatArray:
        """u V'(start) + u^2 int_0^1 (1 - s) V''(start + s u) ds."""
        s, w = legendre(order)
        bend = self._at(self._curvature, u[:, None] * s)
        return u * self._slope + u**2 * (bend @ ((1 - s) * w))

    def _steepness(self, u: FloatArray) -> FloatArray:
        """dV/du; near the start from the second derivative, which keeps its digits there."""
        far = self.sign * self._at(self._gradient, u)
        if u.min(initial=inf) > self._close:
            return far
        s, w = legendre(16)
        near = np.minimum(u, self._close)
        return np.where(
            u > self._close, far, self._slope + near * (self._at(self._curvature, near[:, None] * s) @ w)
        )

    def _at(self, formula: Formula, u: FloatArray) -> FloatArray:
        return np.broadcast_to(formula.evaluate({self.name: self.start + self.sign * u}), u.shape)

    def _solve(self, wanted: FloatArray, lo: FloatArray, hi: FloatArray) -> FloatArray:
        """Roots of rise(u) = wanted in brackets: Newton's rule, and the middle wherever that leaves them."""
        u, step = (lo + hi) / 2, hi - lo
        for turn in range(60):
            miss = self.rise(u) - wanted
            lo, hi = np.where(miss < 0, u, lo), np.where(miss > 0, u, hi)
            with np.errstate(all="ignore"):
                better = u - miss / self._steepness(u)
            better = np.where((better >= lo) & (better <= hi), better, (lo + hi) / 2)
            before, step = step, np.abs(better - u)
            settled = (step <= 4 * EPS * u) | ((step > before / 2) & (step <= 1e-10 * u) & (turn > 4))
            u = better
            if settled.all():
                break
        return u
