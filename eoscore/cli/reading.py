"""From the FILE argument to a lab."""

from __future__ import annotations

import sys
from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING

import click

if TYPE_CHECKING:
    from eoscore.answer.lab import Lab

__all__ = ["Text"]

_LARGEST = 64 * 2**20  # bytes; no file written by a person comes near it


@dataclass(frozen=True)
class Text:
    """A text to read: its name in complaints and documents, its bytes, and where `use "path"` looks."""

    name: str
    content: bytes
    folder: Path

    @classmethod
    def of(cls, file: str) -> Text:
        """The FILE argument: a path, or `-` for standard input.

        Raises
        ------
        click.UsageError
            Where there is no such file, or it cannot be read.
        """
        if file == "-":
            return cls("<stdin>", _content(file), Path.cwd())
        return cls(file, _content(file), Path(file).parent)

    def lab(self, settings: tuple[str, ...] = (), samples: int = 0) -> Lab:
        """The text read and checked, with its settings, and the draws for sampled intervals.

        Raises
        ------
        TarnError
            Where the text or a setting is at fault.
        """
        from eoscore.answer.lab import loads

        return loads(self.content, name=self.name, folder=self.folder, settings=settings, samples=samples)


def _content(file: str) -> bytes:
    try:
        if file == "-":
            content = sys.stdin.buffer.read(_LARGEST + 1)
        else:
            with Path(file).open("rb") as stream:
                content = stream.read(_LARGEST + 1)
    except (OSError, ValueError) as fault:
        reason = getattr(fault, "strerror", None) or str(fault)
        raise click.UsageError(f"{file!r} cannot be read: {reason}.") from None
    if len(content) > _LARGEST:
        raise click.UsageError(f"{file!r} is larger than {_LARGEST // 2**20} MB, the most that is read.")
    return content
