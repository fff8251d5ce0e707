"""What the pictures of a page are about: each gas in each place that is asked for, with a number and a temperature."""

from __future__ import annotations

from dataclasses import dataclass, field
from functools import cached_property
from typing import TYPE_CHECKING

import numpy as np

from eoscore.answer.record import FoundAnswer
from eoscore.errors import EoscoreError, NoAnswerError
from eoscore.place import TrapPlace
from eoscore.show.prefix import quantity

if TYPE_CHECKING:
    from collections.abc import Iterator, Mapping, Sequence

    from eoscore.answer.lab import Lab
    from eoscore.answer.record import Answer
    from eoscore.language.binding import Binding
    from eoscore.language.question import Question
    from eoscore.state import HeldGas, State

__all__ = ["Subject", "subjects"]


@dataclass
class Subject:
    """A gas held in a place, or the reason why it is not; SI numbers of the first questions that give them.

    `at`: the point of a grid, where it is held there and not with the values of the file.
    A gas that is brought there from elsewhere has the temperature that was found.
    """

    gas: str
    place: str | None
    held: HeldGas | None
    why: str = ""
    given: dict[str, float] = field(default_factory=dict)
    at: str = ""

    @property
    def name(self) -> str:
        """`strontium in crossed`."""
        name = self.gas if self.place is None else f"{self.gas} in {self.place}"
        return f"{name} at {self.at}" if self.at else name

    @property
    def number(self) -> str | None:
        """The name of the number that is given: `N`, or the density `n`."""
        return next((name for name in ("N", "n") if name in self.given), None)

    @property
    def trap(self) -> TrapPlace | None:
        """The place where it has a potential."""
        place = None if self.held is None else self.held.place
        return place if isinstance(place, TrapPlace) else None

    def read(self, name: str, **given: float) -> float | None:
        """One number of the held gas; None where it has no answer."""
        if self.held is None:
            return None
        try:
            value = np.asarray(self.held.find((name,), given)[name].value, dtype=float)
        except EoscoreError:
            return None
        return float(value) if value.ndim == 0 and np.isfinite(value) else None

    @cached_property
    def critical(self) -> float | None:
        """T_c in K of the number that is given."""
        return None if self.number is None else self.read("T_c", **{self.number: self.given[self.number]})

    @cached_property
    def temperature(self) -> float | None:
        """The temperature in play in K: the one given, else T_c."""
        return self.given.get("T") or self.critical

    @cached_property
    def state(self) -> State | None:
        """The state whose cloud is drawn: of the number at the temperature in play."""
        if self.held is None or self.number is None or self.temperature is None:
            return None
        try:
            return self.held.state(**{self.number: self.given[self.number], "T": self.temperature})
        except NoAnswerError:
            return None


def subjects(lab: Lab, answers: Sequence[Answer]) -> Iterator[Subject]:
    """Every pair of a gas and a place that a question asks about, in their order; `answers` are those of the lab."""
    groups: dict[tuple[str, str | None], list[tuple[Question, Answer]]] = {}
    for question, answer in zip(lab.program.questions, answers, strict=True):
        groups.setdefault((question.gas, question.place), []).append((question, answer))
    for (gas, place), asked in groups.items():
        yield _subject(lab, gas, place, asked)


def _subject(lab: Lab, gas: str, place: str | None, asked: list[tuple[Question, Answer]]) -> Subject:
    held, at = _first_held(lab, _bindings(lab, gas, place, asked), asked[0][0].dimension)
    if isinstance(held, str):
        return Subject(gas, place, None, held)
    given: dict[str, float] = {}
    for question, answer in asked:
        told = dict(lab.program.conditions(question).given)
        if question.origins:
            told = _arrived(told, answer)
        for axis in question.over:
            if axis.thermodynamic:
                told.setdefault(axis.name, float(axis.values[axis.points // 2]))
        for name, value in told.items():
            given.setdefault(name, value)
    return Subject(gas, place, held, given=given, at=at)


def _first_held(
    lab: Lab, bindings: Iterator[tuple[Binding, str]], dimension: int | None
) -> tuple[HeldGas | str, str]:
    """The first that is held, with its words; where none is, why the first is not."""
    why = ""
    for binding, words in bindings:
        try:
            return lab.held.of(binding, dimension), words
        except NoAnswerError as fault:
            why = why or fault.why
    return why, ""


def _bindings(
    lab: Lab, gas: str, place: str | None, asked: list[tuple[Question, Answer]]
) -> Iterator[tuple[Binding, str]]:
    """What the first question asks about; where that holds nothing, the ends of the grids over the trap, in words."""
    yield lab.program.bind(gas, place, lab.program.conditions(asked[0][0]).values), ""
    for question, answer in asked:
        axes = [axis for axis in question.over if not axis.thermodynamic]
        if not axes or not isinstance(answer, FoundAnswer):
            continue
        for end in (-1, 0):
            moved = {axis.name: float(axis.values[end]) for axis in axes}
            words = (f"{name} = {quantity(value, answer.over_units[name])}" for name, value in moved.items())
            values = {**lab.program.conditions(question).values, **moved}
            yield lab.program.bind(gas, place, values), ", ".join(words)


def _arrived(given: Mapping[str, float], answer: Answer) -> dict[str, float]:
    """The number, which a slow transfer keeps, and the temperature where it was found; nothing on a grid."""
    found = answer.found.get("T") if isinstance(answer, FoundAnswer) and not answer.over else None
    if found is None or "N" not in given or not np.isfinite(found.value).all():
        return {}
    return {"N": given["N"], "T": float(found.value)}
