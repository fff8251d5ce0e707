"""The source text in colours; each line can be pointed at, and a question leads to its answer."""

from __future__ import annotations

from typing import TYPE_CHECKING

from pygments.token import Comment, Keyword, Name, Number, String

from eoscore.show.lexer import TarnLexer
from eoscore.show.report.markup import Markup, element, together

if TYPE_CHECKING:
    from collections.abc import Mapping

    from pygments.token import _TokenType

__all__ = ["source_listing"]

_CLASSES = (
    (Comment, "comment"),
    (Keyword.Type, "unit"),
    (Keyword, "word"),
    (Number, "number"),
    (String, "number"),
    (Name.Builtin, "known"),
    (Name.Constant, "known"),
    (Name.Function, "function"),
    (Name.Class, "function"),
)


def source_listing(text: str, answers: Mapping[int, int]) -> Markup:
    """Numbered lines with the ids L1, L2, ...; `answers` maps lines to the numbers of answers."""
    lines: list[list[str]] = [[]]
    for kind, words in TarnLexer(stripnl=False, ensurenl=False).get_tokens(text):
        for place, part in enumerate(words.split("\n")):
            if place:
                lines.append([])
            if part:
                lines[-1].append(_coloured(kind, part))
    if lines and not lines[-1]:
        lines.pop()
    rows = [_line(number, parts, answers.get(number)) for number, parts in enumerate(lines, 1)]
    listing = element("code", *rows)
    return element("pre", listing, class_="wide source", tabindex="0", role="group", aria_label="Source text")


def _coloured(kind: _TokenType, part: str) -> str:
    name = next((name for each, name in _CLASSES if kind[: len(each)] == each), "")
    return element("span", part, class_=name) if name else part


def _line(number: int, parts: list[str], answer: int | None) -> Markup:
    margin = element("span", f"{number:>4} ", class_="margin")
    link = Markup("")
    if answer is not None:
        link = together("  ", element("a", f"answer {answer}", href=f"#answer-{answer}"))
    return element("span", margin, *parts, link, Markup("\n"), id=f"L{number}", class_="line")
