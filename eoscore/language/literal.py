"""A number as it stands in a text: digits, uncertainty in concise notation, unit."""

from __future__ import annotations

import re
import unicodedata
from math import isfinite
from typing import TYPE_CHECKING

from eoscore.language import nodes
from eoscore.language.limits import DIGITS
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
        message = f"a number of {len(span.text)} characters came, at most {DIGITS} are read"
        faults.add(span, message, "round it to the digits that are known")
        return nodes.Number("1", 1.0, None, None, span=span)
    if stuck := found["stuck"]:
        _tell_stuck(Span(span.source, span.start, span.start + found.end("stuck")), stuck, faults)
    elif found["early"] and found["bracket"]:
        message = f"`{span.text}` came; the uncertainty belongs to the digits, before the exponent"
        faults.add(span, message, f"write `{found['digits']}({found['bracket']}){found['early']}`")
    power = found["early"] or found["late"] or ""
    sigma = _sigma(found["digits"], found["bracket"], power) if found["bracket"] else None
    unit = _read_unit(_within(span, found, "unit"), faults) if found["unit"] else None
    text = found["digits"] + power
    number = nodes.Number(text, float(text), sigma, unit, span=span)
    _check_range(number, faults)
    return number


def _within(span: Span, found: re.Match[str], group: str) -> Span:
    return Span(span.source, span.start + found.start(group), span.start + found.end(group))


def _sigma(digits: str, bracket: str, power: str) -> float:
    places = len(digits.partition(".")[2])
    return float(f"{bracket}e{int(power[1:] or 0) - places}")


def _check_range(number: nodes.Number, faults: Faults) -> None:
    factor = 1.0
    if number.unit is not None and not unit_faults(number.unit):
        factor = unit_of(number.unit)[0]
    largest = max(number.value, number.sigma or 0.0)
    if not (isfinite(largest) and isfinite(largest * factor)):
        message = f"`{number.span.text}` came, which is beyond the largest number, about 1.8e308"
        faults.add(number.span, message, "write a smaller number, or another prefix of its unit")
    elif number.value * factor == 0.0 and re.search("[1-9]", number.text.lower().partition("e")[0]):
        message = f"`{number.span.text}` came, which is below the least number, about 5e-324"
        faults.add(number.span, message, "write `0`, or another prefix of its unit")


def _tell_stuck(span: Span, stuck: str, faults: Faults) -> None:
    number = span.text.removesuffix(stuck)
    if stuck.startswith("_"):
        message = f"`{span.text}` came; the digits of a number are not grouped"
        hint = f"write `{span.text.replace('_', '')}`"
    elif known_unit(stuck.rstrip("0123456789")) or known_unit(stuck):
        message = f"`{span.text}` came; between a number and its unit a space is expected"
        hint = f"write `{number} {stuck}`"
    else:
        message = f"`{span.text}` came; a number ends before `{stuck}`, and a product wants a sign"
        hint = f"write `{number}*{stuck}`, or a space before a unit"
    faults.add(span, message, hint)


def _read_unit(span: Span, faults: Faults) -> nodes.UnitText:
    factors = tuple(_read_factor(span, found, faults) for found in _FACTOR.finditer(span.text))
    unit = nodes.UnitText(factors, span=span)
    for fault in unit_faults(unit):
        faults.append(fault)
    return unit


def _read_factor(span: Span, found: re.Match[str], faults: Faults) -> tuple[str, int]:
    word = found["word"]
    plain = word if word.isascii() else word.translate(_SUPERSCRIPT)
    if plain != word:
        message = f"`{word}` came; the exponent of a unit is written in plain digits"
        faults.add(_within(span, found, "word"), message, f"write `{plain}`")
    power = _POWER.fullmatch(unicodedata.normalize("NFKC", plain))
    symbol, exponent = (power["symbol"], int(power["exponent"] or 1)) if power else (plain, 1)
    exponent *= int(found["below"] or 1)
    if abs(exponent) > _LARGEST_EXPONENT:
        message = f"a unit with the exponent {exponent} came"
        faults.add(span, message, f"exponents reach to {_LARGEST_EXPONENT}")
        exponent = 1
    return symbol, -exponent if found["joint"] == "/" else exponent
