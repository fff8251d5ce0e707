"""`derive`: formulas from the symbolic room, each a mapping as the JSON document wants it."""

from __future__ import annotations

from typing import TYPE_CHECKING

from eoscore import symbolic
from eoscore.answer.record import DerivedAnswer
from eoscore.answer.wording import given_of, words_of
from eoscore.errors import Complaint, TarnError

if TYPE_CHECKING:
    from eoscore.answer.holding import HeldGases
    from eoscore.language.program import Program
    from eoscore.language.question import Question

__all__ = ["derived"]


def derived(program: Program, question: Question, held: HeldGases) -> DerivedAnswer:
    """The formulas that a `derive` asks for.

    Raises
    ------
    TarnError
        While the symbolic room cannot derive.
    """
    derive = getattr(symbolic, "derive", None)
    if derive is None:  # remove once eoscore.symbolic offers it
        message = "`derive` is part of Tarn, and this version of eoscore cannot answer it yet"
        raise TarnError([Complaint.at(question.node.span, message, "ask for numbers with `find`")])
    conditions = program.conditions(question)
    binding = program.bind(question.gas, question.place, conditions.values)
    names = tuple(dict.fromkeys(ident.name for ident in question.quantities))
    formulas = derive(binding, held.of(binding, question.dimension), names, conditions.given)
    words, given = words_of(question), given_of(question)
    return DerivedAnswer(question.line, words, question.gas, question.place, given, formulas)
