"""Functions whose integral stops at an upper energy: against mpmath quadrature, limits and identities."""

import math

import mpmath
import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from eoscore.gas import (
    bose,
    bose_log_truncated,
    bose_truncated,
    classical_truncated,
    fermi,
    fermi_log_truncated,
    fermi_truncated,
)

orders = st.sampled_from([0.5, 1.0, 1.5, 2.0, 2.25, 3.0, 4.5, 9.0])
tops = st.floats(1e-6, 60)


def quadrature(occupation, s, x, marks=()):
    """1/Gamma(s) int_0^x t^(s-1) occupation(t) dt by mpmath, in units of x so that small results keep their digits."""
    with mpmath.workdps(25):
        cuts = [0, *sorted(mark / x for mark in marks if 0 < mark < x), 1]
        total = mpmath.quad(lambda y: y ** (mpmath.mpf(s) - 1) * occupation(x * y), cuts)
        return float(total * mpmath.mpf(x) ** s / mpmath.gamma(s))


@pytest.mark.parametrize("s", [0.5, 1.5, 2.0, 2.0 + 1e-9, 4.7, 9.5])
@pytest.mark.parametrize("alpha", [1e-7, 0.03, 0.2499, 0.2501, 2.0, 9.0])
@pytest.mark.parametrize("x", [1e-5, 0.3, 0.99, 7.9])
def test_bose_against_quadrature(s, alpha, x):
    exact = quadrature(lambda t: 1 / mpmath.expm1(t + alpha), s, x, (alpha / 10, alpha, 10 * alpha, 0.1, 1))
    assert bose_truncated(s, alpha, x) == pytest.approx(exact, rel=3e-14, abs=0)


@pytest.mark.parametrize("s", [0.5, 1.5, 2.0, 5.2])
@pytest.mark.parametrize(
    ("eta", "x"), [(-3, 1e-4), (-3, 5), (4, 3), (4, 11.5), (20, 19), (20, 27), (70, 50), (70, 75)]
)
def test_fermi_against_quadrature(s, eta, x):
    exact = quadrature(lambda t: 1 / (mpmath.exp(t - eta) + 1), s, x, (1, 5, eta - 20, eta - 5, eta, eta + 4))
    assert fermi_truncated(s, eta, x) == pytest.approx(exact, rel=3e-14, abs=0)


@pytest.mark.parametrize("s", [0.5, 1.5, 3.0])
def test_logarithms_against_quadrature(s):
    bosons = quadrature(lambda t: -mpmath.log(-mpmath.expm1(-(t + 0.1))), s, 2.5, (0.01, 0.1, 1))
    fermions = quadrature(lambda t: mpmath.log1p(mpmath.exp(4 - t)), s, 2.5, (1,))
    assert bose_log_truncated(s, 0.1, 2.5) == pytest.approx(bosons, rel=1e-14, abs=0)
    assert fermi_log_truncated(s, 4, 2.5) == pytest.approx(fermions, rel=1e-14, abs=0)


@settings(deadline=None)
@given(s=orders, alpha=st.floats(1e-9, 20))
def test_without_an_end_it_is_the_whole_function(s, alpha):
    assert bose_truncated(s, alpha, np.inf) == pytest.approx(bose(s, alpha), rel=1e-15, abs=0)
    assert bose_log_truncated(s, alpha, np.inf) == pytest.approx(bose(s + 1, alpha), rel=1e-15, abs=0)
    assert bose_truncated(s, alpha, 60.0) == pytest.approx(bose(s, alpha), rel=1e-14, abs=0)


@settings(deadline=None)
@given(s=orders, eta=st.floats(-20, 30))
def test_without_an_end_it_is_the_whole_fermi_function(s, eta):
    assert fermi_truncated(s, eta, np.inf) == pytest.approx(fermi(s, eta), rel=1e-15, abs=0)
    assert fermi_truncated(s, eta, 100.0) == pytest.approx(fermi(s, eta), rel=1e-14, abs=0)


@settings(deadline=None)
@given(s=orders, alpha=st.floats(1e-9, 5))
def test_a_low_end_sees_a_constant_occupation(s, alpha):
    """To first order x^s / Gamma(s+1) / (e^alpha - 1), the next is x / alpha smaller."""
    x = 1e-14 * alpha
    leading = x**s / math.gamma(s + 1) / math.expm1(alpha)
    assert bose_truncated(s, alpha, x) == pytest.approx(leading, rel=1e-12, abs=0)


@pytest.mark.parametrize("s", [0.5, 1.5, 2.0, 2.5, 4.0])
@pytest.mark.parametrize("seam", [1.0, 2.0, 4.0, 8.0])
def test_no_step_at_the_seams(s, seam):
    x = seam * (1 + np.array([-1e-13, 1e-13]))
    for found in (bose_truncated(s, 0.1, x), fermi_truncated(s, -1.0, x)):
        assert found[1] == pytest.approx(found[0], rel=2e-12, abs=0)


@settings(deadline=None)
@given(s=orders, alpha=st.floats(1e-6, 10), x=tops)
def test_a_dilute_gas_is_classical(s, alpha, x):
    dilute = math.exp(-40) * classical_truncated(s, x)
    assert bose_truncated(s, 40.0, x) == pytest.approx(dilute, rel=3e-14, abs=0)  # the accuracy they promise
    assert fermi_truncated(s, -40.0, x) == pytest.approx(dilute, rel=3e-14, abs=0)


@settings(deadline=None)
@given(s=orders, alpha=st.floats(1e-6, 10), x=tops, more=st.floats(1.01, 3))
def test_monotone(s, alpha, x, more):
    assert bose_truncated(s, alpha, x) <= bose_truncated(s, alpha, x * more) * (1 + 1e-14)
    assert bose_truncated(s, alpha * more, x) < bose_truncated(s, alpha, x)


@pytest.mark.parametrize(("s", "x", "expected"), [(1.0, 1.0, np.inf), (0.5, 1.0, np.inf), (0.5, 0.0, 0.0)])
def test_at_alpha_zero(s, x, expected):
    assert bose_truncated(s, 0.0, x) == expected


def test_debye_function_at_alpha_zero():
    """1/Gamma(2) int_0^x t / (e^t - 1) dt is x D_1(x); D_1(1) = 0.777505 (Abramowitz and Stegun, table 27.1)."""
    assert bose_truncated(2.0, 0.0, 1.0) == pytest.approx(0.777505, abs=5e-7)


def test_broadcasts():
    found = bose_truncated(1.5, np.array([[0.1], [1.0]]), np.array([0.0, 1.0, np.inf]))
    assert found.shape == (2, 3)
    assert found[1, 2] == pytest.approx(bose(1.5, 1.0), rel=1e-15, abs=0)


def test_outside_there_is_no_value():
    assert np.isnan(bose_truncated(1.5, [-1.0, -1.0, 1.0], [1.0, 20.0, -1.0])).all()
    with pytest.raises(ValueError, match="expected 0 < s <= 30"):
        bose_truncated(0.0, 1.0, 1.0)
