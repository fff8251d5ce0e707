"""The functions of the shelf: their meaning is the comment that stands above them in the shelf file."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING

from eoscore.language import nodes
from eoscore.language.include import shelf_files
from eoscore.language.parse import parse
from eoscore.language.writer import write
from eoscore.show.glossary.entry import Entry

if TYPE_CHECKING:
    from collections.abc import Iterator

__all__ = ["shelf_entries"]


def shelf_entries() -> Iterator[Entry]:
    """An entry for every function of every shelf file, in the order of the file."""
    for shelf, path in sorted(shelf_files().items()):
        yield from _entries(shelf, path.read_text(encoding="utf-8"))


def _entries(shelf: str, text: str) -> Iterator[Entry]:
    above, last = "", 0
    for node in parse(text, f"shelf/{shelf}.tarn").entries:
        if not isinstance(node, nodes.Definition):
            continue
        between = text[last : node.span.start]
        above = _comment(between) or above
        last = node.span.end
        meaning, source = _split(above)
        yield Entry(node.name.name, f"shelf function (use {shelf})", meaning, write(node), "", source)


def _comment(between: str) -> str:
    """The last paragraph of comment lines before a definition."""
    paragraph = between.rstrip("\n").rsplit("\n\n", 1)[-1]
    lines = [line.lstrip("# ").strip() for line in paragraph.splitlines() if line.startswith("#")]
    return " ".join(lines)


# A source is told after the meaning, as a sentence of its own: names with initials, or one that was told before.
_SOURCE = re.compile(
    r"(?<=\. )(?=(?:[A-Z]\. (?:[A-Z]\. )*[A-Z][a-z]+|Siegman|Grimm|Jackson|Bergeman|Morsch|From)\b[^:]*$)"
)


def _split(comment: str) -> tuple[str, str]:
    parts = _SOURCE.split(comment, maxsplit=1)
    return parts[0].strip(), (parts[1].strip().rstrip(".") if len(parts) > 1 else "")
