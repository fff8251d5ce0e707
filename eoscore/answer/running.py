"""A text's questions answered with the help at hand: workers, an executor, chunks of an earlier run.

Grids are answered chunk by chunk. The chunks depend on the question alone, so that the numbers are the same to the
last bit whoever answers them, and in whichever run.
"""

from __future__ import annotations

from concurrent.futures import BrokenExecutor
from dataclasses import dataclass, field, replace
from typing import TYPE_CHECKING

from eoscore.answer import asking
from eoscore.answer.chunk import chunks_of
from eoscore.answer.grid import Grid
from eoscore.answer.joining import joined
from eoscore.answer.record import FoundAnswer
from eoscore.answer.sharing import shared

if TYPE_CHECKING:
    from collections.abc import Callable, Sequence
    from concurrent.futures import Executor

    from eoscore.answer.chunk import Chunk
    from eoscore.answer.holding import HeldGases
    from eoscore.answer.journal import Journal
    from eoscore.answer.recipe import Recipe
    from eoscore.answer.record import Answer, Caution, Piece
    from eoscore.answer.workers import Crew
    from eoscore.language.program import Program

__all__ = ["Help", "Run"]


@dataclass(frozen=True)
class Help:
    """Who and what helps with grids.

    executor: answers chunks; else the crew does. journal: finished chunks are kept and looked up there.
    progress: told the points that are done, and all.
    """

    executor: Executor | None = None
    crew: Crew | None = None
    journal: Journal | None = None
    progress: Callable[[int, int], None] | None = None


@dataclass
class Run:
    """The questions of a text, answered one by one; see `Lab.answering`."""

    recipe: Recipe
    program: Program
    held: HeldGases
    help: Help = field(default_factory=Help)
    _pieces: dict[Chunk, Piece] = field(default_factory=dict)
    _done: int = 0

    def __post_init__(self) -> None:
        questions = enumerate(self.program.questions)
        grids = {
            index: question for index, question in questions if question.over and question.verb == "find"
        }
        self.chunks = {index: chunks_of(index, question) for index, question in grids.items()}
        every = [chunk for chunks in self.chunks.values() for chunk in chunks]
        self._all = sum(chunk.points for chunk in every) + len(self.program.questions) - len(self.chunks)
        if self.help.journal is not None:
            for chunk in every:
                if (piece := self.help.journal.piece(chunk)) is not None:
                    self._pieces[chunk] = piece
                    self._done += chunk.points
        self._tell(0)

    def answer(self, index: int, accuracy: float = 1e-6) -> Answer:
        """The answer to the question with this index; `accuracy` is the relative error wanted."""
        question = self.program.questions[index]
        if index not in self.chunks:
            answer = asking.answer_to(self.program, question, accuracy, self.held, self.recipe.samples)
            self._tell(1)
            return self._set(answer)
        cautions = self._answer_grid(index)
        pieces = {chunk: self._pieces.pop(chunk) for chunk in self.chunks[index]}
        piece = joined(Grid(question.over).shape, pieces)
        return self._set(asking.answer_from(question, piece, cautions, accuracy))

    def _set(self, answer: Answer) -> Answer:
        """The answer with the settings that it was given under."""
        return replace(answer, settings=self.recipe.settings) if isinstance(answer, FoundAnswer) else answer

    def _answer_grid(self, index: int) -> Sequence[Caution]:
        """Find the pieces of a grid that are missing, and its cautions."""
        crew = self.help.crew
        while self.help.executor is None and crew is not None and len(waiting := self._waiting(index)) > 1:
            try:
                return shared(crew.executor, self.recipe, index, waiting, self._keep)
            except BrokenExecutor:
                crew.replace(useful=self._waiting(index) != waiting)
        waiting = self._waiting(index)
        if self.help.executor is not None:
            return shared(self.help.executor, self.recipe, index, waiting, self._keep)
        question = self.program.questions[index]
        cautions = asking.cautions_over(self.program, question, self.held)  # first, as in every worker
        for chunk in waiting:
            piece = asking.piece_of(
                self.program, chunk.of(question), self.held, question, self.recipe.samples
            )
            self._keep(chunk, piece)
        return cautions

    def _waiting(self, index: int) -> list[Chunk]:
        return [chunk for chunk in self.chunks[index] if chunk not in self._pieces]

    def _keep(self, chunk: Chunk, piece: Piece) -> None:
        if self.help.journal is not None:
            self.help.journal.keep(chunk, piece)
        self._pieces[chunk] = piece
        self._tell(chunk.points)

    def _tell(self, points: int) -> None:
        self._done += points
        if self.help.progress is not None:
            self.help.progress(self._done, self._all)
