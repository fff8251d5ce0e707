"""From a question to its answer."""

from __future__ import annotations

from dataclasses import replace
from math import inf
from typing import TYPE_CHECKING

from eoscore.answer.assembly import assembled
from eoscore.answer.bending import bending
from eoscore.answer.cautions import cautions_for
from eoscore.answer.chain import Chain
from eoscore.answer.holding import HeldGases
from eoscore.answer.record import Caution, FoundAnswer
from eoscore.answer.scene import Scene
from eoscore.answer.uncertainty import with_uncertainty
from eoscore.answer.unit import unit_of_dimension
from eoscore.answer.wording import given_of, words_of

if TYPE_CHECKING:
    from collections.abc import Iterable, Mapping

    from eoscore.answer.chain import Part
    from eoscore.answer.record import Answer, Finding
    from eoscore.language.program import Program
    from eoscore.language.question import Question

__all__ = ["answer_to"]


def answer_to(
    program: Program, question: Question, accuracy: float = 1e-6, held: HeldGases | None = None
) -> Answer:
    """The answer to one question; where there is no number, words. `held` shares held gases among questions."""
    held = held or HeldGases()
    if question.verb == "derive":
        from eoscore.answer.deriving import derived

        return derived(program, question, held)
    chain = Chain(program, question, held)
    parts = chain.parts()
    findings = {name: assembled(chain.grid, [part.readings[name] for part in parts]) for name in chain.names}
    findings = with_uncertainty(chain, parts, _with_leak(findings, parts))
    return FoundAnswer(
        line=question.line,
        question=words_of(question),
        gas=question.gas,
        place=question.place,
        origins=question.origins,
        given=given_of(question),
        over={axis.name: axis.values for axis in question.over},
        over_units={axis.name: unit_of_dimension(axis.dimension) for axis in question.over},
        found=findings,
        cautions=_cautions(parts, [*bending(chain, findings), *_inaccurate(findings.items(), accuracy)]),
    )


def _with_leak(findings: Mapping[str, Finding], parts: list[Part]) -> dict[str, Finding]:
    """The depth with the words that tell where and which way the trap leaks, at the first stop that holds."""
    held = next((part.held for part in parts if part.held is not None), None)
    place = None if held is None else held.place
    if "depth" not in findings or place is None or place.top == inf:
        return dict(findings)
    return {**findings, "depth": replace(findings["depth"], note=f"leaks {place.escape_words}")}


def _cautions(parts: list[Part], others: Iterable[Caution]) -> tuple[Caution, ...]:
    """Each caution once: the first and the last stop of a grid speak for all."""
    found: dict[str, Caution] = {caution.code: caution for caution in others}
    for words in (words for part in parts for words in part.spill):
        found.setdefault("spill", Caution("spill", f"{words}."))
    for part in [parts[0], parts[-1]] if len(parts) > 1 else parts:
        if part.held is not None:
            for caution in cautions_for(Scene(part.binding, part.held, part.given, part.readings)):
                found.setdefault(caution.code, caution)
    return tuple(found.values())


def _inaccurate(findings: Iterable[tuple[str, Finding]], accuracy: float) -> Iterable[Caution]:
    missed = [f"{name} ({finding.worst():.0e})" for name, finding in findings if finding.worst() > accuracy]
    if missed:
        text = f"the relative error wanted, {accuracy:g}, was not reached by {', '.join(missed)}."
        yield Caution("accuracy", text)
