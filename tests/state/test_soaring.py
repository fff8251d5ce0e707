"""Traps whose states grow like an exponential of the energy: V = U ln(1 + r^2/b^2)."""

from __future__ import annotations

import mpmath
import numpy as np
import pytest
from scipy.constants import h, k, physical_constants
from scipy.integrate import quad
from scipy.special import gammaln

import eoscore

MASS = 84 * physical_constants["atomic mass constant"][0]
SLOW = "V(r) = 1e-30 J*ln(1 + (r/(1 um))^2)"


def held(place):
    lab = eoscore.loads(f"gas g {{ m = 84 u }}\ntrap t {{ {place} }}")
    return lab["g"].held_in(lab["t"])


def critical_number(T):
    """sum_l Z(l/kT), Z = (b/lambda)^3 pi^(3/2) Gamma(a - 3/2)/Gamma(a), a = U/kT; the rest by its zeta-like tail."""
    a, count = np.arange(1, 100_000) * 1e-30 / (k * T), 1e-18 * (2 * np.pi * MASS * k * T) ** 1.5 / h**3
    terms = count * np.pi**1.5 * np.exp(gammaln(a - 1.5) - gammaln(a)) * np.arange(1, 100_000) ** -1.5
    return terms.sum() + terms[-1] * 100_000 / 2


@pytest.mark.parametrize("nK", [5, 20, 30, 40, 44])
def test_below_the_temperature_that_empties_the_trap(nK):
    """The sum over states diverges for kT >= 2 U/3, 48.3 nK here."""
    reading = held(SLOW).find(["N_c"], {"T": nK * 1e-9})["N_c"]
    assert reading.value == pytest.approx(critical_number(nK * 1e-9), rel=1e-9)


@pytest.mark.parametrize("nK", [48, 60, 239])
def test_words_above(nK):
    assert "does not end at T" in held(SLOW).find(["N_c"], {"T": nK * 1e-9})["N_c"].why


def test_walls_make_it_finite():
    """int g_(3/2)(e^(-V/kT)) d^3r/lambda^3 over the ball inside, by quadrature and mpmath's polylogarithm."""
    T = 1e-6

    def shell(r):
        return (
            4 * np.pi * r**2 * float(mpmath.polylog(1.5, mpmath.exp(-1e-30 * np.log1p(r * r) / (k * T))).real)
        )

    expected = quad(shell, 0, 20, epsrel=1e-9)[0] * 1e-18 * (2 * np.pi * MASS * k * T) ** 1.5 / h**3
    reading = held(SLOW + " where r < 20 um").find(["N_c"], {"T": T})["N_c"]
    assert reading.value == pytest.approx(expected, rel=1e-8, abs=float(reading.error))
    assert reading.error < 1e-5 * reading.value


def test_exact_levels_end_as_well():
    """T_c of few particles by halving from below; more would want a temperature at which the sum has no end."""
    trap = held(SLOW + "\n levels exact")
    T = trap.T_c(N=3)
    assert trap.N_c(T=T) == pytest.approx(3, rel=1e-9)
    words = trap.find(["T_c"], {"N": 1e3})["T_c"].why
    assert "V rises too slowly there" in words
    assert trap.T_c(N=3) == T
