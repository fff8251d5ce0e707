"""`eoscore explain NAME`: what a name means."""

from __future__ import annotations

from typing import TYPE_CHECKING

import click

from eoscore.cli.exits import ANSWERED, FAULTY

if TYPE_CHECKING:
    from click.shell_completion import CompletionItem

    from eoscore.show.glossary import Entry

__all__ = ["explain"]


def _known(_context: click.Context, _parameter: click.Parameter, begun: str) -> list[CompletionItem]:
    from click.shell_completion import CompletionItem

    from eoscore.show.glossary import glossary

    return [
        CompletionItem(name, help=entries[0].meaning)
        for name, entries in glossary().items()
        if name.startswith(begun)
    ]


@click.command()
@click.argument("names", metavar="NAME...", nargs=-1, required=True, shell_complete=_known)
def explain(names: tuple[str, ...]) -> int:
    """Say what a quantity, function, constant, unit, word, dispersion, shelf function or caution means.

    Each with its formula, its unit and its source where they exist.
    """
    from eoscore.show.glossary import entries_of

    unknown = [name for name in names if not entries_of(name)]
    entries = [entry for name in names for entry in entries_of(name)]
    click.echo("\n\n".join(map(_paragraph, entries)), nl=bool(entries))
    for name in unknown:
        click.echo(_told_unknown(name), err=True)
    return FAULTY if unknown else ANSWERED


def _paragraph(entry: Entry) -> str:
    from textwrap import fill

    lines = [
        f"{entry.name}: {entry.kind}",
        fill(entry.meaning, 100, initial_indent="  ", subsequent_indent="  "),
    ]
    for title, text in (("formula", entry.formula), ("unit", entry.unit), ("source", entry.source)):
        if text:
            lines.append(fill(text, 100, initial_indent=f"  {title + ':':9}", subsequent_indent=" " * 11))
    return "\n".join(lines)


def _told_unknown(name: str) -> str:
    from eoscore.show.glossary import near_names

    near = near_names(name)
    mend = (
        f"did you mean {' or '.join(near)}?"
        if near
        else "quantities, units and words are told in grammar/README.md"
    )
    return f"eoscore: `{name}` is no name of the language; {mend}"
