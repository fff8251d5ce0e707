"""The look of every table: open, aligned, plain where the output is no terminal."""

from __future__ import annotations

from io import StringIO
from textwrap import fill
from typing import IO, TYPE_CHECKING

if TYPE_CHECKING:
    from rich.console import Console
    from rich.table import Table

__all__ = ["columns", "console_on", "paragraph", "put"]

_PLAIN_WIDTH = 110  # columns when the output is not a terminal


def console_on(stream: IO[str]) -> Console:
    """A rich console on a text stream that takes every text literally.

    A text kept in memory is plain even in a notebook, where rich would draw beside it and the kernel asks for colour.
    """
    from rich.console import Console

    width = None if stream.isatty() else _PLAIN_WIDTH
    return Console(
        file=stream,
        width=width,
        highlight=False,
        emoji=False,
        markup=False,
        force_jupyter=False,
        force_terminal=False if isinstance(stream, StringIO) else None,
    )


def put(console: Console, table: Table) -> None:
    """Print a table without the blanks that pad its last column."""
    with console.capture() as captured:
        console.print(table)
    for line in captured.get().splitlines():
        console.file.write(line.rstrip() + "\n")


def paragraph(console: Console, text: str) -> None:
    """Print a text set in by two blanks, its further lines by four."""
    console.print(fill(text, console.width, initial_indent="  ", subsequent_indent="    "), soft_wrap=True)


def columns(*names: str) -> Table:
    """An open table: a rule under the head, no frame."""
    from rich.box import SIMPLE_HEAD
    from rich.table import Table

    table = Table(box=SIMPLE_HEAD, show_edge=False, pad_edge=False, header_style="bold", padding=(0, 2, 0, 0))
    for name in names:
        table.add_column(name, overflow="fold")
    return table
