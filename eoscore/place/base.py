"""What every place tells: how much room lies below an energy, and the facts of its bottom and its leak."""

from __future__ import annotations

from abc import ABC, abstractmethod
from math import inf
from typing import TYPE_CHECKING

from eoscore.errors import NoAnswerError

if TYPE_CHECKING:
    from eoscore.measure import Measure

__all__ = ["Place"]


class Place(ABC):
    """A place that may hold a gas. Energies count from its bottom; all numbers are SI.

    name: as in the file. dimension: of space; 0 for a density of states. top: energies above it are not counted, J:
    the escape energy or E_max, whichever is lower; inf where everything is held. levels: "exact" where the true levels
    are to be counted.
    Facts that a place does not have raise NoAnswerError with the reason.
    """

    name: str
    dimension: int
    top: float = inf
    levels: str | None = None

    @property
    @abstractmethod
    def measure(self) -> Measure:
        """Omega(v) in m^d: the volume where V lies less than v above the bottom, up to the top.

        For a density of states it is the number of states below E instead.
        """

    @property
    def r_min(self) -> tuple[float, ...]:
        """Position of the bottom in the coordinates of the potential, m."""
        raise NoAnswerError(f"{self.name} has no coordinates, and so no position of its bottom")

    @property
    def v_min(self) -> float:
        """V at the bottom, J."""
        raise NoAnswerError(f"{self.name} has no potential, and so no energy of its bottom")

    @property
    def depth(self) -> float:
        """From the bottom to the lowest escape (or to E_max where that is lower), J; inf where there is none."""
        return self.top

    @property
    def depth_error(self) -> float:
        """Bound on the relative error of the depth."""
        return 0.0

    @property
    def escape_words(self) -> str:
        """Where and in which direction the place leaks."""
        return "over E_max" if self.top < inf else "nowhere: it holds at every energy"

    @property
    def frequencies(self) -> tuple[float, ...]:
        """The d principal frequencies of the bottom, ascending, Hz; 0 for level directions."""
        raise NoAnswerError(f"{self.name} has no potential, and so no frequencies")
