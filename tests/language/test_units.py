"""Units and dimensions. References: SI Brochure, 9th edition (2019), tables 2, 4, 7; CODATA through SciPy."""

from __future__ import annotations

from fractions import Fraction

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy import constants as codata

from eoscore.errors import TarnError
from eoscore.language import nodes
from eoscore.language.parse import parse
from eoscore.language.units import ONE, PLAIN, PREFIXED, PREFIXES, Dimension, known_unit, unit_of

ENERGY = Dimension.of(kg=1, m=2, s=-2)


def unit(text: str) -> tuple[float, Dimension]:
    (entry,) = parse(f"a = 1 {text}").entries
    assert isinstance(entry, nodes.Definition)
    assert isinstance(entry.value, nodes.Number)
    assert entry.value.unit is not None
    return unit_of(entry.value.unit)


@pytest.mark.parametrize(
    ("text", "factor", "dimension"),
    [
        ("um", 1e-6, Dimension.of(m=1)),
        ("m/s2", 1.0, Dimension.of(m=1, s=-2)),
        ("cm-3", 1e6, Dimension.of(m=-3)),
        ("J.m2/W", 1.0, Dimension.of(m=2, s=1)),
        ("W/m2.K", 1.0, Dimension.of(kg=1, s=-3, K=1)),
        ("W/m2/K", 1.0, Dimension.of(kg=1, s=-3, K=-1)),
        ("mG", 1e-7, Dimension.of(kg=1, s=-2, A=-1)),
        ("a02", codata.value("Bohr radius") ** 2, Dimension.of(m=2)),
        ("a0-3", codata.value("Bohr radius") ** -3, Dimension.of(m=-3)),
        ("neV", 1e-9 * codata.e, ENERGY),
        ("kDa", 1e3 * codata.m_u, Dimension.of(kg=1)),
        ("u", codata.m_u, Dimension.of(kg=1)),
        ("deg", codata.pi / 180, ONE),
        ("min", 60.0, Dimension.of(s=1)),
        ("dag", 1e-2, Dimension.of(kg=1)),
        ("µK", 1e-6, Dimension.of(K=1)),
        ("Å", 1e-10, Dimension.of(m=1)),
        ("kΩ", 1e3, Dimension.of(kg=1, m=2, s=-3, A=-2)),
        ("mbar", 100.0, Dimension.of(kg=1, m=-1, s=-2)),
    ],
)
def test_factor_and_dimension(text: str, factor: float, dimension: Dimension):
    assert unit(text) == (pytest.approx(factor, rel=1e-15, abs=0), dimension)


def test_no_symbol_can_be_taken_for_another_with_a_prefix():
    every = [*PLAIN, *PREFIXED]
    readings = {symbol: [(p, s) for p in PREFIXES for s in PREFIXED if p + s == symbol] for symbol in every}
    assert {symbol for symbol, found in readings.items() if found} <= {
        "Pa",
        "cd",
        "mol",
        "min",
        "T",
        "G",
        "dag",
    }
    composed = [p + s for p in PREFIXES for s in PREFIXED]
    assert len(composed) == len(set(composed))


@pytest.mark.parametrize("symbol", ["mmin", "ku", "ma0", "kdeg", "", "kk", "degC", "h"])
def test_symbols_that_nobody_knows(symbol: str):
    assert known_unit(symbol) is None


def test_every_unknown_symbol_of_a_unit_is_told():
    with pytest.raises(TarnError, match="`foo` came") as caught:
        parse("a = 3 foo.m/bax2")
    assert len(caught.value.complaints) == 2


@pytest.mark.parametrize(
    ("dimension", "words"),
    [
        (ENERGY, "kg m2/s2 (J)"),
        (ONE, "1"),
        (Dimension.of(m=-3), "1/m3"),
        (Dimension.of(kg=1, m=-1, s=-2), "kg/m/s2 (Pa)"),
        (Dimension.of(m=Fraction(1, 2)), "m^(1/2)"),
        (Dimension.of(s=-1), "1/s (Hz)"),
    ],
)
def test_a_dimension_in_words(dimension: Dimension, words: str):
    assert str(dimension) == words


def test_only_base_units_build_a_dimension():
    with pytest.raises(TypeError, match="unknown base unit 'J'"):
        Dimension.of(J=1)


powers = st.fractions(-3, 3, max_denominator=6)
dimensions = st.builds(lambda kg, m, s: Dimension.of(kg=kg, m=m, s=s), powers, powers, powers)


@settings(deadline=None)
@given(dimensions, dimensions, powers)
def test_dimensions_form_a_vector_space(a: Dimension, b: Dimension, power: Fraction):
    assert a * b == b * a
    assert a * b / b == a
    assert (a * b) ** power == a**power * b**power
    assert hash(a * ONE) == hash(a)
    assert bool(a) == (a != ONE)
