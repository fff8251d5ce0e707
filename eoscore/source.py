"""Where a piece of Tarn stands: a source text and spans in it. A leaf: it knows nobody."""

from __future__ import annotations

from bisect import bisect_right
from dataclasses import dataclass
from functools import cached_property


@dataclass(frozen=True)
class Source:
    """A text with the name under which it was read (a path, or `<text>`)."""

    name: str
    text: str

    @cached_property
    def _starts(self) -> list[int]:
        starts = [0]
        starts.extend(i + 1 for i, char in enumerate(self.text) if char == "\n")
        return starts

    def place(self, offset: int) -> tuple[int, int]:
        """Line and column of a character offset, both counted from 1."""
        line = bisect_right(self._starts, offset)
        return line, offset - self._starts[line - 1] + 1

    def line(self, number: int) -> str:
        """The text of a line, counted from 1, without its line end."""
        start = self._starts[number - 1]
        end = self.text.find("\n", start)
        return self.text[start : end if end >= 0 else None].rstrip("\r")


@dataclass(frozen=True)
class Span:
    """A stretch of a source, as character offsets; the end is exclusive."""

    source: Source
    start: int
    end: int

    @property
    def line(self) -> int:
        """Line of the first character, from 1."""
        return self.source.place(self.start)[0]

    @property
    def column(self) -> int:
        """Column of the first character, from 1."""
        return self.source.place(self.start)[1]

    @property
    def end_line(self) -> int:
        """Line of the end, from 1."""
        return self.source.place(self.end)[0]

    @property
    def end_column(self) -> int:
        """Column of the end, exclusive, from 1."""
        return self.source.place(self.end)[1]

    @property
    def text(self) -> str:
        """The words that stand there."""
        return self.source.text[self.start : self.end]

    def to(self, other: Span) -> Span:
        """From the start of this span to the end of another."""
        return Span(self.source, self.start, other.end)
