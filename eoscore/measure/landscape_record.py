"""What a landscape tells: its minima, its bottom, where it leaks."""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from typing import TYPE_CHECKING, Literal

if TYPE_CHECKING:
    from collections.abc import Sequence

    import numpy as np
    from numpy.typing import NDArray

__all__ = ["Escape", "Kind", "Landscape", "Minimum", "multiplicity", "sense"]

Kind = Literal["quadratic", "flat", "ring", "sphere", "cone", "wall", "other"]


def multiplicity(coordinate: str) -> int:
    """How many dimensions of space a coordinate stands for: 2 for rho, 3 for r, else 1."""
    return {"rho": 2, "r": 3}.get(coordinate, 1)


@dataclass(frozen=True)
class Minimum:
    """A local minimum of V inside the walls.

    position: in the field's coordinates, m. value: V there, J. hessian: second derivatives in these
    coordinates, J/m^2, exact; nan where V is not smooth.
    kind: "quadratic"; "flat" (V is level along some direction); "ring" and "sphere" (level along a closed
    curve or surface); "cone" (V rises linearly); "wall" (V falls towards a wall that holds); "other".
    curvatures: of V along the d principal directions of space, ascending, J/m^2, 0 along level directions;
    None if the bottom is neither quadratic nor level.
    """

    position: tuple[float, ...]
    value: float
    kind: Kind
    hessian: NDArray[np.float64] = field(compare=False, repr=False)
    curvatures: tuple[float, ...] | None = None


@dataclass(frozen=True)
class Escape:
    """The lowest energy (J) at which a path leads from the bottom to where V stays below it without end.

    position: the pass, in the field's coordinates, m; None where V approaches the energy at infinity.
    direction: unit vector of the way out there, in the same coordinates.
    """

    coordinates: tuple[str, ...]
    energy: float
    position: tuple[float, ...] | None
    direction: tuple[float, ...]

    @property
    def words(self) -> str:
        """The place and the direction of the leak."""
        if self.position is None:
            return f"at infinity along {self.sense}, where V levels off"
        place = ", ".join(
            f"{name} = {x:.6g} m" for name, x in zip(self.coordinates, self.position, strict=True)
        )
        return f"over the pass at {place}, towards {self.sense}"

    @property
    def sense(self) -> str:
        """The direction in words: `-z`, or `+x and -z` where both count."""
        return sense(self.coordinates, self.direction)


def sense(coordinates: tuple[str, ...], direction: Sequence[float]) -> str:
    """A direction in words, its largest parts first."""
    parts = sorted(zip(direction, coordinates, strict=True), key=lambda part: -abs(part[0]))
    large = [(x, name) for x, name in parts if abs(x) > 0.2 * abs(parts[0][0])]
    return " and ".join(f"{'+' if x > 0 else '-'}{name}" for x, name in large) or "every direction"


@dataclass(frozen=True)
class Landscape:
    """A surveyed energy function.

    bottom: the lowest local minimum. minima: all that join it below the escape energy, the bottom first.
    escape: None where V holds at every energy. holds: whether there is a bottom that holds; else `why` says
    in words why not, and bottom and escape are what was found. error: a bound on the relative error of the
    depth.
    """

    coordinates: tuple[str, ...]
    bottom: Minimum | None
    minima: tuple[Minimum, ...] = ()
    escape: Escape | None = None
    why: str = ""
    error: float = 1e-12

    @property
    def holds(self) -> bool:
        """Whether V holds anything."""
        return not self.why

    @property
    def dimension(self) -> int:
        """The dimension of space."""
        return sum(map(multiplicity, self.coordinates))

    @property
    def depth(self) -> float:
        """From the bottom to the escape, J; inf where V holds at every energy."""
        if self.escape is None or self.bottom is None:
            return math.inf
        return self.escape.energy - self.bottom.value
