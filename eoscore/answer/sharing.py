"""Chunks answered elsewhere: by worker processes, or by any `concurrent.futures.Executor`.

A worker reads the text once, and keeps what it holds.
"""

from __future__ import annotations

from concurrent.futures import as_completed
from functools import lru_cache
from typing import TYPE_CHECKING

from eoscore.answer.asking import cautions_over, piece_of
from eoscore.answer.holding import HeldGases

if TYPE_CHECKING:
    from collections.abc import Callable, Sequence
    from concurrent.futures import Executor

    from eoscore.answer.chunk import Chunk
    from eoscore.answer.recipe import Recipe
    from eoscore.answer.record import Caution, Piece
    from eoscore.language.program import Program

__all__ = ["shared"]


def shared(
    executor: Executor,
    recipe: Recipe,
    index: int,
    chunks: Sequence[Chunk],
    keep: Callable[[Chunk, Piece], None],
) -> tuple[Caution, ...]:
    """Give chunks of the grid with this index to an executor, `keep` each as it comes; the grid's cautions.

    Whatever a worker or the executor raises goes through, and what has not begun is cancelled.
    """
    futures = {executor.submit(_piece, recipe, chunk): chunk for chunk in chunks}
    cautions = executor.submit(_cautions, recipe, index)
    try:
        for future in as_completed(futures):
            keep(futures[future], future.result())
        return cautions.result()
    finally:
        cautions.cancel()
        for future in futures:
            future.cancel()


@lru_cache(maxsize=1)
def _known(recipe: Recipe) -> tuple[Program, HeldGases]:
    return recipe.program(), HeldGases()


@lru_cache(maxsize=1)
def _cautions(recipe: Recipe, index: int) -> tuple[Caution, ...]:
    """The cautions of a grid, once for each process.

    The ends of the grid are asked before its chunks: the error of a measure is that of the energies asked so far.
    """
    program, held = _known(recipe)
    return cautions_over(program, program.questions[index], held)


def _piece(recipe: Recipe, chunk: Chunk) -> Piece:
    _cautions(recipe, chunk.question)
    program, held = _known(recipe)
    question = program.questions[chunk.question]
    return piece_of(program, chunk.of(question), held, question, recipe.samples)
