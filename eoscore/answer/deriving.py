"""`derive`: formulas from the symbolic room, each a mapping as the JSON document wants it."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from eoscore.answer.record import DerivedAnswer
from eoscore.answer.wording import given_of, words_of
from eoscore.errors import NoAnswerError
from eoscore.symbolic import derive

if TYPE_CHECKING:
    from eoscore.answer.holding import HeldGases
    from eoscore.language.program import Program
    from eoscore.language.question import Question

__all__ = ["derived"]


def derived(program: Program, question: Question, held: HeldGases) -> DerivedAnswer:
    """The formulas that a `derive` asks for; words where the place holds nothing."""
    conditions = program.conditions(question)
    binding = program.bind(question.gas, question.place, conditions.values)
    names = tuple(dict.fromkeys(ident.name for ident in question.quantities))
    formulas: dict[str, dict[str, Any]]
    try:
        formulas = derive(binding, held.of(binding, question.dimension), names, conditions.given)
    except NoAnswerError as fault:
        empty: dict[str, Any] = {
            "sympy": None,
            "latex": None,
            "text": None,
            "closed": False,
            "where": {},
            "value": None,
        }
        formulas = {name: empty | {"why": fault.why} for name in names}
    words, given = words_of(question), given_of(question)
    return DerivedAnswer(question.line, words, question.gas, question.place, given, formulas)
