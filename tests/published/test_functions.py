"""Values of zeta, polylogarithms and Robinson's expansion: exact mathematics, and where it is written down."""

import math

import numpy as np
import pytest

from eoscore.gas import bose, fermi

Z = (0.1, 0.5, 0.9, 0.99, 0.9999)


# DLMF chapter 25 and 25.6.1; digits by mpmath, python-flint and SciPy, which agree.
@pytest.mark.parametrize(
    ("s", "value"),
    [
        (1.5, 2.61237534868549),
        (2.0, 1.64493406684823),
        (2.5, 1.34148725725092),
        (3.0, 1.20205690315959),
        (3.5, 1.12673386731706),
        (4.0, 1.08232323371114),
    ],
)
def test_zeta(s, value):
    assert bose(s, 0.0) == pytest.approx(value, rel=1e-14, abs=0)


def test_dilogarithm_of_one_half():
    """DLMF 25.12.6 at x = 1/2."""
    assert bose(2, math.log(2)) == pytest.approx(math.pi**2 / 12 - math.log(2) ** 2 / 2, rel=1e-15, abs=0)


def test_trilogarithm_of_one_half():
    """Classical (L. Lewin, Polylogarithms and Associated Functions, 1981; from memory), with zeta(3) of Apery."""
    two, zeta3 = math.log(2), 1.2020569031595942
    assert bose(3, two) == pytest.approx(7 * zeta3 / 8 - math.pi**2 * two / 12 + two**3 / 6, rel=1e-15, abs=0)


# Digits by mpmath from the series DLMF 25.12.10. At z = 0.9999 alpha = -ln z itself has lost digits: 1e-10.
@pytest.mark.parametrize(
    ("s", "values"),
    [
        (0.5, (0.107703340165572, 0.806126723042852, 4.02195042747336, 16.2218307534281, 175.780620107401)),
        (1.5, (0.103741452346169, 0.624837020819914, 1.61443852856634, 2.271660077008, 2.57707142710605)),
        (2.5, (0.101835233039602, 0.554997278717512, 1.13900302520216, 1.31753942595873, 1.34122836279989)),
        (2.0, (0.102617791099391, 0.582240526465013, 1.29971472300496, 1.58862544807638, 1.64391298425615)),
        (3.0, (0.101288684479223, 0.53721319360804, 1.04965895018644, 1.18583293364504, 1.20189245508458)),
    ],
)
def test_polylogarithms(s, values):
    found = bose(s, -np.log(Z))
    np.testing.assert_allclose(found[:4], values[:4], rtol=1e-12)
    assert found[4] == pytest.approx(values[4], rel=1e-10, abs=0)


# Digits by mpmath from DLMF 25.12.16, without its Gamma function.
@pytest.mark.parametrize(
    ("s", "values"),
    [
        (1.5, (0.765147024625408, 3.28568408233389, 7.88910191472155)),
        (2.5, (0.867199889012184, 5.08877586418718, 17.6124758045205)),
        (3.0, (0.901542677369696, 5.92106480375697, 23.862617597795)),
    ],
)
def test_fermi_functions(s, values):
    np.testing.assert_allclose(fermi(s, np.log([1.0, 10.0, 100.0])), values, rtol=1e-12)


def test_robinson():
    """J. E. Robinson, Phys. Rev. 83, 678 (1951); DLMF 25.12.12: the coefficients of g_3/2 in powers of sqrt(alpha)."""
    x = 1e-3
    series = -3.54490770181103 * x**0.5 + 2.61237534868549 + 1.46035450880959 * x - 0.103943112488677 * x**2
    # The next term is zeta(-3/2) x^3 / 6, 4e-12 here.
    assert bose(1.5, x) == pytest.approx(series, abs=1e-11)


def test_maxwell_boltzmann_and_bose_fermi_pair():
    """g_s + f_s differ by the doubled argument only: DLMF 25.12.3 generalised, at s = 3/2."""
    assert bose(1.5, 0.7) - fermi(1.5, -0.7) == pytest.approx(2**-0.5 * bose(1.5, 1.4), rel=1e-14, abs=0)
