"""The point of a grid from which other traps are scaled: chosen by the question alone, not by who asks first."""

from __future__ import annotations

from dataclasses import dataclass, field
from math import inf
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
    """The origins of a whole question: along axes that only scale V one point of each, else the point itself."""

    program: Program
    question: Question
    _scaling: dict[str, dict[str, float]] = field(default_factory=dict)
    _known: dict[tuple[object, ...], Binding] = field(default_factory=dict)

    def of(self, place: str, stop: Mapping[str, float]) -> Binding:
        """The binding from which the trap at a stop may be scaled, uncertain literals where they stand."""
        if place not in self._scaling:
            axes = Grid(self.question.over).parameters
            found = {axis.name: self._along(axis, place) for axis in axes}
            self._scaling[place] = {name: value for name, value in found.items() if value is not None}
        values = {**stop, **self._scaling[place]}
        key = (place, *values.items())
        if key not in self._known:
            self._known[key] = self._bound(place, values)
        return self._known[key]

    def _along(self, axis: Axis, place: str) -> float | None:
        """The origin along an axis that only scales V, None along others; each trap is looked at again later.

        It is the middle, unless `E_max` leaves the traps of an end without a part of what the other end measures.
        """
        first, middle, last = (float(axis.values[i]) for i in (0, (axis.points - 1) // 2, -1))
        stop = {each.name: float(each.values[0]) for each in Grid(self.question.over).parameters}
        traps = {x: self._bound(place, {**stop, axis.name: x}).place for x in (middle, first, last)}
        known = {x: facts for x, facts in traps.items() if isinstance(facts, TrapFacts)}
        if last == middle or len(known) < len(traps) or scale_between(known[last], known[middle]) is None:
            return None
        ends = (known[first], known[last])
        return next((x for x, facts in known.items() if all(_covers(facts, end) for end in ends)), middle)

    def _bound(self, place: str, stop: Mapping[str, float]) -> Binding:
        values = self.program.conditions(self.question).values | dict(stop)
        return self.program.bind(self.question.gas, place, values)


def _covers(origin: TrapFacts, other: TrapFacts) -> bool:
    """Whether the measure of `origin`, up to its `E_max`, is that of the other up to its own."""
    factor = scale_between(other, origin)
    tops = (inf if trap.e_max is None else trap.e_max for trap in (origin, other))
    return factor is not None and next(tops) * factor >= next(tops)
