"""The levels of one direction, all of them: some known one by one, the rest as their smooth density."""

from __future__ import annotations

from dataclasses import dataclass, field
from functools import cached_property
from math import ceil, log
from typing import TYPE_CHECKING, NamedTuple, Protocol

import numpy as np

from eoscore.measure.rules import legendre

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from eoscore.state.reading import FloatArray

__all__ = ["Direction", "Known", "Oscillator", "Sums"]

CHUNK = 400_000  # numbers made at a time
REACH = 45.0  # kT: e^-45 is dropped
RATIO = 1.5  # of the panels above the last known level


class Sums(NamedTuple):
    """Of e^(-b e) over the levels but the lowest, e counted from it: the sum, that times e, that times e^2."""

    z0: NDArray[np.inexact]
    z1: NDArray[np.inexact]
    z2: NDArray[np.inexact]


class Counted(Protocol):
    """The smooth number of levels below an energy, J from the bottom of V."""

    @property
    def breaks(self) -> tuple[float, ...]:
        """Energies where it is not smooth."""
        ...

    def density(self, v: FloatArray, /) -> FloatArray:
        """Levels per J at energies of one axis."""
        ...


class Direction(Protocol):
    """lowest: energy of the lowest level, J from the bottom of V. gap: to the next. error: relative, of all sums."""

    @property
    def lowest(self) -> float:
        """J from the bottom."""
        ...

    @property
    def gap(self) -> float:
        """J to the next level."""
        ...

    @property
    def error(self) -> float:
        """Bound of the relative error of the sums."""
        ...

    def sums(self, beta: NDArray[np.inexact], kT: float) -> Sums:
        """At inverse energies beta (1/J) with a real part of at least 1/kT, any shape."""
        ...


@dataclass(frozen=True)
class Oscillator:
    """n hbar omega: `quantum` in J."""

    quantum: float
    error: float = 1e-15

    @property
    def lowest(self) -> float:
        """See `Direction`."""
        return self.quantum / 2

    @property
    def gap(self) -> float:
        """See `Direction`."""
        return self.quantum

    def sums(self, beta: NDArray[np.inexact], kT: float) -> Sums:  # noqa: ARG002
        """See `Direction`."""
        q = self.quantum
        occupied = np.exp(-beta * q) / -np.expm1(-beta * q)
        return Sums(
            occupied, q * occupied * (1 + occupied), q * q * occupied * (1 + occupied) * (1 + 2 * occupied)
        )


@dataclass(frozen=True)
class Known:
    """energies: J from the lowest, ascending.

    Above the last one follows the smooth part: `states`, the phase-space volume over h^d below an energy from the
    bottom of V, whose slope is the density of levels (Euler-Maclaurin, DLMF 2.10.1); None where there are no more.
    """

    energies: FloatArray
    lowest: float
    states: Counted | None
    error: float
    kept: list[tuple[FloatArray, FloatArray]] = field(default_factory=list, compare=False, repr=False)

    @property
    def gap(self) -> float:
        """See `Direction`."""
        return float(self.energies[1])

    @cached_property
    def spacing(self) -> float:
        """Of the smooth levels at the last known one, J."""
        return (
            0.0
            if self.states is None
            else 1 / float(self.states.density(self.lowest + self.energies[-1:])[0])
        )

    def sums(self, beta: NDArray[np.inexact], kT: float) -> Sums:
        """See `Direction`."""
        e, w = self.energies[1:], self._weights()
        last = float(e[-1])
        if self.states is not None and last < REACH * kT:
            more, dn = self._beyond(last, kT)
            e, w = np.concatenate([e, more]), np.concatenate([w, dn])
        flat = np.ravel(beta)
        size = max(CHUNK // e.size, 1)
        parts = [_summed(flat[i : i + size], e, w) for i in range(0, flat.size, size)]
        z0, z1, z2 = (np.concatenate([part[k] for part in parts]).reshape(np.shape(beta)) for k in range(3))
        if self.states is not None:
            z0, z1, z2 = self._corner(beta, last, z0, z1, z2)
        return Sums(z0, z1, z2)

    def _weights(self) -> FloatArray:
        w = np.ones(self.energies.size - 1)
        if self.states is not None:
            w[-1] *= 0.5  # the first half of the step belongs to the sum, the other to the integral
        return w

    def _beyond(self, last: float, kT: float) -> tuple[FloatArray, FloatArray]:
        """Energies from the lowest level and numbers of levels there, as far as 45 kT; kept, in stretches."""
        while not self.kept or self.kept[-1][0][-1] < REACH * kT:
            start = self.kept[-1][0][-1] if self.kept else last
            self.kept.append(self._stretch(last, float(start), max(REACH * kT, start * RATIO**4)))
        return np.concatenate([e for e, _ in self.kept]), np.concatenate([w for _, w in self.kept])

    def _stretch(self, last: float, start: float, reach: float) -> tuple[FloatArray, FloatArray]:
        if self.states is None:
            return np.array([reach]), np.zeros(1)
        first, stop = round(log(start / last) / log(RATIO)), ceil(log(reach / last) / log(RATIO))
        edges = last * RATIO ** np.arange(first, stop + 1.0)
        inner = [b - self.lowest for b in self.states.breaks if edges[0] < b - self.lowest < edges[-1]]
        edges = np.sort(np.concatenate([edges, inner]))
        x, w = legendre(16)
        width = np.diff(edges)
        e = (edges[:-1, None] + width[:, None] * x).ravel()
        dn = (width[:, None] * w).ravel() * self.states.density(self.lowest + e)
        # an atom without weight at the end of the stretch tells where the next one begins
        return np.append(e, edges[-1]), np.append(dn, 0.0)

    def _corner(
        self,
        beta: NDArray[np.inexact],
        last: float,
        z0: NDArray[np.inexact],
        z1: NDArray[np.inexact],
        z2: NDArray[np.inexact],
    ) -> Sums:
        """-g'/12 of the Euler-Maclaurin sum, g = e^(-b E(n)), with the derivatives by b that z1 and z2 want."""
        if self.states is None:
            return Sums(z0, z1, z2)
        fading = np.exp(-beta * last) * (self.spacing / 12)
        return Sums(
            z0 + beta * fading,
            z1 + fading * (beta * last - 1),
            z2 + fading * last * (beta * last - 2),
        )


def _summed(
    beta: NDArray[np.inexact], e: FloatArray, w: FloatArray
) -> tuple[NDArray[np.inexact], NDArray[np.inexact], NDArray[np.inexact]]:
    with np.errstate(under="ignore"):
        fading = np.exp(-beta[:, None] * e)
    return fading @ w, fading @ (w * e), fading @ (w * e * e)
