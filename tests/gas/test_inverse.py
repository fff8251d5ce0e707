"""The argument from the value: there and back, and the ends of the range."""

import math

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from eoscore.gas import alpha_from_bose, bose, eta_from_fermi, fermi


@pytest.mark.parametrize(
    "s", [-5.0, -0.3, 0.5, 0.97, 1.0, 1.02, 1.5, 1.97, 2.0, 2.0 + 1e-9, 2.5, 3.0, 12.0, 30.0]
)
def test_bose_there_and_back(s):
    alpha = np.concatenate([np.geomspace(1e-12, 600, 200), np.linspace(0.1, 5, 50)])
    g = bose(s, alpha)
    found = alpha_from_bose(s, g)
    np.testing.assert_allclose(bose(s, found), g, rtol=2e-15)
    # alpha has the digits that a rounding of g leaves.
    kept = np.minimum(alpha * bose(s - 1, alpha) / g, 1.0)
    away = g < bose(s, 0.0)
    assert (np.abs(found / alpha - 1) * kept)[away].max() < 2e-15


@pytest.mark.parametrize("s", [0.0, 0.3, 0.5, 1.0, 1.5, 2.0, 3.5, 17.0, 30.0])
def test_fermi_there_and_back(s):
    eta = np.concatenate([np.linspace(-40, 15, 101), np.geomspace(1e-6, 15 if s == 0 else 1e5, 50)])
    f = fermi(s, eta)
    found = eta_from_fermi(s, f)
    np.testing.assert_allclose(fermi(s, found), f, rtol=3e-15)
    kept = np.minimum(np.abs(eta) * fermi(s - 1, eta) / f, 1.0)
    assert (np.abs(found / eta - 1) * kept).max() < 3e-15


@settings(deadline=None)
@given(g=st.floats(1e-300, 700))
def test_order_one_in_closed_form(g):
    """g = -ln(1 - e^-alpha), so alpha is the same function of g."""
    assert alpha_from_bose(1.0, g) == pytest.approx(bose(1.0, g), rel=1e-13, abs=0)


@settings(deadline=None)
@given(f=st.floats(1e-300, 600))
def test_fermi_order_one_in_closed_form(f):
    exact = math.log(math.expm1(f))
    assert eta_from_fermi(1.0, f) == pytest.approx(exact, rel=1e-13, abs=1e-15)


def test_the_ends():
    top = bose(1.5, 0.0)
    assert alpha_from_bose(1.5, [0.0, top]).tolist() == [np.inf, 0.0]
    assert alpha_from_bose(0.5, np.inf) == 0.0
    assert np.isnan(alpha_from_bose(1.5, [-1.0, 3.0, np.nan])).all()
    assert eta_from_fermi(1.5, [0.0, np.inf]).tolist() == [-np.inf, np.inf]
    assert np.isnan(eta_from_fermi(0.0, [-0.1, 1.1])).all()


@pytest.mark.parametrize(
    ("call", "s"), [(alpha_from_bose, -5.5), (eta_from_fermi, -0.5), (eta_from_fermi, 31.0)]
)
def test_an_order_out_of_range_is_refused(call, s):
    with pytest.raises(ValueError, match="expected a number from"):
        call(s, 0.5)
