"""Faults of brackets: left open, closed twice, or closed by another kind."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING, Final

from eoscore.language.faults import Fault

if TYPE_CHECKING:
    from eoscore.language.failure import Failure

OPENING_KINDS: Final = ("GAS", "TRAP", "STATES", "USE", "FIND", "DERIVE")
_CLOSING: Final = {"(": ")", "[": "]", "{": "}"}
_HEAD = re.compile(r"[^\W\d]\w*\s*(?:\([^()]*\)\s*)?")
_GIVES_VALUE = re.compile(r"\s*[=(]")


def unclosed_block(failure: Failure) -> Fault | None:
    """A block that is still open where the next one, a question or the end comes."""
    if (
        failure.brace is None
        or failure.kind not in (*OPENING_KINDS, "$END")
        or "RBRACE" not in failure.accepts
    ):
        return None
    if _GIVES_VALUE.match(failure.text, failure.end):
        return None
    opening = failure.stack[failure.brace]
    head = " ".join(str(token) for token in failure.stack[failure.brace - 2 : failure.brace])
    message = f"the `{{` of `{head}` is not closed where {failure.came_in_line}"
    return Fault(
        failure.token_span(opening), message, "close it by `}`; blocks do not stand within each other"
    )


def unclosed_bracket(failure: Failure) -> Fault | None:
    """A bracket that is still open where the next entry or line begins."""
    opening = failure.open_bracket
    if opening is None or failure.kind in ("RPAR", "RSQB"):
        return None
    next_entry = failure.kind == "EQUAL" and (
        _HEAD.fullmatch(failure.head) or failure.accepts == {"COMMA", "RPAR"}
    )
    if not (next_entry or failure.opens_a_line or failure.kind in (*OPENING_KINDS, "RBRACE")):
        return None
    message = f"the `{opening}` is not closed where {failure.came_in_line}"
    return Fault(failure.token_span(opening), message, f"close it by `{_CLOSING[opening]}`")


def stray_closing(failure: Failure) -> Fault | None:
    """A closing bracket whose opening one is missing, or is another."""
    opening = {closing: opening for opening, closing in _CLOSING.items()}.get(failure.word)
    if opening is None or failure.wants_value or (opening == "{" and failure.brace is not None):
        return None
    inner = failure.open_bracket
    if inner is None:
        message = f"{failure.came}, but no `{opening}` is open"
        return Fault(failure.span, message, f"take it out, or write the `{opening}`")
    return Fault(
        failure.span, f"{failure.came} where `{inner}` is open", f"close by `{_CLOSING[inner]}` first"
    )
