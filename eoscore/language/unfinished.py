"""What the grammar would have taken, in the reader's words: the last word where no slip is known."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING, Final

from eoscore.language.faults import Fault
from eoscore.source import Span

if TYPE_CHECKING:
    from eoscore.language.failure import Failure

_HEAD = re.compile(r"[^\W\d]\w*\s*(?:\([^()]*\)\s*)?")
_JOINED: Final = frozenset("+-*/^=,<>")

_SIGNS: Final = {
    "EQUAL": "`=`", "LPAR": "`(`", "RPAR": "`)`", "LBRACE": "`{`", "RBRACE": "`}`", "LSQB": "`[`", "RSQB": "`]`",
    "COMMA": "`,`", "NAME": "a name", "NUCLIDE": "a nuclide such as `Sr-84`", "PATH": 'a path such as `"lab.tarn"`',
}  # fmt: skip
# Types of tokens that come together, and the words for them; each takes its types away from those that follow.
_TOGETHER: Final = (
    ({"NUMBER", "NAME", "LPAR", "MINUS", "IF"}, "a value (a number, a name, a function or a bracket)"),
    ({"PLUS", "MINUS"}, "an operator"),
    ({"STAR", "SLASH"}, ""),
    ({"CIRCUMFLEX"}, ""),
    ({"LESSTHAN", "AT_MOST", "MORETHAN", "AT_LEAST"}, "a comparison"),
    ({"GAS", "TRAP", "STATES", "USE", "FIND", "DERIVE", "NAME", "$END"}, "the next entry"),
    (
        {"ISOTOPE", "STATISTICS", "TREATMENT", "DISPERSION", "LEVELS", "ANCHOR", "NAME"},
        "the next line of the block",
    ),
)


def expected(accepts: frozenset[str]) -> str:
    """The words for a set of token types."""
    left, words = set(accepts), []
    for kinds, word in _TOGETHER:
        if kinds <= left:
            left -= kinds
            words += [word] if word else []
    words += [_SIGNS.get(kind, f"`{kind.lower()}`") for kind in sorted(left)]
    return words[0] if len(words) == 1 else f"{', '.join(words[:-1])} or {words[-1]}"


def unexpected(failure: Failure) -> Fault:
    """The general complaint: what came, and what was expected."""
    return Fault(
        failure.span, f"{failure.came} where {expected(failure.accepts)} was expected", _hint(failure)
    )


def line_above(failure: Failure) -> Fault | None:
    """An entry that begins where the line above still waits for a value."""
    end = failure.line_start
    while end > 0 and failure.text[end - 1].isspace():
        end -= 1
    if (
        failure.kind != "EQUAL"
        or not _HEAD.fullmatch(failure.head)
        or failure.text[end - 1 : end] not in _JOINED
    ):
        return None
    sign = failure.text[end - 1 : end]
    message = f"the line ends with `{sign}`, and a value was expected after it, but `{failure.head} =` came"
    return Fault(
        Span(failure.source, end - 1, end), message, f"write the value after `{sign}`, or take the sign out"
    )


def _hint(failure: Failure) -> str:
    last = str(failure.top() or "")
    if failure.wants_value:
        return _value_hint(failure)
    for fits, hint in (
        (failure.is_read(1, "GAS", "TRAP", "STATES"), f"write `{last} NAME {{ ... }}`"),
        (failure.is_read(2, "GAS", "TRAP", "STATES"), f"write `{failure.top(2)} {last} {{ ... }}`"),
        (failure.is_read(1, "FIND", "DERIVE"), f"write `{last} QUANTITIES for GAS in PLACE`"),
        (failure.accepts == {"NAME"}, f"write a name after `{last}`"),
        (failure.is_read(1, "IF"), "write `if(condition, a, b)`"),
        (failure.accepts <= {"EQUAL", "LPAR"}, "write `NAME = value`, or a sign before the name"),
        (failure.kind == "EQUAL", "give one name one value; conditions compare by `<`, `<=`, `>`, `>=`"),
        (failure.kind == "COMMA", "give every entry a line of its own, without a comma"),
        (failure.kind in ("LBRACE", "LSQB"), "expressions have round brackets only"),
        (
            not failure.entry,
            "begin a line with the name it defines, or with gas, trap, states, use, find or derive",
        ),
    ):
        if fits:
            return hint
    return "leave it out, or begin a new line"


def _value_hint(failure: Failure) -> str:
    if failure.kind == "PLUS":
        return "leave the `+` out: a number without a sign is positive"
    if failure.kind == "LSQB":
        return "a list stands only in a grid: `over NAME = [a, b, ...]`"
    before = failure.text[: failure.behind][-1:]
    return f"write the value after `{before}`"
