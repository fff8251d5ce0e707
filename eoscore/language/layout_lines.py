"""Words to lines: an entry to a line of its own, set in by its depth; breaks that the author made stay."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import TYPE_CHECKING

from eoscore.language import nodes
from eoscore.language.layout_words import words_of

if TYPE_CHECKING:
    from collections.abc import Iterable, Iterator

    from eoscore.language.layout_words import Word

__all__ = ["Line", "lines_of"]


@dataclass
class Line:
    """Words of one line, its depth, the comment behind it, and what stands around it.

    `entry` is the kind of node that begins here, None for a line that goes on or holds only a comment; `before`
    is the last word above of the entry that goes on.
    """

    depth: int
    words: list[Word] = field(default_factory=list)
    comment: str = ""
    blank: bool = False
    entry: type[nodes.Node] | None = None
    before: Word | None = None


def lines_of(text: str, file: nodes.File) -> list[Line]:
    """The lines of a text without faults, in order; a blank line or more above one is told by its `blank`."""
    builder = _Builder({entry.span.start: entry for entry in _entries(file.entries)})
    for word in words_of(text):
        builder.take(word)
    return builder.lines


def _entries(entries: Iterable[nodes.Node]) -> Iterator[nodes.Node]:
    """Every entry of a file, of a block and of a dispersion."""
    for entry in entries:
        yield entry
        if isinstance(entry, nodes.Gas | nodes.Trap | nodes.States):
            yield from _entries(entry.entries)
        elif isinstance(entry, nodes.DispersionChoice):
            yield from _entries(entry.parameters)


class _Builder:
    """Puts words on lines, one after the other."""

    def __init__(self, entries: dict[int, nodes.Node]) -> None:
        self.lines: list[Line] = []
        self._entries = entries
        self._end = 0  # of the entry that is being written
        self._depth = 0
        self._broken = True  # whether the next word must open a line
        self._last: Word | None = None  # of the entry that is being written

    def take(self, word: Word) -> None:
        if word.kind == "comment":
            self._comment(word)
        elif word.text == "}":
            self._depth = max(self._depth - 1, 0)
            self._last = None
            self._open(word, nodes.Node, blank=False)
            self._broken = True
        elif word.text == "{":
            if self._broken:
                self._open(word, None, blank=False)
            else:
                self.lines[-1].words.append(word)
            self._depth += 1
            self._broken, self._last = True, None
        elif word.start in self._entries:
            entry = self._entries[word.start]
            self._last, self._end = None, entry.span.end
            self._open(word, type(entry), blank=word.newlines > 1)
        elif word.newlines or self._broken:
            self._open(word, None, blank=False)
        else:
            self.lines[-1].words.append(word)
        if word.kind != "comment" and word.text not in ("{", "}"):
            self._last = word

    def _open(self, word: Word, entry: type[nodes.Node] | None, *, blank: bool) -> None:
        depth = self._depth + (1 if self._last is not None else 0)
        self.lines.append(Line(depth, [word], blank=blank, entry=entry, before=self._last))
        self._broken = False

    def _comment(self, word: Word) -> None:
        if self.lines and not word.newlines and not self.lines[-1].comment:
            self.lines[-1].comment = word.text
        else:
            depth = self._depth + (1 if self._last is not None and word.start < self._end else 0)
            self.lines.append(Line(depth, comment=word.text, blank=word.newlines > 1))
        self._broken = True
