"""A text as words, signs and comments, each with its offset: what a layout may move, and must not change."""

from __future__ import annotations

import re
from dataclasses import dataclass
from typing import TYPE_CHECKING, Final, Literal

if TYPE_CHECKING:
    from collections.abc import Iterator

__all__ = ["Word", "words_of"]

Kind = Literal["comment", "path", "nuclide", "number", "name", "sign"]

# The terminals of `grammar/tarn.lark`; a nuclide stands after `isotope` alone.
_SYMBOL: Final = r"°?[^\W\d]\w*(?:(?:(?<=[^\W\d])|(?<=\ba0))-[0-9]+(?!\w|\.[0-9]))?"
_KEYWORD: Final = r"(?:for|in|with|over|from|where|at|and|or|not)\b"
_EXPONENT: Final = r"(?:[eE][+-]?[0-9]+)"
_NUMBER: Final = (
    rf"(?:[0-9]+\.?[0-9]*|\.[0-9]+){_EXPONENT}?(?:\([0-9]+\){_EXPONENT}?)?\w*"
    rf"(?:[ \t]+(?!{_KEYWORD}){_SYMBOL}(?:[./]{_SYMBOL})*)?"
)
_WORDS: Final = re.compile(
    r"(?P<comment>#[^\n]*)"
    r'|(?P<path>"[^"\n]*")'
    r"|(?P<nuclide>(?<![\w.])[A-Z][a-z]?-[0-9]{1,3}(?![0-9]))"
    rf"|(?P<number>{_NUMBER})"
    r"|(?P<name>[^\W\d]\w*)"
    r"|(?P<sign><=|>=|[-+*/^=<>(){}\[\],])"
)
_NAME: Final = re.compile(r"[^\W\d]\w*")


@dataclass(frozen=True)
class Word:
    """One word: its kind, its text with inner spaces made single, its offset, and the line ends before it."""

    kind: Kind
    text: str
    start: int
    newlines: int = 0

    @property
    def has_unit(self) -> bool:
        """Whether it is a number with a unit."""
        return self.kind == "number" and " " in self.text


def words_of(text: str) -> Iterator[Word]:
    """The words of a text that the reader has found without fault."""
    at, last = 0, ""
    while found := _WORDS.search(text, at):
        if found.lastgroup == "nuclide" and last != "isotope":
            found = _NAME.match(text, found.start()) or found
            kind = "name"
        else:
            kind = found.lastgroup or "sign"
        last = found[0] if kind != "comment" else last
        newlines = text.count("\n", at, found.start())
        at = found.end()
        shown = re.sub(r"[ \t]+", " ", found[0]) if kind == "number" else found[0].rstrip()
        yield Word(kind, shown, found.start(), newlines)  # type: ignore[arg-type]  # the group names are the kinds
