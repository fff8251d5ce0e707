"""`eoscore format FILE`: the canonical layout of a file."""

from __future__ import annotations

import sys
from pathlib import Path

import click

from eoscore.cli.exits import ANSWERED, FAULTY
from eoscore.cli.reading import Text
from eoscore.errors import TarnError

__all__ = ["format_"]


@click.command("format")
@click.argument("file")
@click.option(
    "--check", "only_check", is_flag=True, help="Write nothing; exit 1 where the layout is another one."
)
@click.option("--write", "in_place", is_flag=True, help="Rewrite FILE instead of writing to standard output.")
def format_(file: str, only_check: bool, in_place: bool) -> int:
    """Lay FILE out in the canonical way: words, numbers and comments stay, spaces and line ends are set.

    - reads standard input. A file at fault is left as it is, with its complaints on standard error.
    """
    from eoscore.language.layout import laid_out

    if only_check and in_place:
        raise click.UsageError("--check writes nothing and --write rewrites FILE; choose one of them.")
    if in_place and file == "-":
        raise click.UsageError(
            "--write wants a FILE to rewrite; standard input is laid out on standard output."
        )
    text = Text.of(file)
    try:
        written = laid_out(text.content, text.name)
    except TarnError as fault:
        from eoscore.show.complaint import complaints_text

        click.echo(complaints_text(fault.complaints), err=True)
        return FAULTY
    changed = written.encode() != text.content
    if only_check:
        click.echo(f"{text.name}: {'another layout' if changed else 'laid out already'}", err=changed)
        return FAULTY if changed else ANSWERED
    if not in_place:
        sys.stdout.write(written)
    elif changed:
        Path(file).write_bytes(written.encode())
        click.echo(f"wrote {file}")
    return ANSWERED
