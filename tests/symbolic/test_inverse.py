"""Densities of states behind Bessel functions, against the Laplace integral of what was found."""

from itertools import pairwise

import numpy as np
import pytest
import sympy as sp
from scipy.integrate import quad
from scipy.special import kve

from eoscore.symbolic.integrals.rule import BETA
from eoscore.symbolic.inverse import density_of_states

E, a = sp.symbols("E a", positive=True)


def whole(order, power):
    return sp.exp(a * BETA) * sp.besselk(order, a * BETA) * BETA**-power


@pytest.mark.parametrize(
    ("order", "power"), [(1, 0), (1, 1), (2, 1), (2, 2), (sp.Rational(3, 2), sp.Rational(1, 2))]
)
@pytest.mark.parametrize("beta", [0.3, 2.0])
def test_its_laplace_integral_is_the_partition_function(order, power, beta):
    found = density_of_states(whole(order, power), E)
    at = sp.lambdify([E], found.subs(a, 1.7), "numpy")
    pieces = np.concatenate([[0.0], np.geomspace(1e-3, 60 / beta, 20)])
    got = sum(quad(lambda e: at(e) * np.exp(-beta * e), *ends)[0] for ends in pairwise(pieces))
    want = kve(float(order), 1.7 * beta) * beta ** -float(power)
    assert got == pytest.approx(want, rel=1e-7)


def test_the_relativistic_gas_has_the_published_density_of_states():
    """rho = (E + m c^2) sqrt(E^2 + 2 E m c^2)/(2 pi^2 (hbar c)^3): p^2 dp/dE/(2 pi^2 hbar^3), elementary."""
    m, c, hbar = sp.symbols("m c hbar", positive=True)
    z = m * c**2 * BETA
    number = m**2 * c * sp.exp(z) * sp.besselk(2, z) / (2 * sp.pi**2 * hbar**3 * BETA)
    momentum = sp.sqrt(E * (E + 2 * m * c**2)) / c
    want = momentum**2 * sp.diff(momentum, E) / (2 * sp.pi**2 * hbar**3)
    assert sp.simplify(density_of_states(number, E) / want) == 1


@pytest.mark.parametrize(
    "expression",
    [
        whole(2, sp.Rational(5, 2)),
        whole(1, -1),
        sp.exp(-a * BETA) * sp.besseli(0, a * BETA),
        1 / sp.sinh(BETA),
    ],
    ids=["half a derivative", "from a step", "a band", "levels"],
)
def test_what_has_no_closed_form_is_none(expression):
    assert density_of_states(expression, E) is None
