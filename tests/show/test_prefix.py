"""Numbers as people write them."""

from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from eoscore.language.parse import parse
from eoscore.show.prefix import fitting, quantity, written


@pytest.mark.parametrize(
    ("value", "unit", "sigma", "shown"),
    [
        (7.03e-7, "K", 1.4e-8, "703(14) nK"),  # the concise notation of the GUM, 7.2.2
        (7.03e-7, "K", None, "703 nK"),
        (1.25e3, "Hz", None, "1.25 kHz"),
        (0.0, "K", None, "0 K"),
        (-6.6e-6, "m", None, "-6.6 µm"),
        (1.38e-29, "J", None, "1.38e-29 J"),
        (0.42, "1", None, "0.42"),
        (0.42, "1", 0.031, "0.420(31)"),
        (2e20, "m^-3", None, "2e20 m^-3"),
        (4.24e4, "1", 3.4e3, "4.24(34)e4"),
        (3.991e-7, "K", 9.4e-9, "399.1(94) nK"),  # counted in the last digits, as Tarn reads it
        (4e-7, "K", 1e-7, "4.0(10)e2 nK"),
        (1e-30, "m", None, "1e-30 m"),
        (math.nan, "K", None, "- K"),
        (999.9996e-9, "K", None, "1000 nK"),
    ],
)
def test_quantities_read_well(value, unit, sigma, shown):
    assert quantity(value, unit, sigma) == shown


@given(st.floats(1e-30, 1e30), st.floats(1e-6, 10.0))
def test_tarn_reads_back_what_is_written_with_a_deviation(value, share):
    sigma = share * value
    (entry,) = parse(f"a = {written(value, sigma)}").entries
    assert entry.value.sigma == pytest.approx(sigma, rel=0.051)
    assert entry.value.value == pytest.approx(value, abs=0.051 * sigma)


@given(st.floats(1e-15, 1e14))
def test_a_prefixed_number_lies_between_one_and_a_thousand(size):
    factor, unit = fitting(size, "K")
    assert unit.endswith("K")
    assert 1 - 1e-9 <= size / factor < 1000 * (1 + 1e-9)


@given(st.floats(-1e300, 1e300, allow_nan=False))
def test_six_digits_are_kept(value):
    assert float(written(value)) == pytest.approx(value, rel=5.1e-6, abs=0)
