"""Finished chunks kept in a file beside the output, so that a run that was interrupted goes on where it stopped.

The file begins with a line that tells by a hash what was asked; then comes a record per chunk: its length, a check
sum and its bytes. A record that was cut short by a kill or a full disk is dropped with all after it.
"""

from __future__ import annotations

import hashlib
import json
import struct
import zlib
from typing import IO, TYPE_CHECKING, Self

from eoscore.answer.chunk import Chunk
from eoscore.answer.packing import packed, unpacked

if TYPE_CHECKING:
    from collections.abc import Iterator
    from pathlib import Path
    from types import TracebackType

    from eoscore.answer.recipe import Recipe
    from eoscore.answer.record import Piece
    from eoscore.language.program import Program

__all__ = ["Journal", "JournalBusyError", "key_of"]

_RECORD = struct.Struct("<QI")  # length of the bytes and their CRC-32


class JournalBusyError(OSError):
    """Another run writes to the same file."""

    def __init__(self, path: Path) -> None:
        super().__init__(f"another run is writing to {path}; wait for it, or choose another output")


class Journal:
    """The chunks kept in a file; a context that holds the file open and lets nobody else in."""

    def __init__(self, path: Path, recipe: Recipe, program: Program) -> None:
        self.path = path
        self.stale = False  # whether the file held chunks of another question, which are gone
        self._key = key_of(recipe, program)
        self._places: dict[Chunk, tuple[int, int]] = {}
        self._stream: IO[bytes] = open(path, "a+b", buffering=0)  # noqa: SIM115, PTH123  closed by __exit__
        try:
            _lock(self._stream, path)
            self._read()
        except BaseException:
            self._stream.close()
            raise

    def __enter__(self) -> Self:
        return self

    def __exit__(
        self, kind: type[BaseException] | None, fault: BaseException | None, trace: TracebackType | None
    ) -> None:
        self._stream.close()

    def __len__(self) -> int:
        return len(self._places)

    def piece(self, chunk: Chunk) -> Piece | None:
        """The piece of a chunk if it is kept here."""
        if chunk not in self._places:
            return None
        start, length = self._places[chunk]
        self._stream.seek(start)
        return unpacked(self._stream.read(length))

    def keep(self, chunk: Chunk, piece: Piece) -> None:
        """Add a chunk at the end. OSError where the disk is full: the chunks before stay."""
        name = json.dumps([chunk.question, chunk.spans]).encode() + b"\n"
        content = name + packed(piece)
        start = self._stream.seek(0, 2)
        _write(self._stream, _RECORD.pack(len(content), zlib.crc32(content)) + content)
        self._places[chunk] = (start + _RECORD.size + len(name), len(content) - len(name))

    def _read(self) -> None:
        """Find the whole records and cut off what follows them; begin anew where something else was asked."""
        head = f"chunks of an eoscore run, {self._key}\n".encode()
        self._stream.seek(0)
        found = self._stream.read(len(head))
        if found != head:
            self.stale = bool(found)
            self._stream.truncate(0)
            _write(self._stream, head)
            return
        end = len(head)
        for reached, start, content in self._records(end):
            end = reached
            name, _, rest = content.partition(b"\n")
            question, spans = json.loads(name)
            chunk = Chunk(question, tuple((int(a), int(b)) for a, b in spans))
            self._places[chunk] = (start + len(name) + 1, len(rest))
        self._stream.truncate(end)

    def _records(self, end: int) -> Iterator[tuple[int, int, bytes]]:
        """End, start of the content and content of every whole record."""
        while len(top := self._stream.read(_RECORD.size)) == _RECORD.size:
            length, check = _RECORD.unpack(top)
            content = self._stream.read(length)
            if len(content) < length or zlib.crc32(content) != check:
                return
            start, end = end + _RECORD.size, end + _RECORD.size + length
            yield end, start, content


def _write(stream: IO[bytes], content: bytes) -> None:
    """Write all of it: a disk that fills up takes a part first."""
    view = memoryview(content)
    while view:
        view = view[stream.write(view) :]


def _lock(stream: IO[bytes], path: Path) -> None:
    """Keep other runs out as long as the stream is open, where the system can."""
    try:
        import fcntl
    except ImportError:  # not on Windows
        return
    try:
        fcntl.flock(stream, fcntl.LOCK_EX | fcntl.LOCK_NB)
    except BlockingIOError:
        raise JournalBusyError(path) from None


def key_of(recipe: Recipe, program: Program) -> str:
    """A hash of all that the numbers of a grid depend on: texts, settings, versions, plugins."""
    from importlib.metadata import entry_points

    import numpy as np
    import scipy

    from eoscore import __version__

    world = program.world
    gases = [gas.node.span.source for gas in world.gases.values()]
    places = [place.node.span.source for place in world.places.values() if place.node is not None]
    names = [
        each.definition.span.source for each in world.scope.names.values() if each.definition is not None
    ]
    used = {source.name: source.text for source in (*gases, *places, *names)}
    plugins = sorted(
        (point.name, point.value, "" if point.dist is None else point.dist.version)
        for point in entry_points(group="eoscore.dispersions")
    )
    versions = (__version__, np.__version__, scipy.__version__)
    asked = [versions, plugins, recipe.text.hex(), sorted(used.items()), recipe.settings, recipe.samples]
    return hashlib.sha256(json.dumps(asked).encode()).hexdigest()
