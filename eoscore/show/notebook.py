"""Notebooks: rich displays of what a lab hands out, and the cell magic `%%tarn`. Wants the extra `notebook`."""

from __future__ import annotations

import sys
from dataclasses import dataclass
from importlib.util import find_spec
from pathlib import Path
from typing import TYPE_CHECKING, Any

from eoscore.answer.lab import LabGas, LabPlace, loads
from eoscore.answer.record import DerivedAnswer, FoundAnswer, Report
from eoscore.errors import NoAnswerError, TarnError
from eoscore.show.complaint import complaints_text
from eoscore.show.notebook_names import install_completion
from eoscore.show.report.answers import answer_sections
from eoscore.show.report.markup import Markup, element, table

if TYPE_CHECKING:
    from collections.abc import Callable, Iterator

    from eoscore.answer.lab import Lab
    from eoscore.answer.record import Answer
    from eoscore.show.report.picture import Gallery

__all__ = ["Answers", "install"]

_STYLE = ".heard { display: none } .bar { display: inline-block; height: .8em; background: #0072b2 }"
_NAME = "<cell>"


@dataclass(frozen=True)
class Answers:
    """The lab of a cell and the answers to its questions; indexed like the tuple `answers`."""

    lab: Lab
    answers: tuple[Answer, ...]

    def __getitem__(self, index: int) -> Answer:
        return self.answers[index]

    def __len__(self) -> int:
        return len(self.answers)

    def __iter__(self) -> Iterator[Answer]:
        return iter(self.answers)

    def __repr__(self) -> str:
        from io import StringIO

        from eoscore.show.page import print_report

        stream = StringIO()
        print_report(Report(_NAME, self.answers), stream)
        return stream.getvalue().rstrip("\n") or f"no question was asked; {self.lab.contents()}"

    def _repr_html_(self) -> str:
        return (
            _html(self.answers) if self.answers else f"<p>No question was asked; {self.lab.contents()}.</p>"
        )


def install(shell: Any) -> None:
    """Register the displays, the magic and the completion of names with an IPython shell."""

    def tarn(line: str, cell: str) -> Answers | None:
        """Answer the questions of a cell of Tarn; `%%tarn NAME` also keeps its lab under NAME."""
        return _answered(shell, line.strip(), cell)

    shell.register_magic_function(tarn, magic_kind="cell")
    install_completion(shell)
    formatters = shell.display_formatter.formatters
    shown: dict[type, Callable[[Any], str]] = {
        FoundAnswer: lambda answer: _html((answer,)),
        DerivedAnswer: lambda answer: _html((answer,)),
        LabGas: _gas_html,
        LabPlace: _place_html,
    }
    for kind, show in shown.items():
        formatters["text/html"].for_type(kind, show)
    formatters["text/latex"].for_type(DerivedAnswer, _latex)


def _answered(shell: Any, name: str, cell: str) -> Answers | None:
    try:
        lab = loads(cell, name=_NAME, folder=Path.cwd())
        answers = Answers(lab, lab.answers())
    except TarnError as fault:
        sys.stderr.write(complaints_text(fault.complaints) + "\n")
        return None
    if name:
        shell.push({name: lab})
    return answers


def _html(answers: tuple[Answer, ...]) -> str:
    sections = answer_sections(Report(_NAME, answers), _gallery(), linked=False)
    return element("div", element("style", Markup(_STYLE)), *sections)


def _gallery() -> Gallery | None:
    """Where pictures are drawn; None without matplotlib."""
    if find_spec("matplotlib") is None:
        return None
    from eoscore.show.report.picture import Gallery

    return Gallery()


def _latex(answer: DerivedAnswer) -> str:
    lines = [formula["latex"] for formula in answer.formulas.values() if formula.get("latex")]
    return "\n".join(f"$$\\displaystyle {line}$$" for line in lines)


def _gas_html(gas: LabGas) -> str:
    """A gas: what its particles are."""
    try:
        facts = gas.lab.program.bind(gas.name, None).gas
    except (TarnError, NoAnswerError) as fault:
        return element("p", f"{gas.name}: {fault}")
    rows = [("statistics", facts.statistics), ("dispersion", facts.dispersion)]
    rows += [("degeneracy", f"{facts.degeneracy:g}")] if facts.degeneracy != 1.0 else []
    rows += [("mass", f"{facts.mass:.6g} kg")] if facts.mass is not None else []
    rows += [("a_s", f"{facts.a_s:.6g} m")] if facts.a_s is not None else []
    return element("div", element("b", f"gas {gas.name}"), table(gas.name, ("what", "value"), rows))


def _place_html(place: LabPlace) -> str:
    """A place as it is declared."""
    from eoscore.language.writer import write

    declared = place.lab.program.world.places.get(place.name)
    if declared is None or declared.node is None:
        return element("p", f"{place.name}: the unbounded place, asked with a density n")
    return element("pre", write(declared.node))
