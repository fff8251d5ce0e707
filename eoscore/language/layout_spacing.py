"""Which words of a line stand apart: the spacing that `writer` gives expressions, for words in their order."""

from __future__ import annotations

from typing import TYPE_CHECKING, Final

from eoscore.language.reserved import RESERVED

if TYPE_CHECKING:
    from collections.abc import Sequence

    from eoscore.language.layout_words import Word

__all__ = ["joined"]

_TIGHT: Final = ("^", "*", "/")  # operators without spaces


def joined(words: Sequence[Word], before: Word | None = None) -> str:
    """The words of one line; `before` is the last word of the line above, where the entry goes on from it."""
    text = ""
    tight_after = True
    last = before
    for place, word in enumerate(words):
        tight_before, tight_next = _tightness(word, last)
        text += ("" if tight_after or tight_before else " ") + word.text
        goes_on = (
            place == 0 and last is not None and word.text in (*_TIGHT, "+", "-") and not _signs(word, last)
        )
        tight_after, last = tight_next and not goes_on, word
    return text


def _tightness(word: Word, last: Word | None) -> tuple[bool, bool]:
    """Whether a word clings to the one before it, and to the one behind it."""
    if word.kind != "sign":
        return False, False
    match word.text:
        case "(":
            return last is not None and _is_function(last), True
        case "[":
            return False, True
        case ")" | "]" | ",":
            return True, False
        case "/" if last is not None and last.has_unit:  # `5 W/x` would take x for a unit
            return False, False
        case "^" | "*" | "/":
            return True, True
    return False, _signs(word, last)


def _is_function(word: Word) -> bool:
    return word.kind == "name" and (word.text not in RESERVED or word.text == "if")


def _signs(word: Word, last: Word | None) -> bool:
    """Whether a minus is the sign of the value behind it, not a difference."""
    if word.text != "-":
        return False
    if last is None or (last.kind == "name" and last.text in RESERVED):
        return True
    return last.kind == "sign" and last.text not in (")", "]")
