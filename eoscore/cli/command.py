"""The command group and its entry point."""

from __future__ import annotations

import os
import sys
from typing import IO, NoReturn

import click

from eoscore.cli.check import check
from eoscore.cli.demo import demo
from eoscore.cli.exits import guarded
from eoscore.cli.explain import explain
from eoscore.cli.format import format_
from eoscore.cli.plugins import plugins
from eoscore.cli.report import report
from eoscore.cli.run import run

__all__ = ["command", "main"]


@click.group(context_settings={"help_option_names": ["-h", "--help"]})
@click.version_option(package_name="eoscore", message="eoscore %(version)s")
def command() -> None:
    """Where a quantum gas condenses in a given trap, and in what state it is.

    A text file in Tarn declares the gas, the trap and the questions; each answer carries its unit, its error
    and its cautions.
    """


for verb in (run, check, plugins, demo, report, explain, format_):
    command.add_command(verb)


def main() -> NoReturn:
    """Run the command line and leave with its exit status."""
    for stream in (sys.stdout, sys.stderr):
        _never_fail_to_print(stream)
    if "_EOSCORE_COMPLETE" in os.environ:
        command.main(prog_name="eoscore")  # answers the shell that completes a line, and leaves
    sys.exit(guarded(lambda: _invoke(sys.argv[1:])))


def _invoke(arguments: list[str]) -> int:
    """Like `command.main`, which would turn a reader that leaves early into a status of its own."""
    try:
        with command.make_context("eoscore", arguments) as context:
            return int(command.invoke(context) or 0)
    except click.exceptions.Exit as leaving:
        return leaving.exit_code


def _never_fail_to_print(stream: IO[str]) -> None:
    """A screen that lacks a letter shows `?` instead of stopping the run."""
    reconfigure = getattr(stream, "reconfigure", None)
    if reconfigure is not None:
        reconfigure(errors="replace")
