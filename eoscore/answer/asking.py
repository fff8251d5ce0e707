"""From a question to its answer."""

from __future__ import annotations

from dataclasses import replace
from itertools import islice
from math import inf
from typing import TYPE_CHECKING

from eoscore.answer.assembly import assembled
from eoscore.answer.bending import bending
from eoscore.answer.chain import Chain
from eoscore.answer.grid import Grid
from eoscore.answer.holding import HeldGases
from eoscore.answer.looking import cautions_at, inaccurate, thinned
from eoscore.answer.record import Caution, FoundAnswer, Piece
from eoscore.answer.sampling import with_intervals
from eoscore.answer.uncertainty import with_uncertainty
from eoscore.answer.unit import unit_of_dimension
from eoscore.answer.wording import given_of, words_of

if TYPE_CHECKING:
    from collections.abc import Iterable, Mapping, Sequence

    from eoscore.answer.chain import Part
    from eoscore.answer.record import Answer, Finding
    from eoscore.language.program import Program
    from eoscore.language.question import Question

_NEAR = 100  # stops from an end of a grid among which cautions look for one that holds

__all__ = ["answer_from", "answer_to", "cautions_over", "piece_of"]


def answer_to(
    program: Program,
    question: Question,
    accuracy: float = 1e-6,
    held: HeldGases | None = None,
    samples: int = 0,
) -> Answer:
    """The answer to one question; where there is no number, words.

    `held` shares held gases among questions; `samples` draws of the uncertain literals give sampled intervals.
    """
    held = held or HeldGases()
    if question.verb == "derive":
        from eoscore.answer.deriving import derived

        return derived(program, question, held)
    if question.over:
        piece = piece_of(program, question, held, samples=samples)
        return answer_from(question, piece, cautions_over(program, question, held), accuracy)
    chain = Chain(program, question, held)
    parts = chain.parts()
    return answer_from(question, _piece(chain, parts, samples), cautions_at(parts), accuracy)


def piece_of(
    program: Program, question: Question, held: HeldGases, whole: Question | None = None, samples: int = 0
) -> Piece:
    """What is found over a grid, or over the chunk `question` of the grid of `whole`."""
    chain = Chain(program, question, held, whole)
    return _piece(chain, chain.parts(), samples)


def cautions_over(program: Program, question: Question, held: HeldGases) -> tuple[Caution, ...]:
    """The cautions of a grid: the first and the last stop that hold speak for all, with some of their states."""
    ways = (False, True) if Grid(question.over).parameters else (False,)
    ends = (_first_held(program, question, held, backwards=way) for way in ways)
    return cautions_at([part for end in ends for part in end])


def _first_held(program: Program, question: Question, held: HeldGases, *, backwards: bool) -> list[Part]:
    """The part of the first stop that holds; none where those near the end hold nothing."""
    for stop in islice(thinned(question, backwards=backwards), _NEAR):
        parts = Chain(program, stop, held, question).parts()
        if any(part.held is not None for part in parts):
            return parts
    return []


def answer_from(
    question: Question, piece: Piece, cautions: Iterable[Caution], accuracy: float
) -> FoundAnswer:
    """The record of a `find` of which everything is known; each caution once."""
    every = [*piece.cautions, *inaccurate(piece.found.items(), accuracy), *cautions]
    return FoundAnswer(
        line=question.line,
        question=words_of(question),
        gas=question.gas,
        place=question.place,
        origins=question.origins,
        given=given_of(question),
        over={axis.name: axis.values for axis in question.over},
        over_units={axis.name: unit_of_dimension(axis.dimension) for axis in question.over},
        found=piece.found,
        cautions=tuple({caution.code: caution for caution in reversed(every)}.values())[::-1],
        file=question.node.span.source.name,
        text=question.node.span.source.text,
    )


def _piece(chain: Chain, parts: Sequence[Part], samples: int) -> Piece:
    findings = {name: assembled(chain.grid, [part.readings[name] for part in parts]) for name in chain.names}
    findings = with_uncertainty(chain, parts, _with_leak(findings, parts))
    findings = with_intervals(chain, findings, samples)
    spills = (Caution("spill", f"{words}.") for part in parts for words in part.spill)
    return Piece(findings, (*bending(chain, findings), *spills))


def _with_leak(findings: Mapping[str, Finding], parts: Sequence[Part]) -> dict[str, Finding]:
    """The depth with the words that tell where and which way the trap leaks, at the first stop that holds."""
    held = next((part.held for part in parts if part.held is not None), None)
    place = None if held is None else held.place
    if "depth" not in findings or place is None or place.top == inf:
        return dict(findings)
    return {**findings, "depth": replace(findings["depth"], note=f"leaks {place.escape_words}")}
