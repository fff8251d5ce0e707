"""After a fault: put it into words, and find where the reading can go on."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING, Final

from lark import Token

from eoscore.language import brackets, misplaced, question_slips, unfinished
from eoscore.language.failure import Failure
from eoscore.language.limits import FAULTS
from eoscore.language.reserved import LINE_WORDS, OPENERS, RESERVED
from eoscore.language.slips import slip

if TYPE_CHECKING:
    from collections.abc import Callable

    from lark import UnexpectedInput
    from lark.parsers.lalr_interactive_parser import InteractiveParser

    from eoscore.language.faults import Fault, Faults
    from eoscore.source import Source

# Asked in this order; the first that knows the case tells it.
_TELLERS: Final[tuple[Callable[[Failure], Fault | None], ...]] = (
    question_slips.bare_path,
    question_slips.strange_nuclide,
    slip,
    misplaced.reserved_name,
    unfinished.line_above,
    brackets.unclosed_bracket,
    brackets.unclosed_block,
    brackets.stray_closing,
    misplaced.unit_below,
    misplaced.read_as_unit,
    misplaced.foreign_word,
    question_slips.missing_gas,
    question_slips.strange_part,
    question_slips.missing_equals,
    question_slips.strange_span,
    question_slips.comparison,
    misplaced.side_by_side,
    unfinished.unexpected,
)
_HEAD = (
    rf"(?!(?:{'|'.join(RESERVED)})\b)[^\W\d]\w*[ \t]*(?:(?:\([^()\n]*\)[ \t]*)?=(?!=)|[^\W\d]\w*[ \t]*\{{)"
)
_RESUME = re.compile(
    rf"^[ \t]*(?:(?P<top>(?:{'|'.join(OPENERS)})\b(?!\s*[=(]))|(?P<line>(?:{'|'.join(LINE_WORDS)})\b|{_HEAD}))"
    r"|(?P<close>\})",
    re.MULTILINE,
)
_BLOCK_TYPES: Final = ("GAS", "TRAP", "STATES")
_GOES_ON = re.compile(r"(?:[,=+\-*/^(<>]|\b(?:with|over|where|and|or|not|for|in|from|at))\s*$")


def recover(error: UnexpectedInput, source: Source, faults: Faults) -> bool:
    """Notes the fault of a text and sets the parser where it can go on; True, since it always can."""
    failure = Failure.of(error, source)
    fault = next(fault for teller in _TELLERS if (fault := teller(failure)))
    faults.append(fault)
    parser = error.interactive_parser
    if failure.kind == "$END" or len(faults) >= FAULTS:  # what is left of the text is not read
        _go_on(parser, None, len(source.text))
    elif not _repair_header(parser, failure, fault):
        _skip(parser, failure)
    return True


def _go_on(parser: InteractiveParser, brace: int | None, position: int) -> None:
    """Forgets what was read after the open brace (all of it without one), and reads on at a position."""
    state = parser.parser_state
    keep = 0 if brace is None else brace + 1
    del state.value_stack[keep:]
    del state.state_stack[keep + 1 :]
    _read_on(parser, position)


def _read_on(parser: InteractiveParser, position: int) -> None:
    if parser.lexer_thread.state is not None:  # None only before any text is given
        parser.lexer_thread.state.line_ctr.char_pos = position


def _repair_header(parser: InteractiveParser, failure: Failure, fault: Fault) -> bool:
    """Reads a faulty head of a block as a right one, so that its lines are read as a block's."""
    line_end = failure.text.find("\n", failure.start)
    brace = failure.text.find("{", failure.start, line_end if line_end >= 0 else None)
    heads = [str(item).upper() for item in failure.entry[:2] if isinstance(item, Token)]
    if not heads or len(failure.entry) > len(heads) or (brace < 0 and not failure.opens_a_line):
        return False
    if heads[0] not in _BLOCK_TYPES and (brace < 0 or failure.kind not in ("NAME", "LBRACE")):
        return False
    kind = heads[0] if heads[0] in _BLOCK_TYPES else _meant(failure, fault)
    position = brace + 1 if brace >= 0 else failure.start
    _go_on(parser, failure.brace, position)
    choices: dict[str, object] = parser.choices()  # type: ignore[no-untyped-call]  # lark leaves it unannotated
    if kind not in choices:
        return False
    for token_type, text in ((kind, kind.lower()), ("NAME", "_"), ("LBRACE", "{")):
        parser.feed_token(Token(token_type, text, position, end_pos=position))
    return True


def _meant(failure: Failure, fault: Fault) -> str:
    """The type of the word that a strange head of a block stands for, as its hint says."""
    if failure.brace is not None:
        return "DISPERSION"
    return next((kind for kind in _BLOCK_TYPES if f"`{kind.lower()}" in (fault.hint or "")), "GAS")


def _skip(parser: InteractiveParser, failure: Failure) -> None:
    """To the next line that opens an entry of the same block or of the file, or to the end of the block."""
    brace, text = failure.brace, failure.text
    least = failure.entry_start + 1  # never back to the entry at fault, so that the reading comes to an end
    for found in _RESUME.finditer(text, failure.line_start):
        start = found.start(found.lastgroup or 0)
        if start < (failure.start if found["close"] else least) or (found["close"] and brace is None):
            continue
        if found["close"] or not _GOES_ON.search(text[max(start - 60, 0) : start]):
            _go_on(parser, None if found["top"] else brace, start)
            return
    _go_on(parser, None, len(text))
