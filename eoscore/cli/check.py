"""`eoscore check FILE`: read and check, compute nothing."""

from __future__ import annotations

import sys

import click

from eoscore.cli.exits import ANSWERED, FAULTY
from eoscore.cli.reading import Text
from eoscore.errors import TarnError

__all__ = ["check"]


@click.command()
@click.argument("file")
@click.option("--set", "settings", multiple=True, metavar="NAME=VALUE", help='Override a parameter: "P=2 W".')
@click.option("--json", "as_json", is_flag=True, help="Write the complaints as one JSON document.")
def check(file: str, settings: tuple[str, ...], as_json: bool) -> int:
    """Read FILE and tell all its faults, without computing anything; - reads standard input."""
    from eoscore.answer.record import Report

    text = Text.of(file)
    report, sentence = Report(text.name), ""
    try:
        sentence = text.lab(settings).contents()
    except TarnError as fault:
        from eoscore.show.complaint import complaints_text

        report = Report(text.name, complaints=fault.complaints)
        click.echo(complaints_text(fault.complaints), err=True)
    if as_json:
        from eoscore.show.document import json_text

        sys.stdout.write(json_text(report))
    elif sentence:
        click.echo(f"{text.name}: no fault found; {sentence}")
    return FAULTY if report.complaints else ANSWERED
