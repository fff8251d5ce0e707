"""Numbers with uncertainty in concise notation (GUM, JCGM 100:2008, 7.2.2; SI Brochure, 5.4.5)."""

from __future__ import annotations

import pytest

from eoscore.language import nodes
from eoscore.language.parse import parse


def number(text: str) -> nodes.Number:
    (entry,) = parse(f"a = {text}").entries
    assert isinstance(entry, nodes.Definition)
    assert isinstance(entry.value, nodes.Number)
    return entry.value


@pytest.mark.parametrize(
    ("text", "value", "sigma"),
    [
        ("120", 120.0, None),
        ("120(2)", 120.0, 2.0),
        ("1.50(5)", 1.5, 0.05),
        ("1.50(12)", 1.5, 0.12),
        ("2.1(3)e5", 2.1e5, 3e4),
        ("6.02e23", 6.02e23, None),
        ("1e-7", 1e-7, None),
        (".5", 0.5, None),
        ("5.", 5.0, None),
        ("3(0)", 3.0, 0.0),
        ("0", 0.0, None),
        ("0e999", 0.0, None),
    ],
)
def test_value_and_sigma(text: str, value: float, sigma: float | None):
    assert (number(text).value, number(text).sigma) == (value, sigma)


@pytest.mark.parametrize(
    ("text", "factors"),
    [
        ("45 um", (("um", 1),)),
        ("45(1)\tum", (("um", 1),)),
        ("2.1e-36 J.m2/W", (("J", 1), ("m", 2), ("W", -1))),
        ("1 W/m2.K", (("W", 1), ("m", -2), ("K", 1))),
        ("1 a0-3", (("a0", -3),)),
        ("1 s/m-3", (("s", 1), ("m", 3))),
    ],
)
def test_the_unit_stays_as_written(text: str, factors: tuple[tuple[str, int], ...]):
    unit = number(text).unit
    assert unit is not None
    assert unit.factors == factors


@pytest.mark.parametrize("word", ["for", "in", "with", "over", "from", "where", "at", "and", "or", "not"])
def test_a_keyword_is_never_a_unit(word: str):
    texts = {
        "in": "derive g for x with N = 1 \nfind g for x",
        "where": "a(x) = 1 where x < 2",
        "at": "states s { anchor N_c = 1 at T = 1 K }",
        "and": "a(x) = 1 where x < 1 and x < 2",
        "or": "a(x) = 1 where x < 1 or x < 2",
        "over": "find g for x with N = 1 over b = [1]",
    }
    assert parse(texts.get(word, "a = 1")).entries
