"""The grid of a question: which axes change the trap, which only the state, and how the parts come together.

Axes over N, T, mu and the like are solved together as arrays; axes over parameters of the gas or the trap need a
binding for each of their points. A question without `over` is a grid without axes.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from itertools import product
from typing import TYPE_CHECKING

import numpy as np

if TYPE_CHECKING:
    from collections.abc import Iterator, Mapping, Sequence

    from numpy.typing import NDArray

    from eoscore.language.question import Axis

__all__ = ["Grid", "Stop"]


@dataclass(frozen=True)
class Stop:
    """One point of the parameter axes: its index along them, and the values it sets."""

    index: tuple[int, ...]
    values: Mapping[str, float]


@dataclass(frozen=True)
class Grid:
    """The axes of a question, in the order of its names."""

    axes: tuple[Axis, ...]

    @cached_property
    def shape(self) -> tuple[int, ...]:
        """Points along every axis."""
        return tuple(axis.points for axis in self.axes)

    @cached_property
    def parameters(self) -> tuple[Axis, ...]:
        """The axes that change the gas or the trap."""
        return tuple(axis for axis in self.axes if not axis.thermodynamic)

    @cached_property
    def conditions(self) -> tuple[Axis, ...]:
        """The axes that only change the state."""
        return tuple(axis for axis in self.axes if axis.thermodynamic)

    def stops(self) -> Iterator[Stop]:
        """Every point of the parameter axes, the first name slowest; one empty stop where there are none."""
        names = [axis.name for axis in self.parameters]
        for index in product(*(range(axis.points) for axis in self.parameters)):
            values = (axis.values[i] for axis, i in zip(self.parameters, index, strict=True))
            yield Stop(index, {name: float(value) for name, value in zip(names, values, strict=True)})

    def arrays(self, given: Mapping[str, float]) -> dict[str, NDArray[np.float64]]:
        """All conditions as arrays that broadcast to the condition axes."""
        count = len(self.conditions)
        arrays = {name: np.asarray(value, dtype=np.float64) for name, value in given.items()}
        for place, axis in enumerate(self.conditions):
            arrays[axis.name] = axis.values.reshape((1,) * place + (-1,) + (1,) * (count - place - 1))
        return arrays

    def assemble(
        self, parts: Sequence[NDArray[np.generic]], entries: tuple[int, ...] = ()
    ) -> NDArray[np.generic]:
        """The values at all stops (in their order), each over the condition axes, as one array over the grid.

        `entries` is the shape of a quantity's own last axis, if it has one.
        """
        inner = tuple(axis.points for axis in self.conditions) + entries
        whole = np.stack([np.broadcast_to(part, inner) for part in parts])
        whole = whole.reshape(tuple(axis.points for axis in self.parameters) + inner)
        order = [*self.parameters, *self.conditions]
        return np.moveaxis(whole, range(len(order)), [self.axes.index(axis) for axis in order])
