"""Sums over l against closed sums."""

import numpy as np
import pytest
from mpmath import polylog, zeta

from eoscore.symbolic.series import alternating_sum, smooth_sum


@pytest.mark.parametrize("order", [1.5, 2.0, 2.5, 3.0, 4.5])
def test_algebraic_terms_sum_to_zeta(order):
    assert smooth_sum(lambda ell: ell**-order) == pytest.approx(float(zeta(order)), rel=1e-12)


@pytest.mark.parametrize("alpha", [1e-4, 0.01, 1.0, 20.0])
def test_exponential_terms_sum_to_the_polylogarithm(alpha):
    want = float(polylog(1.5, np.exp(-alpha)).real)
    assert smooth_sum(lambda ell: np.exp(-alpha * ell) * ell**-1.5) == pytest.approx(want, rel=1e-11)


@pytest.mark.parametrize("order", [0.5, 1.5, 3.0])
def test_alternating_terms_sum_to_the_polylogarithm_at_minus_one(order):
    want = float(-polylog(order, -1).real)
    got = alternating_sum(lambda ell: ell**-order)
    assert got == pytest.approx(want, rel=1e-13)
