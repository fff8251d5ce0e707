"""Questions with everything resolved that needs no physics: who is asked, what is given, over which grid."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING, Literal

if TYPE_CHECKING:
    from collections.abc import Mapping

    import numpy as np
    from numpy.typing import NDArray

    from eoscore.language import nodes
    from eoscore.language.units import Dimension

__all__ = ["Axis", "Given", "Question"]


@dataclass(frozen=True)
class Given:
    """A condition: its SI value, its dimension, the expression behind it.

    `thermodynamic` tells conditions of the gas, and coordinates at which it is looked at, from parameters.
    """

    name: str
    value: float
    dimension: Dimension
    node: nodes.Definition
    thermodynamic: bool


@dataclass(frozen=True, eq=False)
class Axis:
    """One name of a grid with its SI values: `points` of them evenly or geometrically between `ends`, or a list."""

    name: str
    kind: Literal["even", "geometric", "list"]
    ends: tuple[float, ...]
    points: int
    dimension: Dimension
    node: nodes.Axis
    thermodynamic: bool

    @cached_property
    def values(self) -> NDArray[np.float64]:
        """All SI values, shape (points,)."""
        import numpy as np

        if self.kind == "list":
            return np.array(self.ends)
        spread = np.linspace if self.kind == "even" else np.geomspace
        return spread(self.ends[0], self.ends[1], self.points)


@dataclass(frozen=True, eq=False)
class Question:
    """One `find` or `derive`: the gas, the place (None where the gas holds itself), the places it comes from.

    `given` holds the thermodynamic conditions, and positions where `coordinates` of the place may be given;
    `values` new values of named parameters. `dimension` is that of the space the place holds the gas in, levels not
    counted; None where only physics can tell.
    """

    node: nodes.Find | nodes.Derive
    verb: Literal["find", "derive"]
    gas: str
    place: str | None
    origins: tuple[str, ...]
    quantities: tuple[nodes.Ident, ...]
    given: Mapping[str, Given]
    values: Mapping[str, Given]
    over: tuple[Axis, ...]
    dimension: int | None
    coordinates: tuple[str, ...] = ()

    @property
    def line(self) -> int:
        """The line of the file where it is asked, from 1."""
        return self.node.span.line
