"""Hostile texts end within seconds and below 1 GB with a complaint. Sizes stand just below and above the limits."""

from __future__ import annotations

import resource
import time

import pytest

from eoscore.errors import TarnError
from eoscore.language.limits import DEPTH, WORDS
from eoscore.language.parse import parse

MANY = 10_000  # below the limit of words, so that these are read to their end

HOSTILE = {
    "brackets": "a = " + "(" * 100_000 + "1" + ")" * 100_000,
    "some brackets": "a = " + "(" * MANY + "1" + ")" * MANY,
    "open brackets": "a = " + "(" * MANY,
    "minus signs": "a = " + "-" * 30_000 + "1",
    "powers": "a = " + "^".join("9" * MANY),
    "a sum": "a = " + "+".join("1" * 200_000),
    "some sum": "a = " + "+".join("x" * MANY),
    "conditions": "a(x) = 1 where " + " or ".join(["x < 1"] * (MANY // 4)),
    "choices": "a = " + "if(x<1,1," * 6_000 + "2" + ")" * 6_000,
    "calls": "a = " + "f(" * MANY + "1" + ")" * MANY,
    "blocks": "gas a {\n" * (MANY // 2),
    "blocks in blocks": "gas a { dispersion b {\n" * (MANY // 4),
    "entries": "".join(f"a{i} = 1\n" for i in range(100_000)),
    "faulty units": "".join(f"a{i} = 1 ux{i}\n" for i in range(MANY // 4)),
    "faulty units in one line": "a = " + " + ".join(f"1 ux{i}" for i in range(MANY // 4)),
    "faulty names": "a = " + " + ".join(f"б{i}" for i in range(MANY // 4)),
    "faulty lines": "a = 1 1\n" * (MANY // 2),
    "closing brackets": "}" * 99_000,
    "semicolons": ";" * 99_000,
    "a long line": "a = " + "x" * 5_000_000,
    "a long name": "a = " + "x" * 900_000 + " y",
    "a long number": "a = " + "1" * 10**6,
    "a long exponent": "a = 1e" + "9" * 900_000,
    "a long unit": "a = 1 " + "m." * 90_000 + "m",
    "a long unit exponent": "a = 1 m" + "9" * 500,
    "a long uncertainty": "a = 1(" + "9" * 500_000 + ")",
    "infinity": "a = 1e999",
    "an uncertain infinity": "a = 1(9)e308",
    "nul bytes": b"a = 1\0\0\0",
    "no utf-8": b"a = \xc3\x28\xff",
    "much that is no utf-8": b"\xff" * 5_000_000,
    "surrogates": "a = \ud83d",
    "bells": "\a" * 1000,
}


@pytest.mark.parametrize("text", HOSTILE.values(), ids=HOSTILE)
def test_a_hostile_text_ends_in_a_complaint(text: str | bytes):
    started = time.process_time()
    with pytest.raises(TarnError, match=r".") as caught:
        parse(text)
    assert 1 <= len(caught.value.complaints) <= 100
    assert all(complaint.hint for complaint in caught.value.complaints)
    assert time.process_time() - started < 10
    assert resource.getrusage(resource.RUSAGE_SELF).ru_maxrss < 1_000_000  # kB


@pytest.mark.parametrize(
    "text",
    [
        "a = " + "(" * DEPTH + "1" + ")" * DEPTH,
        "a = " + "+".join("x" * DEPTH),
        "a = max(" + ", ".join("x" * 10_000) + ")",
        "\n".join(f"a{i} = {i}.5 um" for i in range(5_000)),
        "#" + " x" * (WORDS // 2),
    ],
    ids=["brackets", "sum", "arguments", "entries", "comment"],
)
def test_what_is_within_the_limits_is_read(text: str):
    assert parse(text).span.text == text


def test_equal_trees_of_the_greatest_depth_can_be_compared_and_hashed():
    text = "a = " + "-(" * (DEPTH // 2 - 1) + "1" + ")" * (DEPTH // 2 - 1)
    assert parse(text) == parse(text)
    assert hash(parse(text)) == hash(parse(text))
