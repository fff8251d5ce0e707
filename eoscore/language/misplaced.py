"""Words that stand where Tarn has no place for them."""

from __future__ import annotations

import re
from difflib import get_close_matches
from typing import TYPE_CHECKING, Final

from lark import Token

from eoscore.language.brackets import OPENING_KINDS
from eoscore.language.builtin import BUILTINS
from eoscore.language.faults import Fault, Faults
from eoscore.language.literal import read_number
from eoscore.language.reserved import LINE_WORDS, OPENERS, RESERVED
from eoscore.language.units import known_unit, unit_faults, unknown_unit
from eoscore.source import Span

if TYPE_CHECKING:
    from eoscore.language.failure import Failure

_GIVES_VALUE = re.compile(r"\s*[=(]")

# Words of other languages that people begin a line with, by what Tarn writes instead.
FOREIGN: Final = {
    "write `NAME(arguments) = expression`": "def function func fn lambda",
    'write `use "path.tarn"` or `use NAME`': "import include load require open",
    "write `NAME = value` alone": "let var const set param parameter float double int real",
    "ask by `find QUANTITIES for GAS in PLACE`": "print show plot solve calculate compute what",
    "declare it by `gas NAME { ... }`": "atom atoms species particle particles boson bosons",
    "declare it by `trap NAME { ... }`": "potential place box cavity lattice well",
    "there are no loops; repeat a question by `over NAME = even(a, b, points)`": "while loop repeat",
    "write the value of a function after its `=`": "return yield",
}
_MENDS: Final = {word: mend for mend, words in FOREIGN.items() for word in words.split()}


def reserved_name(failure: Failure) -> Fault | None:
    """A word of the language where a name belongs."""
    token = failure.top() if failure.kind == "EQUAL" else None
    if isinstance(token, Token) and token.type in OPENING_KINDS:
        place, word = failure.token_span(token), str(token)
    else:
        named = "NAME" in failure.accepts and _GIVES_VALUE.match(failure.text, failure.end)
        if failure.word not in RESERVED or not (named or failure.accepts == {"NAME"}):
            return None
        place, word = failure.span, failure.word
    message = f"`{word}` came where a name was expected, but it is a word of the language"
    return Fault(place, message, f"choose another name, such as `{word}_1`")


def foreign_word(failure: Failure) -> Fault | None:
    """A line that begins with a word of another language, or nearly with one of ours."""
    word = failure.entry[0] if failure.entry else None
    if not isinstance(word, Token) or word.type != "NAME" or "=" in failure.entry:
        return None
    start = word.start_pos or 0
    before = failure.text[failure.text.rfind("\n", 0, start) + 1 : start].strip()
    if before and not before.endswith("{"):
        return None
    near = get_close_matches(word.lower(), [*OPENERS, *LINE_WORDS], 1, 0.7) if len(word) < 20 else []
    mend = _MENDS.get(word.lower()) or (f"did you mean `{near[0]}`?" if near else None)
    if mend is None:
        return None
    message = f"`{word}` came, which is no word of Tarn, where a name and `=` or the next entry was expected"
    return Fault(failure.token_span(word), message, mend)


def unit_below(failure: Failure) -> Fault | None:
    """A unit alone on the line below its number."""
    unit = failure.top()
    if not (isinstance(unit, Token) and unit.type == "NAME" and known_unit(unit.rstrip("0123456789"))):
        return None
    start = unit.start_pos or 0
    if not re.search(r"[0-9.)]\s*\n\s*$", failure.text[max(start - 200, 0) : start]):
        return None
    message = f"`{unit}` came on a line of its own, a unit is expected on the line of its number"
    return Fault(failure.token_span(unit), message, "join the two lines")


def read_as_unit(failure: Failure) -> Fault | None:
    """A name that was meant to open an entry, or an argument bracket, and was read as the unit of a number."""
    token = failure.top()
    if failure.word not in ("=", "(") or not failure.is_read(1, "NUMBER"):
        return None
    unit = read_number(failure.token_span(token), Faults()).unit
    if unit is None:
        return None
    message = f"`{unit.span.text}` came after a number on its line, where it is read as a unit, and then {failure.came}"
    hint = "begin a new line before it" if failure.word == "=" else "write `*` before it for a product"
    return next(iter(unit_faults(unit)), Fault(unit.span, message, hint))


def side_by_side(failure: Failure) -> Fault | None:
    """Two values without a sign between them."""
    start, end = failure.start, failure.end
    if failure.is_read(1, "NAME") and failure.accepts == {"EQUAL", "LPAR"}:
        start = failure.top().start_pos
        end = start + len(failure.top())
    elif failure.kind not in ("NUMBER", "NAME", "LPAR", "IF") or not failure.wants_operator:
        return None
    line_start = failure.text.rfind("\n", 0, start) + 1
    left = re.search(r"(\w+|[)\]])[ \t]*$", failure.text[max(line_start, start - 80) : start])
    if left is None:
        return None
    if left[1] in RESERVED or left[1] in LINE_WORDS:  # it was taken for the unit of a number already
        word = max(line_start, start - 80) + left.start(1)
        return unknown_unit(left[1], Span(failure.source, word, word + len(left[1])))
    right = failure.text[start:end]
    hint = (
        f"write `{left[1]}({right})`" if left[1] in BUILTINS else f"write `*` before `{right}` for a product"
    )
    message = f"`{right}` came straight after `{left[1]}`; a sign or a new line was expected"
    return Fault(Span(failure.source, start, end), message, hint)
