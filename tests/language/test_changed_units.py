"""Writing the same quantity in another unit changes no bound value."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from .labs import program

# Units of one quantity with their powers of ten against the first.
FAMILIES = {
    "length": {"m": 0, "mm": -3, "um": -6, "nm": -9, "km": 3, "angstrom": -10},
    "power": {"W": 0, "mW": -3, "kW": 3, "J/s": 0, "V.A": 0},
    "field": {"T": 0, "mT": -3, "G": -4, "kG": -1, "Wb/m2": 0},
    "rate": {"Hz": 0, "kHz": 3, "MHz": 6, "s-1": 0, "ms-1": 3},
    "area": {"m2": 0, "mm2": -6, "um2": -12, "cm2": -4},
    "pressure": {"Pa": 0, "bar": 5, "mbar": 2, "N/m2": 0, "J.m-3": 0},
}
digits = st.integers(1, 10**9).map(str)


@st.composite
def pairs(draw: st.DrawFn) -> tuple[str, str]:
    """One quantity written in two units."""
    family = FAMILIES[draw(st.sampled_from(sorted(FAMILIES)))]
    first, second = draw(st.sampled_from(sorted(family))), draw(st.sampled_from(sorted(family)))
    number, power = draw(digits), draw(st.integers(-12, 12))
    return f"{number}e{power} {first}", f"{number}e{power + family[first] - family[second]} {second}"


@given(pairs())
def test_two_spellings_of_a_quantity_are_one_value(pair):
    lab = program(f"a = {pair[0]}\nb = {pair[1]}\nratio = a/b\ngas g {{ m = 1 u }}").bind("g", None)
    assert lab.value("ratio")[0] == pytest.approx(1.0, rel=1e-15, abs=0)
    assert lab.value("a")[1] == lab.value("b")[1]


@given(st.integers(1, 10**6), st.integers(0, 999), st.sampled_from(["um", "nK", "ms", "pW", "mm2"]))
def test_a_literal_is_the_double_nearest_to_what_is_written(whole, part, unit):
    power = {"um": -6, "nK": -9, "ms": -3, "pW": -12, "mm2": -6}[unit]
    lab = program(f"a = {whole}.{part:03} {unit}\ngas g {{ m = 1 u }}").bind("g", None)
    assert lab.value("a")[0] == float(f"{whole}.{part:03}e{power}")
