"""Common slips that show in the signs themselves, each with its mend. The first that fits tells the fault."""

from __future__ import annotations

import re
from dataclasses import dataclass
from typing import TYPE_CHECKING, Final

from eoscore.language.faults import Fault
from eoscore.source import Span

if TYPE_CHECKING:
    from eoscore.language.failure import Failure


@dataclass(frozen=True)
class Slip:
    """A pattern at the place of a fault; `{}` in the words stands for what it matched."""

    pattern: re.Pattern[str]
    message: str
    hint: str


def _slip(pattern: str, message: str, hint: str) -> Slip:
    return Slip(re.compile(pattern), message, hint)


SLIPS: Final = (
    _slip(r"\*\*", "`**` came; a power is written with `^`", "write `x^2`"),
    _slip(
        r"\+-|\+/-|±",
        "`{}` came; an uncertainty stands in brackets after the digits",
        "write `1.50(5)` for 1.50 ± 0.05",
    ),
    _slip(
        r"(?<=[0-9])\([0-9]*\.[0-9]+\)",
        "`{}` came after a number; its uncertainty counts in its last digits",
        "write `1.50(5)` for 1.50 ± 0.05",
    ),
    _slip(
        r"==+",
        "`==` came; `=` gives a name its value, and conditions know `<`, `<=`, `>`, `>=` only",
        "write `=` or `<=`",
    ),
    _slip(r"!=|<>|≠|~=", "`{}` came; conditions know `<`, `<=`, `>`, `>=` only", "write `a < b or a > b`"),
    _slip(r"=<|≤|⩽", "`{}` came; the sign is `<=`", "write `<=`"),
    _slip(r"=>|≥|⩾", "`{}` came; the sign is `>=`", "write `>=`"),
    _slip(r":=|:", "`{}` came; a name and its value are joined by `=`", "write `name = value`"),
    _slip(
        r";",
        "`;` came; a line needs no sign at its end",
        "leave it out, and give every entry a line of its own",
    ),
    _slip(r"//|/\*|\(\*", "`{}` came; a comment starts with `#`", "write `# comment`"),
    _slip(
        r"[\"'`“”‘’«»]",
        "{} came; only the path after `use` stands in quotes",
        'leave the quotes out, or write `use "path.tarn"`',
    ),
    _slip(r"&&?|∧", "`{}` came; conditions are joined by `and`", "write `and`"),
    _slip(r"\|\||∨", "`{}` came; conditions are joined by `or`", "write `or`"),
    _slip(r"\|", "`|` came; an absolute value is a function", "write `abs(x)`"),
    _slip(r"[!¬]", "`{}` came; a condition is turned round by `not`", "write `not a < b`"),
    _slip(r"[−–—‐]", "`{}` came, which only looks like a minus sign", "write `-`"),
    _slip(
        r"[×·⋅∙•∗]",
        "`{}` came; a product is written with `*`",
        "write `*`, and `.` between the symbols of a unit",
    ),
    _slip(r"[÷∕⁄]", "`{}` came; a quotient is written with `/`", "write `/`"),
    _slip(r"[⁰¹²³⁴-⁹⁻]+", "`{}` came; a power is written with `^`", "write `x^2`"),
    _slip(r"√", "`√` came; the square root is a function", "write `sqrt(x)`"),
    _slip(r"∞", "`∞` came; every number is finite", "leave a bound out where there is none"),
    _slip(
        r"°C?",
        "`{}` came; an angle has the unit `deg`, and a temperature is absolute, in K",
        "write `45 deg` or `300 K`",
    ),
    _slip(r"%", "`%` came; a share is written as a number", "write `0.05` for 5 %"),
    _slip(r"(?<=[0-9]),[0-9]", "`,` came between digits; a number has a decimal point", "write `1.5`"),
    _slip(
        r"(?<=[0-9])\.[0-9.]*",
        "a second decimal point came in one number",
        "write one point; digits are not grouped",
    ),
    _slip(
        r"\.\.+|…",
        "`{}` came; a grid is `even(a, b, points)`, `geometric(a, b, points)` or a list",
        "write `even(1, 5, 9)`",
    ),
    _slip(
        r"\.",
        "`.` came; it stands only in numbers, units and the path after `use`",
        'quote a path: `use "path.tarn"`',
    ),
    _slip(
        r"[\u00a0\u2000-\u200d\u202f\u3000\u2028\u2029]",
        "a blank came that is not a plain space",
        "write a space",
    ),
    _slip(r"[$@?\\~]", "`{}` came, a sign that Tarn does not know", "leave it out"),
)


def slip(failure: Failure) -> Fault | None:
    """The slip that the signs at the place, or one before it, show."""
    if failure.kind == "$END":
        return None
    for known in SLIPS:
        for start in (failure.start, failure.start - 1):
            found = known.pattern.match(failure.text, start) if start >= 0 else None
            if found and found.end() > failure.start:
                place = Span(failure.source, found.start(), found.end())
                return Fault(place, known.message.format(found[0]), known.hint)
    return None
