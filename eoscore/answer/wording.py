"""What a question says, for the answer that repeats it, and relative changes in words."""

from __future__ import annotations

from typing import TYPE_CHECKING

from eoscore.answer.record import Given
from eoscore.answer.unit import unit_of_dimension

if TYPE_CHECKING:
    from eoscore.language.question import Question

__all__ = ["given_of", "percent", "words_of"]


def words_of(question: Question) -> str:
    """The question as it stands in the file, on one line."""
    lines = (line.partition("#")[0] for line in question.node.span.text.splitlines())
    return " ".join(" ".join(lines).split())


def given_of(question: Question) -> dict[str, Given]:
    """The conditions and the new values of parameters, in SI."""
    every = {**question.given, **question.values}
    return {name: Given(each.value, unit_of_dimension(each.dimension)) for name, each in every.items()}


def percent(share: float) -> str:
    """A relative change such as `-1.3 %` or `+240 %`: two digits, and no power of ten where it can be read."""
    digits = f"{100.0 * share:+.2g}"
    return f"{f'{100.0 * share:+.0f}' if 'e+0' in digits else digits} %"
