"""Every name of the language is explained, and nothing else is."""

from __future__ import annotations

import re
from pathlib import Path

import pytest

import eoscore
from eoscore.gas.registry import dispersion_names
from eoscore.language.builtin import BUILTINS
from eoscore.language.quantities import DERIVED, QUANTITIES
from eoscore.language.reserved import LINE_WORDS, RESERVED
from eoscore.language.scope import constant_scope
from eoscore.language.units import PLAIN, PREFIXED
from eoscore.show.glossary import entries_of, glossary, near_names
from eoscore.show.glossary.cautions import CAUTIONS
from eoscore.show.glossary.constants import CONSTANTS
from eoscore.show.glossary.functions import FUNCTIONS
from eoscore.show.glossary.quantities import DERIVED_ONLY
from eoscore.show.glossary.quantities import QUANTITIES as TOLD
from eoscore.show.glossary.units import UNITS
from eoscore.show.glossary.words import WORDS


@pytest.mark.parametrize(
    ("told", "known"),
    [
        (FUNCTIONS, BUILTINS),
        (CONSTANTS, constant_scope().names),
        (UNITS, PLAIN | PREFIXED),
    ],
    ids=["functions", "constants", "units"],
)
def test_a_table_tells_what_the_language_knows(told, known):
    assert set(told) == set(known)


def test_every_quantity_is_told():
    assert set(QUANTITIES) <= set(TOLD)
    assert all(entries_of(name)[0].kind == "quantity" for name in QUANTITIES)


def test_words_and_derived_quantities_are_told():
    assert RESERVED | set(LINE_WORDS) <= set(WORDS)
    assert set(DERIVED) <= set(TOLD) | set(DERIVED_ONLY)
    assert set(dispersion_names()) <= set(glossary())


def test_every_code_of_a_caution_is_told():
    """The codes are those written in the answer room, read from its source."""
    answers = Path(eoscore.__file__).parent / "answer"
    text = "".join(path.read_text() for path in answers.rglob("*.py"))
    assert set(re.findall(r'Caution\(\s*"(\w+)"', text)) == set(CAUTIONS)


@pytest.mark.parametrize("name", ["T_c", "PSD", "besselj", "m_u", "gaussian_beam", "relativistic", "loop_z"])
def test_an_entry_has_a_formula_and_a_source(name):
    (entry,) = entries_of(name)
    assert entry.meaning
    assert entry.formula
    assert entry.source


@pytest.mark.parametrize(
    ("name", "kinds"),
    [
        ("h", ["constant"]),
        ("T", ["quantity", "unit"]),
        ("nK", ["unit with a prefix"]),
        ("min", ["function min(a, b, ...)", "unit"]),
        ("shallow", ["caution"]),
        ("levitation_gradient", ["shelf function (use optics)"]),
        ("over", ["word of Tarn"]),
    ],
)
def test_a_name_has_its_kinds(name, kinds):
    assert [entry.kind for entry in entries_of(name)] == kinds


@pytest.mark.parametrize(
    ("name", "near"), [("tc", "T_c"), ("gaussian", "gaussian_beam"), ("elipk", "ellipk"), ("K_B", "k_B")]
)
def test_an_unknown_name_has_near_ones(name, near):
    assert not entries_of(name)
    assert near in near_names(name)


@pytest.mark.parametrize("name", ["light_shift", "loop_rho", "moment", "rayleigh_range"])
def test_a_shelf_function_tells_its_source_apart(name):
    (entry,) = entries_of(name)
    assert not re.search(r"\(\d{4}\)", entry.meaning)
    assert re.search(r"\d", entry.source)
