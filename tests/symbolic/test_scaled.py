"""Scaled Bessel functions and their derivatives against mpmath at 60 digits."""

from functools import cache

import mpmath
import numpy as np
import pytest
import sympy as sp

from eoscore.symbolic.scaled import ScaledI, ScaledK, scaled, scaled_i, scaled_k, written_out

CASES = {"I": (scaled_i, mpmath.besseli, -1), "K": (scaled_k, mpmath.besselk, 1)}


@cache
def exact(bessel, sign, n, k, x):
    """By the recurrences (DLMF 10.29.1), whose differences 60 digits survive; the sign is that of the exponential."""
    if k == 0:
        return mpmath.exp(sign * x) * bessel(n, x)
    sides = exact(bessel, sign, n - 1, k - 1, x) + exact(bessel, sign, n + 1, k - 1, x)
    return sign * (exact(bessel, sign, n, k - 1, x) - sides / 2)


@pytest.mark.parametrize("kind", CASES)
@pytest.mark.parametrize(("order", "slope"), [(0, 0), (0, 1), (0, 2), (1, 1), (2, 0), (2, 2), (1.5, 1)])
def test_values_and_slopes(kind, order, slope):
    function, bessel, sign = CASES[kind]
    at = [0.01, 0.5, 5.0, 29.9, 30.1, 1e3, 1e7, 1e12]
    with mpmath.workdps(60):
        want = [float(exact(bessel, sign, mpmath.mpf(order), slope, mpmath.mpf(x))) for x in at]
    assert function(order, slope, np.array(at)) == pytest.approx(want, rel=1e-12, abs=0)


def test_a_derivative_stays_whole_and_can_be_written_out():
    x = sp.Symbol("x", positive=True)
    whole = scaled(sp.exp(-x) * sp.besseli(0, x))
    assert whole == ScaledI(0, 0, x)
    assert sp.diff(whole, x) == ScaledI(0, 1, x)
    assert written_out(ScaledI(0, 1, x)) == sp.diff(sp.exp(-x) * sp.besseli(0, x), x)
    assert written_out(ScaledK(2, 0, x)) == sp.exp(x) * sp.besselk(2, x)
