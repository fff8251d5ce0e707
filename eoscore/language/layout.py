"""The canonical layout of a text: spaces, line ends and blank lines are set, no word and no comment is changed."""

from __future__ import annotations

from itertools import groupby
from typing import TYPE_CHECKING, Final

from eoscore.errors import EoscoreError
from eoscore.language import nodes
from eoscore.language.layout_lines import Line, lines_of
from eoscore.language.layout_spacing import joined
from eoscore.language.parse import parse

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence

__all__ = ["LayoutError", "laid_out"]

_INDENT: Final = "    "
_BLOCKS: Final = (nodes.Gas, nodes.Trap, nodes.States)
_QUESTIONS: Final = (nodes.Find, nodes.Derive)
_WIDEST_HEAD: Final = 32  # columns up to which `=` and `for` of neighbouring lines are set below each other
_WIDEST_CODE: Final = 60  # columns up to which comments of neighbouring lines are


class LayoutError(EoscoreError, RuntimeError):
    """A fault of our own: a layout would have changed what a text says, and is not given."""

    def __init__(self, name: str) -> None:
        self.name = name
        super().__init__(
            f"{name} is left as it is: its layout would change its meaning; please report this text"
        )


def laid_out(text: str | bytes, name: str = "<text>") -> str:
    """The text in the canonical layout; laid out once more it stays the same.

    Raises
    ------
    TarnError
        Where the text is at fault; a faulty text has no layout.
    LayoutError
        Where the layout would be read back as something else.
    """
    file = parse(text, name)
    lines = lines_of(file.span.source.text, file)
    _set_blocks_apart(lines)
    written = "".join(_written(lines))
    if parse(written, name) != file:
        raise LayoutError(name)
    return written


def _set_blocks_apart(lines: list[Line]) -> None:
    """A blank line around every block (above the comment that heads it), none at the edges of a file or a block."""
    for place, line in enumerate(lines):
        if line.entry in _BLOCKS:
            head = place
            while head and not lines[head].blank and not lines[head - 1].words and lines[head - 1].depth == 0:
                head -= 1
            lines[head].blank = True
        above = lines[place - 1] if place else None
        if above is not None and above.depth == 0 and _text(above) == "}":
            line.blank = True
    for above, line in zip((None, *lines), lines, strict=False):
        if above is None or _text(above).endswith("{") or _text(line) == "}":
            line.blank = False


def _text(line: Line) -> str:
    return joined(line.words, line.before)


def _written(lines: Sequence[Line]) -> Iterator[str]:
    """The lines of a text; neighbours without a blank line between them are written together."""
    group = 0
    numbered = []
    for line in lines:
        group += line.blank
        numbered.append((group, line))
    for number, members in groupby(numbered, key=lambda pair: pair[0]):
        if number:
            yield "\n"
        yield from _paragraph([line for _, line in members])


def _paragraph(lines: Sequence[Line]) -> Iterator[str]:
    codes = _aligned_codes(lines)
    with_comment = [len(code) for code, line in zip(codes, lines, strict=True) if code and line.comment]
    column = max((width for width in with_comment if width <= _WIDEST_CODE), default=0)
    for code, line in zip(codes, lines, strict=True):
        if line.comment and code:
            yield f"{code:{column}}  {line.comment}\n"
        else:
            yield (code or _INDENT * line.depth + line.comment) + "\n"


def _aligned_codes(lines: Sequence[Line]) -> list[str]:
    """The words of each line set in; `=` of neighbouring values, and `for` of neighbouring questions, in a column."""
    codes: list[str] = []
    for (mark, depth), members in groupby(lines, key=lambda line: (_mark(line), line.depth)):
        run = list(members)
        halves = [_halves(line, mark) for line in run]
        width = max((len(head) for head, _ in halves if len(head) <= _WIDEST_HEAD), default=0)
        for line, (head, tail) in zip(run, halves, strict=True):
            text = f"{head:{width}} {tail}" if tail else head
            codes.append(_INDENT * depth + text if line.words else "")
    return codes


def _mark(line: Line) -> str:
    """The word that lines of this kind set below each other; `` for none."""
    texts = [word.text for word in line.words]
    if line.entry is nodes.Definition and texts[1:2] == ["="] and len(texts) > 2:
        return "="
    if line.entry in _QUESTIONS and "for" in texts[:-1]:
        return "for"
    return ""


def _halves(line: Line, mark: str) -> tuple[str, str]:
    if not mark:
        return _text(line), ""
    place = next(i for i, word in enumerate(line.words) if word.text == mark)
    return joined(line.words[:place]), joined(line.words[place:])
