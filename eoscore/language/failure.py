"""The place where the grammar could not go on, and what stands around it."""

from __future__ import annotations

import re
from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING, Any

from lark import Token, Tree, UnexpectedToken

from eoscore.source import Span

if TYPE_CHECKING:
    from lark import UnexpectedInput

    from eoscore.source import Source

_COMMENT = re.compile(r"#[^\n]*")


@dataclass(frozen=True)
class Failure:
    """An unexpected token or character.

    `kind` is the type of the token, "" for a character that no rule knows, "$END" at the end of the text.
    `accepts` holds the types that the grammar would have taken, `stack` what it had read and not yet closed.
    """

    source: Source
    text: str  # the text with its comments blanked out
    start: int
    end: int
    kind: str
    accepts: frozenset[str]
    stack: tuple[Any, ...]

    @classmethod
    def of(cls, error: UnexpectedInput, source: Source) -> Failure:
        """The facts of an error of lark."""
        text = _COMMENT.sub(lambda found: " " * len(found[0]), source.text)
        parser = error.interactive_parser
        accepts: set[str] = parser.accepts()  # type: ignore[no-untyped-call]  # lark leaves it unannotated
        if not isinstance(error, UnexpectedToken):
            start = error.pos_in_stream or 0  # type: ignore[redundant-expr]  # lark says it is None or an int at once
            end, kind = start + 1, ""
        elif error.token.type == "$END":
            start = end = len(text)
            kind = "$END"
        else:
            start, kind = int(error.token.start_pos), error.token.type
            end = start + len(error.token)
        return cls(
            source,
            text,
            start,
            end,
            kind,
            frozenset(accepts),
            tuple(parser.parser_state.value_stack),
        )

    @property
    def word(self) -> str:
        """What came, as written."""
        return self.text[self.start : self.end]

    @property
    def span(self) -> Span:
        """The place of what came; at the end of the text, the last word before it."""
        if self.kind == "$END":
            return Span(self.source, max(self.behind - 1, 0), max(self.behind, 0))
        return Span(self.source, self.start, self.end)

    @cached_property
    def came(self) -> str:
        """What came, for a message."""
        if self.kind == "$END":
            return "the end of the text came"
        shown = self.word if len(self.word) <= 30 else self.word[:27] + "..."
        return f"`{shown}` came"

    @property
    def came_in_line(self) -> str:
        """What came, with its line unless it is the end."""
        return self.came if self.kind == "$END" else f"{self.came} in line {self.span.line}"

    @cached_property
    def behind(self) -> int:
        """Where the last word before this place ends."""
        end = self.start
        while end > 0 and self.text[end - 1].isspace():
            end -= 1
        return end

    @cached_property
    def line_start(self) -> int:
        """Where the line of this place begins."""
        return self.text.rfind("\n", 0, self.start) + 1

    @property
    def head(self) -> str:
        """What stands before on the same line."""
        return self.text[self.line_start : self.start].strip()

    @property
    def opens_a_line(self) -> bool:
        """Whether what came is the first on its line, or nothing came."""
        return not self.head or self.kind == "$END"

    @property
    def wants_value(self) -> bool:
        """Whether a value was expected."""
        return "NUMBER" in self.accepts

    @property
    def wants_operator(self) -> bool:
        """Whether an expression could have gone on."""
        return "STAR" in self.accepts

    def top(self, below: int = 1) -> Any:
        """What was read last, `below` places down; None if nothing was."""
        return self.stack[-below] if len(self.stack) >= below else None

    def is_read(self, below: int, *kinds: str) -> bool:
        """Whether a token of one of these types was read `below` places down."""
        found = self.top(below)
        return isinstance(found, Token) and found.type in kinds

    def token_span(self, token: Token) -> Span:
        """The place of a token that was read."""
        start = token.start_pos or 0
        return Span(self.source, start, start + len(token))

    @cached_property
    def brace(self) -> int | None:
        """Where in the stack the innermost open block begins; None at the level of the file."""
        return self._open("LBRACE", "RBRACE", down_to=-1)

    @cached_property
    def entry(self) -> tuple[Any, ...]:
        """What was read of the entry, or the line of a block, that is at fault."""
        read = self.stack[0 if self.brace is None else self.brace + 1 :]
        return (
            read[1:] if read and isinstance(read[0], Tree) else read
        )  # lark keeps the entries before in a tree

    @property
    def entry_start(self) -> int:
        """Where that entry begins."""
        first = self.entry[0] if self.entry else None
        return self.start if first is None else _start(first)

    @cached_property
    def open_bracket(self) -> Token | None:
        """The innermost `(` or `[` that is open within the block."""
        floor = -1 if self.brace is None else self.brace
        inner = [self._open(*pair, down_to=floor) for pair in (("LPAR", "RPAR"), ("LSQB", "RSQB"))]
        index = max((i for i in inner if i is not None), default=None)
        return None if index is None else self.stack[index]

    @property
    def question(self) -> Token | None:
        """`find` or `derive`, if a question is being read."""
        first = self.entry[0] if self.entry else None
        return first if isinstance(first, Token) and first.type in ("FIND", "DERIVE") else None

    def _open(self, opening: str, closing: str, *, down_to: int) -> int | None:
        closed = 0
        for index in range(len(self.stack) - 1, down_to, -1):
            item = self.stack[index]
            kind = item.type if isinstance(item, Token) else ""
            closed += kind == closing
            if kind == opening:
                if not closed:
                    return index
                closed -= 1
        return None


def _start(item: Any) -> int:
    return (item.start_pos or 0) if isinstance(item, Token) else item.span.start
