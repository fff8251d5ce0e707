"""Where `run` keeps the finished chunks of its grids until the output is there, and what it says about them."""

from __future__ import annotations

import glob
from contextlib import contextmanager
from typing import TYPE_CHECKING, cast

import click

if TYPE_CHECKING:
    from collections.abc import Iterator
    from pathlib import Path

    from eoscore.answer.running import Run

__all__ = ["Kept", "kept_beside"]


class Kept:
    """The file for the chunks of an output, None without an output; `begin` tells what was found there."""

    def __init__(self, out: Path | None) -> None:
        self.path = None if out is None else out.with_name(f".{out.name}.chunks")
        self._out, self._run = out, cast("Run | None", None)

    def begin(self, run: Run) -> None:
        """Say where a run stands before its first step."""
        self._run, journal = run, run.help.journal
        if journal is None:
            return
        if journal.stale:
            _say(f"{journal.path} held chunks of another text, setting or version; they are not used")
        if len(journal):
            _say(f"going on from {self._count()} in {journal.path}")

    def end(self) -> None:
        """Say what stays after a run that was stopped."""
        if self._run is None or self._run.help.journal is None:
            return
        journal = self._run.help.journal
        if len(journal):
            _say(f"{self._count()} are kept in {journal.path}; the same command goes on from there")
        else:
            journal.path.unlink(missing_ok=True)

    def remove(self) -> None:
        """Remove the file, which is not needed any more, and what runs that were killed left while they wrote."""
        if self._out is not None and self._run is not None and self._run.help.journal is not None:
            self._run.help.journal.path.unlink(missing_ok=True)
            for rest in self._out.parent.glob(f".{glob.escape(self._out.stem)}*.part"):
                rest.unlink(missing_ok=True)

    def _count(self) -> str:
        run = self._run
        if run is None or run.help.journal is None:
            return "no chunks"
        return f"{len(run.help.journal)} of {sum(map(len, run.chunks.values()))} chunks"


@contextmanager
def kept_beside(out: Path | None) -> Iterator[Kept]:
    """The chunks of an output: removed at the end; left and told about where the block is stopped."""
    kept = Kept(out)
    try:
        yield kept
    except BaseException:
        kept.end()
        raise
    kept.remove()


def _say(sentence: str) -> None:
    click.echo(f"eoscore: {sentence}", err=True)
