"""A number as it stands in a text: digits, uncertainty in concise notation, unit."""

from __future__ import annotations

import re
import unicodedata
from math import isfinite
from typing import TYPE_CHECKING

from eoscore.language import nodes
from eoscore.language.limits import DIGITS, FAULTS
from eoscore.language.units import known_unit, unit_faults, unit_of
from eoscore.source import Span

if TYPE_CHECKING:
    from eoscore.language.faults import Faults

_NUMBER = re.compile(
    r"(?P<digits>[0-9]+\.?[0-9]*|\.[0-9]+)(?P<early>[eE][+-]?[0-9]+)?"
    r"(?:\((?P<bracket>[0-9]+)\)(?P<late>[eE][+-]?[0-9]+)?)?(?P<stuck>\w*)(?:[ \t]+(?P<unit>.+))?"
)
_FACTOR = re.compile(r"(?P<joint>[./]?)(?P<word>°?[^\W\d]\w*)(?P<below>-[0-9]+)?")
_POWER = re.compile(r"(?P<symbol>a0|[^\W\d_]+)(?P<exponent>[1-9][0-9]?)?")
_LARGEST_EXPONENT = 99
_SUPERSCRIPT = str.maketrans("⁰¹²³⁴⁵⁶⁷⁸⁹", "0123456789")


def read_number(span: Span, faults: Faults) -> nodes.Number:
    """The node of a literal; what is wrong with it goes to `faults`, and a stand-in value is given then."""
    found = _NUMBER.fullmatch(span.text)
    if found is None or len(span.text) > DIGITS:
        shown = f"`{span.text[:12]}...`"
        faults.add(
            span, f"{shown} is a number of {len(span.text)} characters, at most {DIGITS} are read", "round it"
        )
        return nodes.Number("1", 1.0, None, None, span=span)
    if stuck := found["stuck"]:
        _tell_stuck(Span(span.source, span.start, span.start + found.end("stuck")), stuck, faults)
    elif found["early"] and found["bracket"]:
        mend = f"{found['digits']}({found['bracket']}){found['early']}"
        faults.add(
            span, "the uncertainty came after the exponent, it belongs to the digits", f"write `{mend}`"
        )
    power = found["early"] or found["late"] or ""
    sigma = _sigma(found["digits"], found["bracket"], power) if found["bracket"] else None
    unit = (
        _read_unit(Span(span.source, span.start + found.start("unit"), span.end), faults)
        if found["unit"]
        else None
    )
    text = found["digits"] + power
    number = nodes.Number(text, float(text), sigma, unit, span=span)
    _check_range(number, faults)
    return number


def _sigma(digits: str, bracket: str, power: str) -> float:
    places = len(digits.partition(".")[2])
    return float(f"{bracket}e{int(power[1:] or 0) - places}")


def _check_range(number: nodes.Number, faults: Faults) -> None:
    known = number.unit is not None and all(known_unit(symbol) for symbol, _ in number.unit.factors)
    factor = unit_of(number.unit)[0] if number.unit is not None and known else 1.0
    largest = max(number.value, number.sigma or 0.0)
    if not (isfinite(largest) and isfinite(largest * factor)):
        faults.add(
            number.span,
            f"`{number.span.text}` is beyond the largest number, about 1.8e308",
            "write a smaller one",
        )
    elif number.value * factor == 0.0 and re.search("[1-9]", number.text.lower().partition("e")[0]):
        faults.add(
            number.span,
            f"`{number.span.text}` is below the least number, about 5e-324",
            "write `0` or a larger one",
        )


def _tell_stuck(span: Span, stuck: str, faults: Faults) -> None:
    number = span.text.removesuffix(stuck)
    if stuck.startswith("_"):
        message, hint = (
            f"`{span.text}`: the digits of a number are not grouped",
            f"write `{span.text.replace('_', '')}`",
        )
    elif known_unit(stuck.rstrip("0123456789")) or known_unit(stuck):
        message = f"`{span.text}` came; between a number and its unit a space is expected"
        hint = f"write `{number} {stuck}`"
    else:
        message = (
            f"`{span.text}` came; a number ends before `{stuck}`, and nothing is multiplied without a sign"
        )
        hint = f"write `{number}*{stuck}`, or with a space before a unit"
    faults.add(span, message, hint)


def _read_unit(span: Span, faults: Faults) -> nodes.UnitText:
    factors = []
    for found in _FACTOR.finditer(span.text):
        word = found["word"]
        if word != (plain := word.translate(_SUPERSCRIPT)):
            place = Span(span.source, span.start + found.start("word"), span.start + found.end("word"))
            faults.add(
                place, f"`{word}` came; the exponent of a unit is written in plain digits", f"write `{plain}`"
            )
            word = plain
        if not word.isascii():
            word = unicodedata.normalize("NFKC", word)
        power = _POWER.fullmatch(word)
        symbol, exponent = (power["symbol"], int(power["exponent"] or 1)) if power else (word, 1)
        exponent *= int(found["below"] or 1)
        if abs(exponent) > _LARGEST_EXPONENT:
            faults.add(
                span, f"a unit with the exponent {exponent} came", f"exponents reach to {_LARGEST_EXPONENT}"
            )
            exponent = 1
        factors.append((symbol, -exponent if found["joint"] == "/" else exponent))
    unit = nodes.UnitText(tuple(factors), span=span)
    for fault in unit_faults(unit) if len(faults) < FAULTS else ():
        faults.append(fault)
    return unit
