"""Solved states: arrays over the points of a question, flat, with what is uncertain and what is missing."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import TYPE_CHECKING

import numpy as np

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from eoscore.state.reading import FloatArray

__all__ = ["Solution", "spread"]

_UNITS = {"T": " K", "mu": " J", "U": " J", "S": " J/K"}


@dataclass
class Solution:
    """alpha = -mu/kT, kT in J and the condensate number; `dlog` bounds the error of ln T of condensed points.

    Points without a state have nan, and are told in `missing` with the words why.
    """

    alpha: FloatArray
    kT: FloatArray  # noqa: N815 - its name in every paper
    condensate: FloatArray
    condensed: NDArray[np.bool_]
    dlog: FloatArray
    missing: list[tuple[str, NDArray[np.bool_]]] = field(default_factory=list)

    @classmethod
    def empty(cls, size: int) -> Solution:
        """A solution in which nothing is known yet."""
        nans = [np.full(size, np.nan) for _ in range(2)]
        zeros = [np.zeros(size) for _ in range(2)]
        return cls(nans[0], nans[1], zeros[0], np.zeros(size, dtype=bool), zeros[1])

    @property
    def known(self) -> NDArray[np.bool_]:
        """The points that have a state."""
        known = np.ones(self.kT.shape, dtype=bool)
        for _, where in self.missing:
            known &= ~where
        return known

    def refuse(self, words: str, where: NDArray[np.bool_]) -> None:
        """Give points up with the words why; those given up before keep their first words."""
        where = where & self.known
        if where.any():
            self.missing.append((words, where))
            self.alpha[where] = np.nan
            self.kT[where] = np.nan
            self.condensate[where] = np.nan
            self.condensed[where] = False


def spread(values: FloatArray, name: str = "N") -> str:
    """A number, or the range of many, for a sentence, with the unit of the condition of this name."""
    values = values[np.isfinite(values)]
    if not values.size:
        return "nothing"
    least, most = float(values.min()), float(values.max())
    unit = _UNITS.get(name, "")
    return f"{least:.6g}{unit}" if most - least <= 1e-6 * abs(least) else f"{least:.6g} to {most:.6g}{unit}"
