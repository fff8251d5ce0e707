"""A lab: a Tarn text read and checked, with its gases, its places and its questions."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from pathlib import Path
from typing import TYPE_CHECKING

from eoscore.answer.recipe import Recipe
from eoscore.errors import EoscoreError

if TYPE_CHECKING:
    from collections.abc import Sequence
    from concurrent.futures import Executor
    from os import PathLike

    from eoscore.answer.holding import HeldGases
    from eoscore.answer.record import Answer
    from eoscore.language.program import Program
    from eoscore.state import HeldGas

__all__ = ["Lab", "LabGas", "LabPlace", "load", "loads"]


def load(path: str | PathLike[str], *, settings: Sequence[str] = ()) -> Lab:
    """Read a Tarn file; `settings` such as `"P=2 W"` override its parameters.

    Raises
    ------
    TarnError
        Where the text or a setting is at fault, with all complaints in one.
    OSError
        Where the file cannot be read.
    """
    path = Path(path)
    return loads(path.read_bytes(), name=str(path), folder=path.parent, settings=settings)


def loads(
    text: str | bytes, *, name: str = "<text>", folder: Path | None = None, settings: Sequence[str] = ()
) -> Lab:
    """Read a Tarn text; `folder` is where `use "path.tarn"` looks.

    Raises
    ------
    TarnError
        Where the text or a setting is at fault, with all complaints in one.
    """
    content = text.encode() if isinstance(text, str) else text
    return Lab(Recipe(content, name, folder, tuple(settings)))


class UnknownNameError(EoscoreError, KeyError):
    """A lab has no gas or place of this name; the names it has are listed."""

    def __init__(self, name: str, known: Sequence[str]) -> None:
        self.name, self.known = name, tuple(known)
        super().__init__(f"there is no gas or place {name!r}; known are {', '.join(known)}")

    def __str__(self) -> str:
        return str(self.args[0])


@dataclass(frozen=True)
class LabPlace:
    """A place of a lab, to hold a gas in."""

    lab: Lab
    name: str


@dataclass(frozen=True)
class LabGas:
    """A gas of a lab."""

    lab: Lab
    name: str

    def held_in(
        self, place: LabPlace | None = None, *, dimension: int | None = None, **values: float
    ) -> HeldGas:
        """The gas in a place, which is left out where the gas holds itself; `values` are SI parameters.

        Raises
        ------
        NoAnswerError
            Where the place holds nothing, or is open, in words.
        """
        name = None if place is None else place.name
        return self.lab.held.of(self.lab.program.bind(self.name, name, values), dimension)


class Lab:
    """A Tarn text, read and checked: `lab["strontium"].held_in(lab["crossed"])`, `lab.answers()`."""

    def __init__(self, recipe: Recipe) -> None:
        self._recipe = recipe
        self.program: Program = recipe.program()

    @cached_property
    def held(self) -> HeldGases:
        """The gases that are held already."""
        from eoscore.answer.holding import HeldGases

        return HeldGases()

    def __getitem__(self, name: str) -> LabGas | LabPlace:
        """The gas or the place of this name; `uniform` is always there."""
        if name in self.program.gases:
            return LabGas(self, name)
        if name in self.program.places or name == "uniform":
            return LabPlace(self, name)
        raise UnknownNameError(name, [*self.program.gases, *self.program.places, "uniform"])

    def answers(
        self, *, accuracy: float = 1e-6, workers: int = 1, executor: Executor | None = None
    ) -> tuple[Answer, ...]:
        """The answers to the text's own questions, in order; `accuracy` is the relative error wanted.

        Grids are shared among `workers` processes of this machine, or given to any `executor`.
        """
        count = len(self.program.questions)
        return tuple(
            self.answer(index, accuracy=accuracy, workers=workers, executor=executor)
            for index in range(count)
        )

    def answer(
        self, index: int, *, accuracy: float = 1e-6, workers: int = 1, executor: Executor | None = None
    ) -> Answer:
        """The answer to the question with this index, as in `answers`."""
        question = self.program.questions[index]
        if executor is not None:
            return self._shared(index, accuracy, executor, max(workers, 2))
        if workers > 1 and question.over:
            from concurrent.futures import ProcessPoolExecutor

            with ProcessPoolExecutor(workers) as processes:
                return self._shared(index, accuracy, processes, workers)
        from eoscore.answer.asking import answer_to

        return answer_to(self.program, question, accuracy, self.held)

    def _shared(self, index: int, accuracy: float, executor: Executor, workers: int) -> Answer:
        from eoscore.answer.sharing import shared_answer

        return shared_answer(self._recipe, self.program, index, accuracy, executor, workers)

    def contents(self) -> str:
        """How many gases, places and questions there are, in words."""
        counts = (
            (len(self.program.gases), "gas", "gases"),
            (len(self.program.places), "place", "places"),
            (len(self.program.questions), "question", "questions"),
        )
        return ", ".join(f"{n} {one if n == 1 else many}" for n, one, many in counts)

    def __repr__(self) -> str:
        return f"Lab({self.contents()})"
