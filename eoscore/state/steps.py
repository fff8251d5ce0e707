"""A degenerate Fermi gas: the sums with the nodes about the step at mu.

The filled states below mu are Omega(mu) and its integral; what the temperature moves, e^{-|t|}-narrow about mu, is
summed on panels that are graded about mu, the bottom, every break and the top, each state with its own.
"""

from __future__ import annotations

from math import inf
from typing import TYPE_CHECKING

import numpy as np

from eoscore.measure.rules import legendre
from eoscore.state.classical import Classical
from eoscore.state.closed import ClosedFermi
from eoscore.state.ensemble import BLOCK, EPS, Ensemble
from eoscore.state.filled import Filled
from eoscore.state.nodes import energy_below
from eoscore.state.sums import Sums

if TYPE_CHECKING:
    from eoscore.measure.base import Measure
    from eoscore.state.reading import FloatArray

__all__ = ["StepFermi"]

ABOUT_MU = np.array([0.0, 1, 2.2, 4, 6.5, 10, 15, 22, 30, 40])  # in kT; e^-40 = 4e-18 is dropped
ABOVE = np.concatenate(
    [[0.0], 4.0 ** np.arange(-10, 1), 2.0 ** np.arange(1, 6), [45.0]]
)  # from the bottom, in kT
ABOUT_BREAK = 4.0 ** np.arange(-6, 1)
DEGENERATE = 20.0  # mu/kT above which closed forms give way: S and C_N there are differences of large numbers
ORDER = 16


