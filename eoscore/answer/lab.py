"""A lab: a Tarn text read and checked, with its gases, its places and its questions."""

from __future__ import annotations

from contextlib import ExitStack, contextmanager
from dataclasses import dataclass
from functools import cached_property
from pathlib import Path
from typing import TYPE_CHECKING, Any

from eoscore.answer.recipe import Recipe
from eoscore.errors import EoscoreError

if TYPE_CHECKING:
    from collections.abc import Callable, Iterator, Sequence
    from concurrent.futures import Executor
    from os import PathLike

    from eoscore.answer.holding import HeldGases
    from eoscore.answer.record import Answer
    from eoscore.answer.running import Run
    from eoscore.language.program import Program
    from eoscore.state import HeldGas

__all__ = ["Lab", "LabGas", "LabPlace", "load", "loads"]


def load(path: str | PathLike[str], *, settings: Sequence[str] = (), samples: int = 0) -> Lab:
    """Read a Tarn file; `settings` such as `"P=2 W"` override its parameters.

    With `samples` draws of the uncertain numbers, answers carry a sampled `interval` beside their `sigma`.

    Raises
    ------
    TarnError
        Where the text or a setting is at fault, with all complaints in one.
    OSError
        Where the file cannot be read.
    """
    path = Path(path)
    return loads(path.read_bytes(), name=str(path), folder=path.parent, settings=settings, samples=samples)


def loads(
    text: str | bytes,
    *,
    name: str = "<text>",
    folder: Path | None = None,
    settings: Sequence[str] = (),
    samples: int = 0,
) -> Lab:
    """Read a Tarn text; `folder` is where `use "path.tarn"` looks, and `samples` is as for `load`.

    Raises
    ------
    TarnError
        Where the text or a setting is at fault, with all complaints in one.
    """
    content = text.encode() if isinstance(text, str) else text
    return Lab(Recipe(content, name, folder, tuple(settings), samples))


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

    def _ipython_key_completions_(self) -> list[str]:
        """What a notebook completes behind `lab["`."""
        return [*self.program.gases, *self.program.places, "uniform"]

    def answers(self, *, accuracy: float = 1e-6, **aid: Any) -> tuple[Answer, ...]:
        """The answers to the text's own questions, in order; `accuracy` is the relative error wanted.

        Grids take help as in `answering`: `workers=4`, `executor=...`, `keep="scan.part"`, `progress=...`.
        """
        with self.answering(**aid) as run:
            return tuple(run.answer(index, accuracy) for index in range(len(self.program.questions)))

    @contextmanager
    def answering(
        self,
        *,
        workers: int = 1,
        executor: Executor | None = None,
        keep: str | PathLike[str] | None = None,
        progress: Callable[[int, int], None] | None = None,
    ) -> Iterator[Run]:
        """A run, whose `answer(index, accuracy)` answers one question.

        Grids are shared among `workers` processes of this machine (a script then wants the usual
        `if __name__ == "__main__":`), or given to any `executor`; the numbers are the same to the last bit.
        Finished chunks of grids are kept in the file `keep`, where a later run finds them; the caller removes it.
        `progress` is told the points that are done, and all of them.

        Raises
        ------
        WorkersLostError
            Where worker processes died, and those that took their place.
        OSError
            Where `keep` cannot be written, or belongs to a run that is still going on.
        """
        from eoscore.answer.running import Help, Run

        with ExitStack() as stack:
            journal = crew = None
            if keep is not None:
                from eoscore.answer.journal import Journal

                journal = stack.enter_context(Journal(Path(keep), self._recipe, self.program))
            if workers > 1 and executor is None:
                from eoscore.answer.workers import Crew

                crew = stack.enter_context(Crew(workers))
            yield Run(self._recipe, self.program, self.held, Help(executor, crew, journal, progress))

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
