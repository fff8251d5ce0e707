"""`eoscore demo`: list, run or copy out the shipped examples."""

from __future__ import annotations

from importlib.resources import files
from pathlib import Path
from typing import Any

import click

from eoscore.cli.exits import ANSWERED
from eoscore.cli.reading import Text
from eoscore.cli.run import Asked, answer_text, asking

__all__ = ["demo", "demo_names", "demo_text"]

_FOLDER = "eoscore.demos"


def demo_names() -> list[str]:
    """The names of the shipped examples, in order."""
    return sorted(
        entry.name.removesuffix(".tarn") for entry in files(_FOLDER).iterdir() if entry.name.endswith(".tarn")
    )


def demo_text(name: str) -> str:
    """The Tarn text of a shipped example.

    Raises
    ------
    click.BadParameter
        Where there is no such example.
    """
    if name not in demo_names():
        raise click.BadParameter(f"there is no demo {name!r}; known are {', '.join(demo_names())}.")
    return files(_FOLDER).joinpath(f"{name}.tarn").read_text(encoding="utf-8")


@click.command()
@click.argument("name", required=False)
@click.option(
    "--write",
    "folder",
    type=click.Path(path_type=Path),
    metavar="DIR",
    help="Copy the example into DIR instead.",
)
@asking
def demo(name: str | None, folder: Path | None, **options: Any) -> int:
    """List the shipped examples, run the one called NAME, or copy it out."""
    if name is None:
        _list_demos()
        return ANSWERED
    text = demo_text(name)
    if folder is not None:
        return _copy(name, text, folder)
    return answer_text(Text(f"{name}.tarn", text.encode(), Path.cwd()), Asked(**options))


def _list_demos() -> None:
    width = max(map(len, demo_names()))
    for name in demo_names():
        title = demo_text(name).splitlines()[0].removeprefix("#").strip()
        click.echo(f"{name:{width}}  {title}")


def _copy(name: str, text: str, folder: Path) -> int:
    target = folder / f"{name}.tarn"
    if not folder.is_dir():
        raise click.BadParameter(f"the folder {folder} does not exist.", param_hint="--write")
    if target.exists() and target.read_text(encoding="utf-8") != text:
        raise click.BadParameter(f"{target} exists and differs; it is left as it is.", param_hint="--write")
    target.write_text(text, encoding="utf-8")
    click.echo(f"wrote {target}")
    return ANSWERED