class StepFermi(Ensemble):
    """Fermions over any measure, at every degeneracy; closed forms where they serve."""

    statistics = "fermi"

    def __init__(self, measure: Measure) -> None:
        self.measure = measure
        self.top = measure.top
        self.exponent = measure.exponent
        self.closed = ClosedFermi(measure) if measure.powers() is not None and measure.top == inf else None
        self.route = self.closed.route if self.closed else f"panels about mu ({measure.route})"
        self.filled = Filled(measure)
        self.thermal = Classical(measure)
        self.capacity = float(measure.volume(measure.top)) if measure.top < inf else inf

    @property
    def error(self) -> float:
        """See `Ensemble.error`."""
        return self.measure.error + 2000 * EPS

    def all_sums(self, alpha: FloatArray, kT: FloatArray) -> Sums:
        """See `Ensemble.all_sums`."""
        return Sums(*self._told_apart(alpha, kT, all_sums=True))

    def number(self, alpha: FloatArray, kT: FloatArray) -> tuple[FloatArray, FloatArray]:
        """See `Ensemble.number`."""
        n, b0 = self._told_apart(alpha, kT, all_sums=False)
        return n, b0

    def _told_apart(self, alpha: FloatArray, kT: FloatArray, *, all_sums: bool) -> list[FloatArray]:
        result = [np.full(kT.shape, np.nan) for _ in range(7 if all_sums else 2)]
        for part in self._parts(alpha):
            got: tuple[FloatArray, ...]
            if self.closed and alpha[part[0]] > -DEGENERATE:
                whole = self.closed
                sums = whole.sums(alpha[part], kT[part]) if all_sums else None
                got = tuple(vars(sums).values()) if sums else whole.count(alpha[part], kT[part])
            else:
                got = self._stepped(alpha[part], kT[part], all_sums=all_sums)
            for column, piece in zip(result, got, strict=True):
                column[part] = piece
        return result

    def _parts(self, alpha: FloatArray) -> list[np.ndarray[tuple[int], np.dtype[np.intp]]]:
        """States that go together: all closed ones, and blocks of the others."""
        near = (
            np.isfinite(alpha) & (alpha > -DEGENERATE) if self.closed else np.zeros(alpha.shape, dtype=bool)
        )
        far = np.flatnonzero(~near & np.isfinite(alpha))
        panels = ABOVE.size + 2 * ABOUT_MU.size + (2 * ABOUT_BREAK.size + 1) * len(self.measure.breaks)
        blocks = np.array_split(far, int(np.ceil(far.size * panels * ORDER / BLOCK))) if far.size else []
        return [part for part in (np.flatnonzero(near), *blocks) if part.size]

    def _stepped(self, alpha: FloatArray, kT: FloatArray, *, all_sums: bool) -> tuple[FloatArray, ...]:
        mu = -alpha * kT
        v, t, dv, foot = self._nodes(mu, kT)
        d = self.measure.density(v) * dv
        first = self.measure.volume(foot)
        k = self.exponent
        v = np.column_stack([foot * k / (k + 1), v])
        t = np.column_stack([v[:, 0] / kT + alpha, t])
        d = np.column_stack([first, d])
        fading = np.exp(-np.abs(t))
        hole = fading / (1 + fading)  # what is missing below mu, and what stands above it
        change = np.copysign(hole, t) * d
        w = hole / (1 + fading) * d
        level = np.clip(mu, 0.0, self.top)
        below = self.filled.number(level)
        n, b0 = below + change.sum(axis=1), w.sum(axis=1)
        if not all_sums:
            return n, b0
        inside = self.filled.integral(level)
        beyond = np.maximum(mu - self.top, 0.0) if self.top < inf else 0.0
        flow = np.log1p(fading)
        return (
            n,
            below * level - inside + (change * v).sum(axis=1),
            ((flow + np.abs(t) * hole) * d).sum(axis=1),
            (inside + below * beyond) / kT + (flow * d).sum(axis=1),
            b0,
            (w * t).sum(axis=1),
            (w * t * t).sum(axis=1),
        )

    def _nodes(self, mu: FloatArray, kT: FloatArray) -> tuple[FloatArray, FloatArray, FloatArray, FloatArray]:
        """Energies, t, weights dE, all of shape (states, nodes), and the end of the foot up to which Omega is v^k.

        All is counted in kT, from mu where the bottom is out of reach, else from the bottom: so that neither t nor
        a small energy is a difference of large numbers.
        """
        origin = np.where(mu > ABOUT_MU[-1] * kT, mu, 0.0)[:, None]
        step, base, kT = ((mu[:, None] - origin) / kT[:, None], origin / kT[:, None], kT[:, None])
        near = np.concatenate([-ABOUT_BREAK[::-1], [0.0], ABOUT_BREAK])
        marks = [np.concatenate([-ABOUT_MU[:0:-1], ABOUT_MU]) + step, ABOVE - base]
        marks += [(b - origin) / kT + near for b in self.measure.breaks]
        low = np.maximum(step - ABOUT_MU[-1], -base)
        high = np.minimum(np.maximum(step, -base) + ABOVE[-1], (self.top - origin) / kT)
        edges = np.sort(np.clip(np.concatenate(marks, axis=1), np.minimum(low, high), high), axis=1)
        foot = np.where(edges[:, 0] > 0, 0.0, np.minimum(ABOVE[1], high[:, 0])) * (origin[:, 0] == 0)
        edges = np.maximum(edges, np.where(origin == 0, foot[:, None], -np.inf))
        x, w = legendre(ORDER)
        width = np.diff(edges, axis=1)
        y = (edges[:, :-1, None] + width[:, :, None] * x).reshape(mu.size, -1)
        dv = (width[:, :, None] * w).reshape(mu.size, -1) * kT
        return origin + kT * y, y - step, dv, foot * kT[:, 0]

    def below(self, number: FloatArray) -> FloatArray:
        """See `Ensemble.below`."""
        return energy_below(self.measure, number)

    def boltzmann(self, kT: FloatArray) -> tuple[FloatArray, FloatArray]:
        """See `Ensemble.boltzmann`."""
        return self.thermal.boltzmann(kT)

    def alpha_of(self, number: FloatArray, kT: FloatArray) -> FloatArray | None:
        """See `Ensemble.alpha_of`."""
        return self.closed.alpha_of(number, kT) if self.closed else None
