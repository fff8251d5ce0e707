"""`eoscore run FILE`: answer every question of a file, in order."""

from __future__ import annotations

import sys
from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING, Any, Final, TypeVar

import click

from eoscore.cli.cluster import ClusterError, is_of_cluster
from eoscore.cli.exits import ANSWERED, FAULTY, INACCURATE, internal_fault
from eoscore.cli.grid_run import grid_options, grid_run
from eoscore.cli.keeping import kept_beside
from eoscore.cli.reading import Text
from eoscore.errors import Complaint, EoscoreError, TarnError

if TYPE_CHECKING:
    from collections.abc import Callable

    from eoscore.answer.record import Answer, Report
    from eoscore.cli.keeping import Kept

__all__ = ["Asked", "answer_text", "asking", "complain_of_accuracy", "run", "sample_option"]

_F = TypeVar("_F", bound="Callable[..., Any]")


sample_option: Final = click.option(
    "--sample",
    type=click.IntRange(0, 10**6),
    default=0,
    metavar="K",
    help="Give intervals from K draws of the uncertain numbers, beside first derivatives.",
)


def asking(function: _F) -> _F:
    """The options of every verb that answers questions."""
    for option in reversed(
        (
            click.option(
                "--set",
                "settings",
                multiple=True,
                metavar="NAME=VALUE",
                help='Override a parameter: "P=2 W".',
            ),
            click.option(
                "--json", "as_json", is_flag=True, help="Write one JSON document on standard output."
            ),
            click.option(
                "--out",
                type=click.Path(path_type=Path),
                callback=_writable,
                metavar="FILE",
                help="Write grids to FILE.csv, FILE.nc or FILE.json.",
            ),
            click.option(
                "--accuracy",
                type=click.FloatRange(0.0, 1.0, min_open=True, max_open=True),
                default=1e-6,
                show_default=True,
                help="Relative error wanted of every number.",
            ),
            sample_option,
            grid_options,
        )
    ):
        function = option(function)
    return function


def _writable(_context: click.Context, _parameter: click.Parameter, target: Path | None) -> Path | None:
    if target is not None:
        from eoscore.show.saving import unwritable

        if reason := unwritable(target):
            raise click.BadParameter(reason)
    return target


@dataclass(frozen=True)
class Asked:
    """What the options of a run ask for."""

    settings: tuple[str, ...]
    as_json: bool
    out: Path | None
    accuracy: float
    sample: int
    workers: int
    cluster: str | None
    plot: Path | None


@click.command()
@click.argument("file")
@asking
def run(file: str, **options: Any) -> int:
    """Answer every question of FILE in order; - reads standard input."""
    return answer_text(Text.of(file), Asked(**options))


def answer_text(text: Text, asked: Asked) -> int:
    """Answer a text's questions, show and save the answers; the exit status."""
    with kept_beside(asked.out) as kept:
        report = _report(text, asked, kept)
        if not report.complaints:
            _save(report, asked)
    _show(report, asked)
    if report.complaints:
        return FAULTY
    return INACCURATE if complain_of_accuracy(report, asked.accuracy) else ANSWERED


def _save(report: Report, asked: Asked) -> None:
    """Write the files that were asked for."""
    written: tuple[Path, ...] = ()
    if asked.out is not None:
        from eoscore.show.saving import save

        written += save(report, asked.out)
    if asked.plot is not None:
        from eoscore.show.plotting import draw

        written += draw(report, asked.plot)
    for path in written:
        click.echo(f"wrote {path}", err=True)


def _report(text: Text, asked: Asked, kept: Kept) -> Report:
    """All answers that can be given, and complaints about the rest."""
    from eoscore.answer.record import Report

    answers: list[Answer] = []
    complaints: list[Complaint] = []
    try:
        lab = text.lab(asked.settings, asked.sample)
    except TarnError as fault:
        return Report(text.name, complaints=fault.complaints)
    if asked.plot is not None:
        from eoscore.show.plotting import require_drawable

        require_drawable(text.name, lab.program.questions)
    with grid_run(lab, asked, kept) as run:
        for index, question in enumerate(lab.program.questions):
            try:
                answers.append(run.answer(index, asked.accuracy))
            except TarnError as fault:
                complaints.extend(fault.complaints)
            except (OSError, MemoryError, EoscoreError):
                raise
            except Exception as fault:  # noqa: BLE001  one question that we fail on takes no other with it
                if asked.cluster is not None and is_of_cluster(fault):
                    raise ClusterError(asked.cluster, fault) from None
                complaints.append(Complaint.at(question.node.span, internal_fault(fault)))
    return Report(text.name, tuple(answers), tuple(complaints))


def _show(report: Report, asked: Asked) -> None:
    if report.complaints:
        from eoscore.show.complaint import complaints_text

        click.echo(complaints_text(report.complaints, computed=bool(report.answers)), err=True)
    if asked.as_json:
        from eoscore.show.document import json_text

        sys.stdout.write(json_text(report))
    elif report.answers:
        from eoscore.show.page import print_report

        if asked.settings:
            click.echo(f"set from outside: {', '.join(asked.settings)}\n")
        print_report(report, sys.stdout)


def complain_of_accuracy(report: Report, accuracy: float) -> bool:
    """Say on standard error which numbers missed the accuracy wanted; whether any did."""
    missed = False
    for answer in report.answers:
        for name, finding in getattr(answer, "found", {}).items():
            if finding.worst() > accuracy:
                missed = True
                sentence = f"line {answer.line}: {name} reached {finding.worst():.0e}, wanted {accuracy:g}"
                click.echo(f"eoscore: {sentence}", err=True)
    return missed
