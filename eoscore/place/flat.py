"""Places without a potential: a box of some volume, and the unbounded uniform place."""

from __future__ import annotations

from functools import cached_property
from math import inf

from eoscore.errors import NoAnswerError
from eoscore.measure import Measure, Powers
from eoscore.place.base import Place

__all__ = ["UniformPlace", "VolumePlace"]


class VolumePlace(Place):
    """A flat box of any shape: volume in m^dimension."""

    def __init__(self, name: str, volume: float, dimension: int, e_max: float | None = None) -> None:
        if not volume > 0:
            raise NoAnswerError(f"{name}: a volume of {volume:.6g} m^{dimension} holds nothing")
        self.name, self.volume, self.dimension = name, volume, dimension
        self.top = inf if e_max is None else e_max

    @cached_property
    def measure(self) -> Measure:
        """All the volume at energy 0."""
        return Powers(((self.volume, 0.0),), self.top)

    @property
    def v_min(self) -> float:
        """V in the box, J."""
        return 0.0

    @property
    def frequencies(self) -> tuple[float, ...]:
        """Zeros: the floor is flat."""
        return (0.0,) * self.dimension


class UniformPlace(VolumePlace):
    """The unbounded place, of which one m^d is looked at: its numbers are densities."""

    def __init__(self, dimension: int, name: str = "uniform") -> None:
        super().__init__(name, 1.0, dimension)
