"""Quick looks at grids over one or two names: lines with their uncertainty, maps with contour labels.

Nothing is told by colour alone: lines differ in dash and carry their labels, maps grow lighter with the value
(cividis: Nuñez, Anderton and Renslow, PLoS ONE 13, e0199239 (2018)), so that grey paper shows the same.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

from eoscore.errors import EoscoreError
from eoscore.show.dataset import MissingExtraError
from eoscore.show.saving import appearing, no_place

if TYPE_CHECKING:
    from collections.abc import Iterable
    from pathlib import Path

    from eoscore.answer.record import FoundAnswer, Report
    from eoscore.language.question import Question

__all__ = ["NothingToDrawError", "draw", "require_drawable", "undrawable"]

FORMATS = (".png", ".svg", ".pdf")


class NothingToDrawError(EoscoreError, ValueError):
    """No question has a grid over one or two names."""

    def __init__(self, file: str) -> None:
        self.file = file
        super().__init__(
            f"nothing to draw: no question of {file} has a grid over one or two names; `over NAME = even(a, b, 50)` "
            "makes one"
        )


def undrawable(target: Path) -> str | None:
    """Why nothing can be drawn there, found before anything is computed; None where it can."""
    if target.suffix.lower() not in FORMATS:
        return f"{target} ends in {target.suffix or 'nothing'}; the formats are {', '.join(FORMATS)}"
    return no_place(target)


def require_drawable(file: str, questions: Iterable[Question]) -> None:
    """Look at the questions of a file before anything is computed.

    Raises
    ------
    NothingToDrawError
        Where none can be drawn.
    """
    if not any(question.verb == "find" and 1 <= len(question.over) <= 2 for question in questions):
        raise NothingToDrawError(file)


def draw(report: Report, target: Path) -> tuple[Path, ...]:
    """Draw every question over one or two names; the paths written, named as by `save`.

    Raises
    ------
    NothingToDrawError
        Where there is no such question.
    MissingExtraError
        Where matplotlib is not installed.
    """
    answers = _drawn(report)
    if not answers:
        raise NothingToDrawError(report.file)
    try:
        from eoscore.show.figure import write_figure
    except ImportError:
        raise MissingExtraError("matplotlib", "plot") from None
    names = [
        target if len(answers) == 1 else target.with_stem(f"{target.stem}-line{answer.line}")
        for answer in answers
    ]
    for answer, name in zip(answers, names, strict=True):
        with appearing(name) as path:
            write_figure(answer, path, target.suffix.lower().removeprefix("."))
    return tuple(names)


def _drawn(report: Report) -> list[FoundAnswer]:
    from eoscore.answer.record import FoundAnswer

    return [a for a in report.answers if isinstance(a, FoundAnswer) and 1 <= len(a.over) <= 2]
