"""The Fermi function against stored values of python-flint, closed forms, its mirror image and its limits."""

import math
from pathlib import Path

import mpmath
import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from eoscore.gas import fermi

# Written by make_reference.py with python-flint (Arb): rigorous balls, correctly rounded.
REFERENCE = np.load(Path(__file__).with_name("reference.npz"))
ORDERS = [-6.0, -2.5, -2.0, -0.3, 0.0, 0.5, 1.0, 1.5, 2.0, 2.3, 2.5, 3.0, 12.0, 29.5, 30.0]
orders = st.sampled_from([0.5, 1.0, 1.5, 2.0, 2.3, 2.5, 4.0, 17.5, 29.0])


def scale(s, eta, value):
    """The value, or what a rounding of eta is worth where an order below -1 changes sign."""
    if s >= -1:
        return abs(value)
    slope = abs(eta * fermi(s - 1, eta)) if s >= -5 else 0.03 * math.exp(-abs(eta)) * (abs(eta) < 9)
    return max(abs(value), slope)


def test_stored_values():
    rows = REFERENCE["kind"]
    table = zip(*(REFERENCE[name][rows].tolist() for name in ("order", "argument", "value")), strict=True)
    found = [abs(fermi(s, eta) - value) / scale(s, eta, value) for s, eta, value in table if value]
    assert max(found) < 2e-15
    assert np.median(found) < 2e-16


@pytest.mark.parametrize("s", ORDERS)
def test_arrays_and_numbers_agree(s):
    eta = np.concatenate([np.linspace(-40, 60, 500), np.geomspace(1e-9, 1e6, 50)])
    single = np.array([fermi(s, float(x)) for x in eta])
    size = np.array([scale(s, x, value) for x, value in zip(eta.tolist(), single.tolist(), strict=True)])
    assert (np.abs(fermi(s, eta) - single) <= 2e-15 * size + 5e-324).all()


@pytest.mark.parametrize(
    ("s", "closed"),
    [
        (1.0, lambda eta: np.logaddexp(0, eta)),
        (0.0, lambda eta: 1 / (1 + np.exp(-eta))),
        (-1.0, lambda eta: 0.25 / np.cosh(eta / 2) ** 2),
        (-2.0, lambda eta: -0.25 * np.tanh(eta / 2) / np.cosh(eta / 2) ** 2),
    ],
)
def test_closed_forms(s, closed):
    eta = np.concatenate([np.linspace(-60, 60, 401), [1e-12, -1e-9]])
    np.testing.assert_allclose(fermi(s, eta), closed(eta), rtol=3e-15)


def test_even_whole_orders_vanish_at_zero():
    assert fermi(-2.0, 0.0) == fermi(-4.0, 0.0) == fermi(-6, 0) == 0.0
    assert fermi(-2.0, 1e-200) == pytest.approx(-1e-200 / 8, rel=1e-15, abs=0)


@pytest.mark.parametrize("s", ORDERS)
def test_the_ends(s):
    assert fermi(s, -np.inf) == 0.0
    assert fermi(s, -700.0) == pytest.approx(np.exp(-700.0), rel=1e-15, abs=0)
    assert fermi(s, np.inf) == {True: np.inf, False: 1.0 if s == 0 else 0.0}[s > 0]
    assert np.isnan(fermi(s, [np.nan]))[0]
    assert np.isnan(fermi(s, np.nan))


@pytest.mark.parametrize("s", [0.5, 1.5, 2.0, 2.3, 3.5, 6.0])
def test_sommerfeld_limit(s):
    """eta^s / Gamma(s+1) (1 + pi^2 s (s-1) / (6 eta^2) + O(eta^-4)) (A. Sommerfeld 1928)."""
    eta = np.array([1e5, 1e8, 1e30])
    leading = eta**s / math.gamma(s + 1)
    correction = 1 + math.pi**2 * s * (s - 1) / (6 * eta**2)
    np.testing.assert_allclose(fermi(s, eta), leading * correction, rtol=1e-14)


@settings(deadline=None)
@given(s=orders, eta=st.floats(-30, 100))
def test_the_derivative_is_the_order_below(s, eta):
    step = 1e-4
    slope = (fermi(s, eta + step) - fermi(s, eta - step)) / (2 * step)
    assert slope == pytest.approx(fermi(s - 1, eta), rel=1e-7, abs=1e-11 * fermi(s, eta))


@settings(deadline=None)
@given(s=orders, eta=st.floats(-30, 100), more=st.floats(1e-3, 5))
def test_rises_with_eta(s, eta, more):
    assert fermi(s, eta + more) > fermi(s, eta)


@settings(deadline=None)
@given(n=st.integers(1, 12), eta=st.floats(0, 20))
def test_whole_orders_and_their_mirror_image(n, eta):
    """F_n(eta) + (-1)^n F_n(-eta) = 2 sum_k eta(2k) eta^(n-2k) / (n-2k)! (DLMF 25.12.13 for a whole order)."""
    even = [float(mpmath.altzeta(2 * k)) for k in range(7)]
    power = sum(2 * even[k] * eta ** (n - 2 * k) / math.factorial(n - 2 * k) for k in range(n // 2 + 1))
    rounding = 1e-15 * (fermi(n, eta) + fermi(n, -eta))  # of the difference, for odd n near eta = 0
    assert fermi(n, eta) + (-1) ** n * fermi(n, -eta) == pytest.approx(power, rel=1e-14, abs=rounding)


@settings(deadline=None)
@given(near=st.sampled_from([1, 2, 3, 5]), eta=st.floats(-20, 60))
def test_smooth_across_whole_orders(near, eta):
    assert fermi(near + 1e-10, eta) == pytest.approx(fermi(near, eta), rel=1e-8, abs=0)


def test_out_and_shape():
    eta = np.linspace(-30, 40, 30000).reshape(100, 300)
    out = np.empty_like(eta)
    fermi(1.5, eta, out=out)
    assert np.array_equal(out.T, fermi(1.5, eta.T))


def test_an_order_out_of_range_is_refused():
    with pytest.raises(ValueError, match="expected a number from -6 to 30"):
        fermi(31.0, 1.0)
