"""A grid shared among workers: cut along its longest axis, answered piece by piece, joined again.

Any `concurrent.futures.Executor` will do. A worker reads the text once and keeps it.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import lru_cache
from itertools import pairwise
from typing import TYPE_CHECKING

import numpy as np

from eoscore.answer.asking import answer_to
from eoscore.answer.record import Finding, FoundAnswer, Reason
from eoscore.errors import EoscoreError

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence
    from concurrent.futures import Executor

    from numpy.typing import NDArray

    from eoscore.answer.recipe import Recipe
    from eoscore.answer.record import Answer
    from eoscore.language.program import Program
    from eoscore.language.question import Axis, Question

__all__ = ["joined", "shared_answer"]

_PIECES = 4  # per worker, so that a slow piece does not leave the others idle


@dataclass(frozen=True)
class Piece:
    """Points `start` to `stop` along one axis of a question."""

    question: int
    axis: int
    start: int
    stop: int


def shared_answer(
    recipe: Recipe, program: Program, index: int, accuracy: float, executor: Executor, workers: int
) -> Answer:
    """The answer to the question with this index, its grid shared out; questions without a grid stay here."""
    question = program.questions[index]
    sizes = [axis.points for axis in question.over]
    if not sizes or max(sizes) < 2 * workers:
        return answer_to(program, question, accuracy)
    axis = sizes.index(max(sizes))
    edges = np.linspace(0, sizes[axis], min(sizes[axis], _PIECES * workers) + 1).astype(int).tolist()
    pieces = [Piece(index, axis, a, b) for a, b in pairwise(edges)]
    waiting = [executor.submit(_answer_piece, recipe, piece, accuracy) for piece in pieces]
    return joined([future.result() for future in waiting], axis)


@lru_cache(maxsize=1)
def _program(recipe: Recipe) -> Program:
    return recipe.program()


def _answer_piece(recipe: Recipe, piece: Piece, accuracy: float) -> FoundAnswer:
    program = _program(recipe)
    answer = answer_to(program, _cut(program.questions[piece.question], piece), accuracy)
    if not isinstance(answer, FoundAnswer):
        raise EoscoreError("only the grid of a `find` is shared among workers")
    return answer


def _cut(question: Question, piece: Piece) -> Question:
    axes = list(question.over)
    values = tuple(axes[piece.axis].values[piece.start : piece.stop].tolist())
    cut: Axis = replace(axes[piece.axis], kind="list", ends=values, points=len(values))
    axes[piece.axis] = cut
    return replace(question, over=tuple(axes))


def joined(answers: Sequence[FoundAnswer], axis: int) -> FoundAnswer:
    """Pieces of one answer, in order along an axis, as the whole answer."""
    first = answers[0]
    name = list(first.over)[axis]
    over = dict(first.over) | {name: np.concatenate([answer.over[name] for answer in answers])}
    starts = np.cumsum([0] + [answer.over[name].size for answer in answers[:-1]]).tolist()
    found = {
        quantity: _joined_finding([answer.found[quantity] for answer in answers], starts, axis)
        for quantity in first.found
    }
    cautions = {caution.code: caution for answer in reversed(answers) for caution in answer.cautions}
    return replace(first, over=over, found=found, cautions=tuple(cautions.values()))


def _joined_finding(findings: Sequence[Finding], starts: Sequence[int], axis: int) -> Finding:
    labels = dict.fromkeys(label for finding in findings for label in finding.budget)
    sigmas = [_or_nothing(finding.sigma, finding) for finding in findings]
    return replace(
        findings[0],
        value=np.concatenate([finding.value for finding in findings], axis),
        error=np.concatenate([finding.error for finding in findings], axis),
        sigma=None if all(f.sigma is None for f in findings) else np.concatenate(sigmas, axis),
        route="; ".join(dict.fromkeys(finding.route for finding in findings)),
        reasons=tuple(_joined_reasons(findings, starts, axis)),
        budget={
            label: np.concatenate([_or_nothing(f.budget.get(label), f) for f in findings], axis)
            for label in labels
        },
    )


def _or_nothing(array: NDArray[np.float64] | None, finding: Finding) -> NDArray[np.float64]:
    return np.full(finding.value.shape, np.nan) if array is None else array


def _joined_reasons(findings: Sequence[Finding], starts: Sequence[int], axis: int) -> Iterator[Reason]:
    points: dict[str, list[tuple[int, ...]]] = {}
    for finding, start in zip(findings, starts, strict=True):
        for reason in finding.reasons:
            moved = ((*point[:axis], point[axis] + start, *point[axis + 1 :]) for point in reason.points)
            points.setdefault(reason.text, []).extend(moved)
    for text, where in points.items():
        yield Reason(text, tuple(sorted(where)))
