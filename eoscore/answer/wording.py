"""What a question says, for the answer that repeats it."""

from __future__ import annotations

from typing import TYPE_CHECKING

from eoscore.answer.record import Given
from eoscore.answer.unit import unit_of_dimension

if TYPE_CHECKING:
    from eoscore.language.question import Question

__all__ = ["given_of", "words_of"]


def words_of(question: Question) -> str:
    """The question as it stands in the file, on one line."""
    lines = (line.partition("#")[0] for line in question.node.span.text.splitlines())
    return " ".join(" ".join(lines).split())


def given_of(question: Question) -> dict[str, Given]:
    """The conditions and the new values of parameters, in SI."""
    every = {**question.given, **question.values}
    return {name: Given(each.value, unit_of_dimension(each.dimension)) for name, each in every.items()}
