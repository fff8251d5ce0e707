"""The whole way from a question to its readings, for any values of the uncertain literals."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import TYPE_CHECKING

import numpy as np

from eoscore.answer.grid import Grid, Stop
from eoscore.answer.origin import Origins
from eoscore.answer.unit import unit_of_dimension
from eoscore.errors import NoAnswerError
from eoscore.language.quantities import AT_COUNTS, AT_POSITIONS, COUNT, QUANTITIES
from eoscore.state.fixed_number import probability_at
from eoscore.state.positioned import read_at
from eoscore.state.reading import Reason, reading_of, spread_over
from eoscore.state.scale import with_scale
from eoscore.state.table import unit_in
from eoscore.state.treatment import state_of

if TYPE_CHECKING:
    from collections.abc import Mapping

    from numpy.typing import NDArray

    from eoscore.answer.holding import HeldGases
    from eoscore.language.program import Binding, Program
    from eoscore.language.question import Question
    from eoscore.state.held import HeldGas
    from eoscore.state.reading import Reading
    from eoscore.state.state import State

__all__ = ["Chain", "Part"]


@dataclass(frozen=True)
class Part:
    """What one stop of the grid gave: readings over the condition axes, and what they were read from.

    `held` is None where nothing could be held; the readings then say why. `positions` are those of the question, by
    coordinate in m.
    """

    stop: Stop
    binding: Binding
    held: HeldGas | None
    given: Mapping[str, NDArray[np.float64]]
    readings: Mapping[str, Reading]
    spill: tuple[str, ...] = ()
    positions: Mapping[str, NDArray[np.float64]] = field(default_factory=dict)


@dataclass
class Chain:
    """One question of one program; `whole` is the question of which this is a chunk."""

    program: Program
    question: Question
    held: HeldGases
    whole: Question | None = None
    grid: Grid = field(init=False)

    def __post_init__(self) -> None:
        self.grid = Grid(self.question.over)
        self._origins = Origins(self.program, self.whole or self.question)

    @property
    def names(self) -> tuple[str, ...]:
        """The quantities asked for, each once, in order."""
        return tuple(dict.fromkeys(ident.name for ident in self.question.quantities))

    def parts(self, literals: Mapping[int, float] | None = None) -> list[Part]:
        """Every stop of the grid, with the literals of these indices at other SI values."""
        moved = literals or {}
        return [self._part(stop, moved) for stop in self.grid.stops()]

    def _part(self, stop: Stop, literals: Mapping[int, float]) -> Part:
        question = self.question
        conditions = self.program.conditions(question, literals)
        values = conditions.values | dict(stop.values)
        arrays = self.grid.arrays(conditions.given)
        positions = {name: arrays.pop(name) for name in question.coordinates if name in arrays}
        given: Mapping[str, NDArray[np.float64]] = arrays
        binding = self.program.bind(question.gas, question.place, values, literals)
        physical = tuple(name for name in self.names if name in QUANTITIES)
        named = self._named(binding)
        try:
            held = self._held(binding, question.place, stop)
            if question.origins:
                state = self._brought(held, given, stop, values, literals)
                given = {name: state.reading(name).value for name in ("N", "S")}
            else:
                state = state_of(held, given)
            readings = {name: self._reading(state, name, positions) for name in physical}
            return Part(stop, binding, held, given, readings | named, state.spill, positions)
        except NoAnswerError as fault:
            return Part(stop, binding, None, given, self._without(physical, fault.why) | named, (), positions)

    def _reading(self, state: State, name: str, positions: Mapping[str, NDArray[np.float64]]) -> Reading:
        """One quantity of a state; where positions are given, it is spread over them."""
        shape = tuple(axis.points for axis in self.grid.conditions)
        if name in AT_POSITIONS:
            reading = read_at(state, name, {each: x for each, x in positions.items() if each != COUNT})
        elif name in AT_COUNTS:
            reading = probability_at(state, positions[COUNT])
        else:
            reading = with_scale(state, name, state.reading(name))
            return spread_over(reading, state.shape, shape) if positions else reading
        return spread_over(reading, reading.value.shape, shape)

    def _held(self, binding: Binding, place: str | None, stop: Stop) -> HeldGas:
        like = None if place is None else self._origins.of(place, stop.values)
        return self.held.of(binding, self.question.dimension, like)

    def _brought(
        self,
        held: HeldGas,
        given: Mapping[str, NDArray[np.float64]],
        stop: Stop,
        values: Mapping[str, float],
        literals: Mapping[int, float],
    ) -> State:
        """The state after slow changes from the first place of origin through all others to the last one."""
        gas = self.question.gas
        first, *later = (
            self._held(self.program.bind(gas, place, values, literals), place, stop)
            for place in self.question.origins
        )
        state = first.state(**given)
        for other in later:
            state = other.brought_from(state)
        return held.brought_from(state)

    def _named(self, binding: Binding) -> dict[str, Reading]:
        """The names of the file that are asked for, as readings that are exact to the last digits."""
        readings = {}
        for name in self.names:
            if name not in QUANTITIES:
                value, dimension = binding.value(name)
                unit = unit_of_dimension(dimension)
                error = np.finfo(float).eps * abs(value)
                readings[name] = reading_of(value, error, unit, "as defined in the file")
        return readings

    def _without(self, names: tuple[str, ...], why: str) -> dict[str, Reading]:
        """Readings without a number at all points of this stop."""
        shape = tuple(axis.points for axis in self.grid.conditions)
        nothing, everywhere = np.full(shape, np.nan), np.ones(shape, dtype=bool)
        units = {name: unit_in(name, self.question.dimension or 3) for name in names}
        return {
            name: reading_of(nothing, nothing, unit, "", (Reason(why, everywhere),))
            for name, unit in units.items()
        }
