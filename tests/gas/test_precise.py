"""The decimal functions behind the tables against mpmath at 60 digits."""

from decimal import Context, Decimal, localcontext

import mpmath
import pytest

from eoscore.gas.matsubara import power_part
from eoscore.gas.precise import (
    cosine_sine,
    eta_row,
    even_eta,
    gamma,
    moved,
    polynomial,
    polynomial_value,
    powers,
    reciprocal_gamma,
    zeta_row,
)


@pytest.fixture(autouse=True)
def digits():
    with mpmath.workdps(60), localcontext(Context(prec=60)):
        yield


def off(found, exact):
    return abs(mpmath.mpf(str(found)) / exact - 1)


@pytest.mark.parametrize("s", [-5.5, -3.25, 0.25, 1.5, 2.5, 2.0 + 2.0**-50, 29.5])
@pytest.mark.parametrize("j", [0, 1, 2, 7, 20, 40])
def test_zeta_and_eta(s, j):
    order = mpmath.mpf(s) - j
    assert off(zeta_row(moved(s))[j], mpmath.zeta(order)) < 1e-24
    assert off(eta_row(moved(s))[j], mpmath.altzeta(order)) < 1e-24


@pytest.mark.parametrize("x", ["0.5", "0.99999", "1", "3.7", "29.3"])
def test_gamma(x):
    assert off(gamma(Decimal(x)), mpmath.gamma(mpmath.mpf(x))) < 1e-38
    exact = mpmath.rgamma(mpmath.mpf(x) - 7)
    assert abs(mpmath.mpf(str(reciprocal_gamma(Decimal(x) - 7))) - exact) <= 1e-38 * abs(exact)


@pytest.mark.parametrize("x", ["0.001", "1.5", "-3", "45.7"])
def test_cosine_sine(x):
    cosine, sine = cosine_sine(Decimal(x))
    assert off(cosine, mpmath.cos(mpmath.mpf(x))) < 1e-45
    assert off(sine, mpmath.sin(mpmath.mpf(x))) < 1e-45


def test_powers_and_even_sums():
    assert off(powers(Decimal("1.5"))[97], mpmath.mpf(98) ** mpmath.mpf("-1.5")) < 1e-55
    assert off(even_eta(9)[8], mpmath.altzeta(16)) < 1e-40


@pytest.mark.parametrize("about", [0.0, 1.0, 2.5])
def test_polynomial_gives_a_polynomial_back(about):
    coefficients = [Decimal(k) for k in (3, -1, 4, 1, -5)]
    found = polynomial(lambda x: polynomial_value(coefficients, x), 1.0, 3.0, 6, about)
    for x in (Decimal(0), Decimal(2), Decimal(7)):
        gap = polynomial_value(found, x - Decimal(about)) - polynomial_value(coefficients, x)
        assert abs(gap) < Decimal("1e-50")


@pytest.mark.parametrize("s", [0.5, 2.5, -5.25, 9.75, 29.5])
@pytest.mark.parametrize("eta", [0.25, 3.0, 20.0, 70.0])
def test_the_power_part(s, eta):
    """Against the Hurwitz zeta function of mpmath: Y_s = (2 pi)^s / Gamma(s) Im[i^(s-1) zeta(1-s, 1/2 - i y)]."""
    y = mpmath.mpf(eta) / (2 * mpmath.pi)
    hurwitz = mpmath.zeta(1 - mpmath.mpf(s), mpmath.mpc(0.5, -y))
    turned = mpmath.mpc(0, 1) ** (mpmath.mpf(s) - 1) * hurwitz
    exact = (2 * mpmath.pi) ** mpmath.mpf(s) * mpmath.rgamma(s) * turned.imag
    assert off(power_part(Decimal(s))(Decimal(eta)), exact) < 1e-17
