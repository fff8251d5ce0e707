"""The language reference: every example is read, every list is the one the program knows."""

from __future__ import annotations

import re
from importlib.resources import files

import pytest

from eoscore.errors import TarnError
from eoscore.language import limits
from eoscore.language.builtin import BUILTINS
from eoscore.language.include import shelf_files
from eoscore.language.parse import parse
from eoscore.language.quantities import CONDITIONS, QUANTITIES
from eoscore.language.reserved import RESERVED
from eoscore.language.scope import constant_scope
from eoscore.language.units import PLAIN, PREFIXED, PREFIXES
from eoscore.language.writer import write

REFERENCE = files("eoscore.grammar").joinpath("README.md").read_text(encoding="utf-8")
EXAMPLES = re.findall(r"^```tarn\n(.*?)^```", REFERENCE, re.MULTILINE | re.DOTALL)


@pytest.mark.parametrize("example", EXAMPLES, ids=lambda example: example.splitlines()[0])
def test_every_example_is_read_and_written_back(example: str):
    file = parse(example)
    assert file.entries
    assert parse(write(file)) == file


@pytest.mark.parametrize(
    ("title", "known"),
    [
        ("reserved", RESERVED),
        ("units with prefixes", PREFIXED),
        ("units without prefixes", PLAIN),
        ("prefixes", PREFIXES),
        ("constants", constant_scope().names),
        ("functions", BUILTINS),
        ("conditions", CONDITIONS),
    ],
)
def test_a_list_is_complete(title: str, known: dict[str, object] | frozenset[str]):
    listed = REFERENCE.split(f"<!-- {title} -->\n")[1].split("\n\n")[0]
    assert sorted(re.findall(r"`([^`]+)`", listed)) == sorted(known)


@pytest.mark.parametrize("shelf", shelf_files())
def test_the_functions_of_a_shelf_are_listed_with_their_arguments(shelf: str):
    listed = REFERENCE.split(f"<!-- shelf {shelf} -->\n")[1].split("\n\n")[0]
    file = parse(shelf_files()[shelf].read_bytes())
    heads = [write(entry).split(" = ")[0] for entry in file.entries]
    assert re.findall(r"`([^`]+)`", listed) == heads


def test_the_table_of_quantities_is_complete():
    table = REFERENCE.split("<!-- quantities -->")[1].split("\n\n")[1]
    assert set(re.findall(r"^\| `(\w+)`", table, re.MULTILINE)) == set(QUANTITIES)


def test_the_limits_are_those_of_the_reader():
    for number in (limits.CHARACTERS, limits.WORDS, limits.DEPTH, limits.DIGITS, limits.FAULTS):
        assert f"{number:,}" in REFERENCE.split("## Limits")[1]


def test_the_complaint_is_shown_as_it_is_made():
    with pytest.raises(TarnError, match="`khz` came") as caught:
        parse("\n\nfreq_1 = 2 khz", "lab.tarn")
    assert str(caught.value) in REFERENCE
