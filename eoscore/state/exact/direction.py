"""The levels of one direction, or of all directions together: exact sums over all of them."""

from __future__ import annotations

from abc import ABC, abstractmethod
from dataclasses import dataclass
from math import floor, log2
from typing import TYPE_CHECKING, NamedTuple, Protocol

import numpy as np

from eoscore.errors import NoAnswerError

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from eoscore.state.reading import FloatArray

__all__ = ["END", "REACH", "Atoms", "Direction", "OnAtoms", "Oscillator", "Sums", "some"]

CHUNK = 400_000  # numbers made at a time
REACH = 42.0  # kT: e^-42 is dropped
END = 700.0  # numbers below e^-700 cost a hundred times as much
ENDLESS = 1e-6  # of the partition function beyond its last level that is too much
ENOUGH = 1e-6  # relative error of a partition function that asks for no more known levels
SPARE = 1.25  # further, so that a search for a temperature does not begin again at each step


class Sums(NamedTuple):
    """Of e^(-b e) over the levels but the lowest, e counted from it: the sum, that times e, that times e^2."""

    z0: NDArray[np.inexact]
    z1: NDArray[np.inexact]
    z2: NDArray[np.inexact]


class Atoms(NamedTuple):
    """Energies (J from the lowest level) and weights that stand for all levels but the lowest."""

    e: FloatArray
    w: FloatArray


class Direction(Protocol):
    """lowest: energy of the lowest level, J from the bottom of V. gap: to the next."""

    @property
    def lowest(self) -> float:
        """J from the bottom."""
        ...

    @property
    def gap(self) -> float:
        """J to the next level."""
        ...

    def error_at(self, kT: float) -> float:
        """Bound of the relative error of the sums at kT, J."""
        ...

    def below(self, energy: float) -> float:
        """How many levels lie below an energy, J from the lowest; roughly."""
        ...

    def sums(self, beta: NDArray[np.inexact], kT: float) -> Sums:
        """At inverse energies beta (1/J) with a real part of at least 1/kT, any shape."""
        ...


@dataclass(frozen=True)
class Oscillator:
    """n hbar omega: `quantum` in J."""

    quantum: float

    @property
    def lowest(self) -> float:
        """See `Direction`."""
        return self.quantum / 2

    @property
    def gap(self) -> float:
        """See `Direction`."""
        return self.quantum

    def error_at(self, kT: float) -> float:  # noqa: ARG002 - none of it comes from the temperature
        """See `Direction`."""
        return 1e-15

    def below(self, energy: float) -> float:
        """See `Direction`."""
        return energy / self.quantum

    def sums(self, beta: NDArray[np.inexact], kT: float) -> Sums:  # noqa: ARG002
        """See `Direction`."""
        q = self.quantum
        occupied = np.exp(-beta * q) / -np.expm1(-beta * q)
        return Sums(
            occupied, q * occupied * (1 + occupied), q * q * occupied * (1 + occupied) * (1 + 2 * occupied)
        )


def some(levels: FloatArray, *, coarse: bool) -> FloatArray:
    """All of the known levels (rows, levels), or those of a coarser description."""
    return levels[:, : levels.shape[1] * 13 // 16] if coarse else levels


class OnAtoms(ABC):
    """A spectrum some of whose levels are known one by one, and the rest as a smooth density, up to some energy.

    `_known`: the relative error of the known levels. `lowest` and `gap` as in `Direction`.
    """

    lowest: float
    gap: float
    _known: float = 1e-10

    def __init__(self) -> None:
        self._kept: dict[bool, tuple[float, Atoms]] = {}
        self._good: set[int] = set()  # octaves of kT at which enough levels are known
        self._farthest = (
            0.0  # J, how far they were ever made: another temperature of the same grid wants it again
        )

    @abstractmethod
    def below(self, energy: float) -> float:
        """See `Direction`."""

    @abstractmethod
    def made(self, top: float, *, coarse: bool) -> Atoms:
        """The spectrum up to `top`, J from the lowest level; `coarse`: from `some` of the known levels alone."""

    @abstractmethod
    def refined(self, reach: float) -> bool:
        """Come to know more levels of the rows that begin below `reach` (J from the lowest); whether it did."""

    def atoms(self, kT: float) -> Atoms:
        """As far as `REACH` kT at least, and of enough known levels."""
        octave = floor(log2(kT))
        if octave not in self._good:
            while self._apart(kT) > ENOUGH and self.refined(REACH * kT):
                self._kept.clear()
            self._good.add(octave)
        found = self._as_far(kT, coarse=False)
        if _beyond(found, kT) > ENDLESS:
            raise NoAnswerError(
                "so many states lie far out that their sum does not end at this temperature: V rises too slowly there; "
                "lower T or N, or give the trap a wall (`where`)"
            )
        return found

    def error_at(self, kT: float) -> float:
        """See `Direction`: twice what fewer of the known levels give differently."""
        return self._known + 10 * _beyond(self.atoms(kT), kT) + self._apart(kT)

    def _as_far(self, kT: float, *, coarse: bool) -> Atoms:
        upto, atoms = self._kept.get(coarse, (0.0, None))
        if atoms is None or upto < REACH * kT:
            upto = max(SPARE * REACH * kT, self._farthest)
            atoms = _ascending(self.made(upto, coarse=coarse))
            self._kept[coarse] = upto, atoms
            self._farthest = upto  # not where that was too far
        return atoms

    def _apart(self, kT: float) -> float:
        whole, other = (
            1 + float((np.exp(-np.minimum(e / kT, END)) * w).sum())  # a library's product would start threads
            for e, w in (self._as_far(kT, coarse=c) for c in (False, True))
        )
        return 2 * abs(other / whole - 1)

    def sums(self, beta: NDArray[np.inexact], kT: float) -> Sums:
        """See `Direction`."""
        e, w = self.atoms(kT)
        rows = np.stack([w, w * e, w * e * e])
        flat = np.ravel(beta)
        whole = np.empty((flat.size, 3), dtype=flat.dtype)
        octaves = np.floor(np.log2(np.real(flat) * kT))
        for octave in np.unique(octaves):  # the colder, the fewer levels count
            few = int(np.searchsorted(e, REACH * kT / 2.0**octave)) + 1
            same = np.flatnonzero(octaves == octave)
            for which in np.array_split(same, same.size * few // CHUNK + 1):
                whole[which] = _summed(flat[which], e[:few], rows[:, :few])
        return Sums(*(whole[:, k].reshape(np.shape(beta)) for k in range(3)))


def _beyond(atoms: Atoms, kT: float) -> float:
    """The share of a partition function that its last part has before `REACH`: what lies beyond is like it."""
    x = atoms.e / kT
    fading = atoms.w * np.exp(-np.minimum(x, END))
    last = (x > 0.95 * REACH) & (x <= REACH)
    return float(np.abs(fading[last]).sum() / (1 + fading[x <= REACH].sum()))


def _ascending(atoms: Atoms) -> Atoms:
    order = np.argsort(atoms.e, kind="stable")
    return Atoms(atoms.e[order], atoms.w[order])


def _summed(beta: NDArray[np.inexact], e: FloatArray, rows: FloatArray) -> NDArray[np.inexact]:
    x = beta[:, None] * e
    if not np.iscomplexobj(x):
        x = np.minimum(x, END)
    with np.errstate(under="ignore"):
        fading = np.exp(-x)
    return np.stack([(fading * row).sum(axis=1) for row in rows], axis=1)
