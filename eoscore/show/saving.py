"""Files that appear whole or not at all: written beside their place and renamed into it."""

from __future__ import annotations

import os
from contextlib import contextmanager
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Iterator
    from pathlib import Path

    from eoscore.answer.record import FoundAnswer, Report

__all__ = ["FORMATS", "appearing", "no_place", "save", "unwritable"]

FORMATS = (".csv", ".nc", ".json")


def unwritable(target: Path) -> str | None:
    """Why a file cannot be written there, found before anything is computed; None where it can."""
    if target.suffix not in FORMATS:
        return f"{target} ends in {target.suffix or 'nothing'}; the formats are {', '.join(FORMATS)}"
    return no_place(target)


def no_place(target: Path) -> str | None:
    """Why there is no place for a file of any format; None where there is."""
    if target.is_dir():
        return f"{target} is a folder"
    if not target.parent.is_dir():
        return f"the folder {target.parent} does not exist"
    if not os.access(target if target.exists() else target.parent, os.W_OK):
        return f"{target} may not be written"
    return None


@contextmanager
def appearing(target: Path) -> Iterator[Path]:
    """A temporary path beside the target; on a clean exit it is renamed to the target, else removed."""
    temporary = target.with_name(f".{target.name}.{os.getpid()}.part")
    try:
        yield temporary
        temporary.replace(target)
    finally:
        temporary.unlink(missing_ok=True)


def save(report: Report, target: Path) -> tuple[Path, ...]:
    """Write the answers in the format of the file's ending; the paths written.

    JSON takes the whole document. CSV and netCDF take a table per question: the questions over a grid, or all
    where there is none; with several tables the line of the question joins each file's name.
    """
    if target.suffix == ".json":
        from eoscore.show.document import json_text

        with appearing(target) as path:
            path.write_text(json_text(report), encoding="utf-8")
        return (target,)
    tables = _tables(report)
    names = [
        target if len(tables) == 1 else target.with_stem(f"{target.stem}-line{answer.line}")
        for answer in tables
    ]
    for answer, name in zip(tables, names, strict=True):
        with appearing(name) as path:
            _write_table(report, answer, path, target.suffix)
    return tuple(names)


def _tables(report: Report) -> list[FoundAnswer]:
    from eoscore.answer.record import FoundAnswer

    found = [answer for answer in report.answers if isinstance(answer, FoundAnswer)]
    return [answer for answer in found if answer.over] or found


def _write_table(report: Report, answer: FoundAnswer, path: Path, suffix: str) -> None:
    if suffix == ".csv":
        from eoscore.show.comma_separated import write_csv

        write_csv(report, answer, path)
    else:
        from eoscore.show.dataset import write_netcdf

        write_netcdf(answer, path)
