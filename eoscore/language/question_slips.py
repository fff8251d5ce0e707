"""Slips in questions, and in the lines of a block that begin with a word."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING

from eoscore.language.faults import Fault
from eoscore.source import Span

if TYPE_CHECKING:
    from eoscore.language.failure import Failure

_BARE = re.compile(r"\s*use\s+(['‘“]?[\w./\\ -]*[./\\-][\w./\\ -]*[\"'’”]?|['‘“]\w+['’”]?)\s*$")
_NUCLIDE = re.compile(r"\s*(?:([0-9]{1,3})\s*-?\s*([A-Z][a-z]?)\b|([A-Z][a-z]?)\s*-?\s*([0-9]{1,3}))")


def missing_gas(failure: Failure) -> Fault | None:
    """A question that names no gas."""
    question = failure.question
    if question is None or "FOR" not in failure.accepts or failure.kind == "FOR":
        return None
    if failure.kind in ("NAME", "NUMBER") and not failure.opens_a_line:
        message = f"{failure.came} between the quantities of a question; a comma or `for` was expected"
        return Fault(failure.span, message, f"write `{question} T_c, f_0 for GAS`")
    if failure.kind not in ("IN", "FROM", "WITH", "OVER") and not failure.opens_a_line:
        return None
    message = f"{failure.came}, but `{question}` does not say yet for which gas"
    return Fault(failure.span, message, f"write `{question} ... for GAS`, before `in`, `with` and `over`")


def strange_part(failure: Failure) -> Fault | None:
    """A word after a question that opens none of its parts."""
    word = failure.top()
    if not (failure.is_read(1, "NAME") and failure.accepts == {"EQUAL", "LPAR"}):
        return None
    start = word.start_pos
    before = failure.text[failure.text.rfind("\n", 0, start) + 1 : start]
    if not re.match(r"\s*(find|derive)\b", before):
        return None
    message = f"`{word}` came in a question; `in`, `from`, `with`, `over` or a new line was expected"
    mend = "give conditions by `with NAME = value, ...`, a grid by `over NAME = even(a, b, points)`"
    return Fault(failure.token_span(word), message, mend)


def missing_equals(failure: Failure) -> Fault | None:
    """A condition without its `=`."""
    if failure.accepts != {"EQUAL"} or failure.question is None:
        return None
    name = failure.top()
    hint = f"write `{name} = value`"
    return Fault(failure.span, f"{failure.came} where `=` was expected after `{name}`", hint)


def strange_span(failure: Failure) -> Fault | None:
    """After `over NAME =` something that is no span of values."""
    if failure.accepts == {"NAME", "LSQB"} or (failure.accepts == {"LPAR"} and failure.question):
        message = f"{failure.came} where a span of values was expected"
        return Fault(
            failure.span, message, "write `even(a, b, points)`, `geometric(a, b, points)` or `[a, b, ...]`"
        )
    return None


def strange_nuclide(failure: Failure) -> Fault | None:
    """An isotope in another spelling."""
    if failure.accepts != {"NUCLIDE"}:
        return None
    found = _NUCLIDE.match(failure.text, failure.start)
    meant = f"{found[2] or found[3]}-{found[1] or found[4]}" if found else "Sr-84"
    message = f"{failure.came} where a nuclide was expected: symbol, `-`, mass number"
    return Fault(failure.span, message, f"write `isotope {meant}`")


def bare_path(failure: Failure) -> Fault | None:
    """A path after `use` that is not in double quotes."""
    line = failure.text[failure.line_start :].split("\n", 1)[0]
    found = _BARE.match(line)
    if not found or failure.start >= failure.line_start + found.end():
        return None
    path = found[1].strip("'\"‘’“”")
    message = f"`{found[1]}` came after `use`; a path stands in double quotes"
    start = failure.line_start + found.start(1)
    return Fault(Span(failure.source, start, start + len(found[1])), message, f'write `use "{path}"`')


def comparison(failure: Failure) -> Fault | None:
    """Order relations where a value belongs, or a chain of them; a value where a condition belongs."""
    order = ("LESSTHAN", "AT_MOST", "MORETHAN", "AT_LEAST")
    if failure.kind in order:
        if any(failure.is_read(below, *order) for below in (2, 3)) or "AND" in failure.accepts:
            return Fault(failure.span, f"{failure.came} after another comparison", "write `a < x and x < b`")
        return Fault(
            failure.span, f"{failure.came} where a value was expected", "choose by `if(a < b, value, other)`"
        )
    if set(order) <= failure.accepts and not failure.wants_value:
        message = (
            f"{failure.came}, but a condition was expected: two values with `<`, `<=`, `>` or `>=` between"
        )
        return Fault(failure.span, message, "write `if(a < b, value, other)`, or `where a < b`")
    return None
