"""`eoscore report FILE --out FILE.html`: the answers of a file as one page."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING

import click

from eoscore.cli.exits import ANSWERED, FAULTY, INACCURATE
from eoscore.cli.reading import Text
from eoscore.cli.run import complain_of_accuracy, sample_option
from eoscore.errors import TarnError

if TYPE_CHECKING:
    from eoscore.answer.record import Report

__all__ = ["report"]


@click.command()
@click.argument("file")
@click.option(
    "--out", type=click.Path(path_type=Path), required=True, metavar="FILE.html", help="The page to write."
)
@click.option("--set", "settings", multiple=True, metavar="NAME=VALUE", help='Override a parameter: "P=2 W".')
@click.option(
    "--accuracy",
    type=click.FloatRange(0.0, 1.0, min_open=True, max_open=True),
    default=1e-6,
    show_default=True,
    help="Relative error wanted of every number.",
)
@sample_option
@click.option(
    "--workers", type=click.IntRange(1), default=1, show_default=True, help="Processes that share a grid."
)
def report(
    file: str, out: Path, settings: tuple[str, ...], accuracy: float, sample: int, workers: int
) -> int:
    """Answer every question of FILE on one self-contained page: tables, trap, curves, formulas, source.

    The page asks the network for nothing and prints well. Pictures want the extra `plot`.
    """
    if reason := _unwritable(out, file):
        raise click.BadParameter(reason, param_hint="--out")
    text = Text.of(file)
    try:
        answers, page = _page(text, settings, accuracy, sample, workers)
    except TarnError as fault:
        from eoscore.show.complaint import complaints_text

        click.echo(complaints_text(fault.complaints), err=True)
        return FAULTY
    _write(out, page)
    click.echo(f"wrote {out}")
    return INACCURATE if complain_of_accuracy(answers, accuracy) else ANSWERED


def _unwritable(out: Path, file: str) -> str | None:
    """Why no page can be written there, found before anything is computed; None where it can."""
    from eoscore.show.saving import no_place

    if reason := no_place(out):
        return f"{reason}."
    if file != "-" and out.exists() and Path(file).exists() and out.samefile(file):
        return f"{out} is the file that the page is about; give the page another name."
    return None


def _write(out: Path, page: str) -> None:
    """The page, whole or not at all; a pipe or a device is written to as it is."""
    if out.exists() and not out.is_file():
        out.write_text(page, encoding="utf-8")
        return
    from eoscore.show.saving import appearing

    with appearing(out) as path:
        path.write_text(page, encoding="utf-8")


def _page(
    text: Text, settings: tuple[str, ...], accuracy: float, sample: int, workers: int
) -> tuple[Report, str]:
    _require_matplotlib()
    from eoscore.answer.record import Report
    from eoscore.show.report.build import Input, report_page

    lab = text.lab(settings, sample)
    answers = Report(text.name, lab.answers(accuracy=accuracy, workers=workers))
    return answers, report_page(Input(text.name, text.content, settings, accuracy, sample), lab, answers)


def _require_matplotlib() -> None:
    from importlib.util import find_spec

    if find_spec("matplotlib") is None:
        from eoscore.show.dataset import MissingExtraError

        raise MissingExtraError("matplotlib", "plot")
