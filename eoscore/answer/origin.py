"""The point of a grid from which other traps are scaled: chosen by the question alone, not by who asks first."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import TYPE_CHECKING

from eoscore.answer.grid import Grid
from eoscore.language.facts import TrapFacts
from eoscore.place.scaled import scale_between

if TYPE_CHECKING:
    from collections.abc import Mapping

    from eoscore.language.program import Binding, Program
    from eoscore.language.question import Axis, Question

__all__ = ["Origins"]


@dataclass
class Origins:
    """The origins of a whole question: along axes that only scale V the middle point, else the point itself."""

    program: Program
    question: Question
    _scaling: dict[str, tuple[str, ...]] = field(default_factory=dict)
    _known: dict[tuple[object, ...], Binding] = field(default_factory=dict)

    def of(self, place: str, stop: Mapping[str, float]) -> Binding:
        """The binding from which the trap at a stop may be scaled, uncertain literals where they stand."""
        scaling = self._scaling.get(place)
        if scaling is None:
            axes = Grid(self.question.over).parameters
            scaling = tuple(axis.name for axis in axes if self._scales(axis, place))
            self._scaling[place] = scaling
        middles = {axis.name: _middle(axis) for axis in self.question.over if axis.name in scaling}
        values = {**stop, **middles}
        key = (place, *values.items())
        if key not in self._known:
            self._known[key] = self._bound(place, values)
        return self._known[key]

    def _scales(self, axis: Axis, place: str) -> bool:
        """Whether an axis only scales V, by its middle and its last point; each trap is looked at again later."""
        middle, other = _middle(axis), float(axis.values[-1])
        if other == middle:
            return False
        stop = {each.name: float(each.values[0]) for each in Grid(self.question.over).parameters}
        first, second = (self._bound(place, {**stop, axis.name: value}).place for value in (middle, other))
        if not isinstance(first, TrapFacts) or not isinstance(second, TrapFacts):
            return False
        return scale_between(second, first) is not None

    def _bound(self, place: str, stop: Mapping[str, float]) -> Binding:
        values = self.program.conditions(self.question).values | dict(stop)
        return self.program.bind(self.question.gas, place, values)


def _middle(axis: Axis) -> float:
    return float(axis.values[(axis.points - 1) // 2])
