"""A trap: a potential V of coordinates with walls."""

from __future__ import annotations

from functools import cached_property
from math import inf, pi, sqrt
from typing import TYPE_CHECKING

from eoscore.errors import NoAnswerError
from eoscore.measure.landscape import survey
from eoscore.place.base import Place

if TYPE_CHECKING:
    from eoscore.formula.field import Field
    from eoscore.measure import Measure
    from eoscore.measure.landscape import Landscape, Minimum

__all__ = ["TrapPlace"]

_BOTTOMS = {
    "cone": "the bottom is the tip of a cone, not quadratic",
    "wall": "the bottom lies on a wall, where V does not rise quadratically",
    "other": "the bottom is not quadratic",
}


class TrapPlace(Place):
    """A surveyed trap for particles of a mass in kg, which only its frequencies ask for.

    e_max: energies above it are not counted, J from the bottom. landscape: of the field, where it is known.
    NoAnswerError where the potential holds nothing.
    """

    def __init__(
        self,
        name: str,
        field: Field,
        e_max: float | None = None,
        mass: float | None = None,
        landscape: Landscape | None = None,
    ) -> None:
        self.name, self.field, self.mass = name, field, mass
        self.landscape: Landscape = landscape or survey(field)
        if not self.landscape.holds or self.landscape.bottom is None:
            raise NoAnswerError(f"{name}: {self.landscape.why}")
        if e_max is not None and e_max <= 0:
            raise NoAnswerError(f"{name}: E_max is {e_max:.6g} J above the bottom, so that it holds nothing")
        self.bottom: Minimum = self.landscape.bottom
        self.dimension = self.landscape.dimension
        self.e_max = inf if e_max is None else e_max
        self.top = min(self.e_max, self.landscape.depth)

    @cached_property
    def measure(self) -> Measure:
        """Omega(v) in m^d of the region that joins the bottom below the top."""
        return self.whole.cut(self.top)

    @cached_property
    def whole(self) -> Measure:
        """The measure as high as it is known: at least up to the top."""
        from eoscore.measure import measure_of

        return measure_of(self.field, self.landscape, self.top if self.e_max < self.landscape.depth else inf)

    @property
    def r_min(self) -> tuple[float, ...]:
        """Position of the bottom in the coordinates of the potential, m."""
        return self.bottom.position

    @property
    def v_min(self) -> float:
        """V at the bottom, J."""
        return self.bottom.value

    @property
    def depth_error(self) -> float:
        """Bound on the relative error of the depth."""
        return self.landscape.error

    @property
    def escape_words(self) -> str:
        """Where and in which direction the trap leaks."""
        escape = self.landscape.escape
        if self.e_max <= self.landscape.depth or escape is None:
            return super().escape_words
        return escape.words

    @property
    def frequencies(self) -> tuple[float, ...]:
        """The d principal frequencies sqrt(V''/m)/2pi, ascending, Hz."""
        if self.bottom.curvatures is None:
            raise NoAnswerError(f"{_BOTTOMS.get(self.bottom.kind, _BOTTOMS['other'])}: it has no frequencies")
        mass = self.mass
        if not mass:
            raise NoAnswerError(
                "the frequencies need the mass of the particle: give the gas `m` or an isotope"
            )
        return tuple(sqrt(max(bend, 0.0) / mass) / (2 * pi) for bend in self.bottom.curvatures)
