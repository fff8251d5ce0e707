"""Zero, powers and constants are told without `simplify`."""

import pytest
import sympy as sp

from eoscore.symbolic.algebra import constant_in, log_slope, monomial, vanishes

x, y, a, n = sp.symbols("x y a n", positive=True)
t = sp.Symbol("t", real=True)

POWERS = [
    (3 * a * x**2, 3 * a, 2),
    (sp.sqrt(a * x**3), sp.sqrt(a), sp.Rational(3, 2)),
    (a * x**n * x, a, n + 1),
    ((x**2 + 4 * x**2 * a) ** n, (1 + 4 * a) ** n, 2 * n),
    (a, a, 0),
]


@pytest.mark.parametrize(("expression", "size", "exponent"), POWERS)
def test_a_power_is_taken_apart(expression, size, exponent):
    found = monomial(expression, x)
    assert sp.simplify(found[0] - size) == 0
    assert sp.expand(found[1] - exponent) == 0


@pytest.mark.parametrize("expression", [x + x**2, sp.exp(x), sp.sqrt(a + x)])
def test_what_is_no_power_is_none(expression):
    assert monomial(expression, x) is None


def test_an_identity_vanishes_and_a_near_miss_does_not():
    assert vanishes(sp.sin(t) ** 2 + sp.cos(t) ** 2 - 1)
    assert not vanishes(sp.sin(t) ** 2 + sp.cos(t) ** 2 - 1 - sp.Rational(1, 10**20) * t)


def test_a_ratio_free_of_the_coordinates_is_found():
    root = sp.sqrt(x**2 + 4 * a * y**2)
    assert constant_in(sp.diff(root, y) / y / (sp.diff(root, x) / x), {x, y}) == 4 * a
    assert constant_in(x / y, {x, y}) is None


@pytest.mark.parametrize("expression", [a * x**n, (a**2 - x**2) ** 3 / x, sp.sqrt(a + x) * x])
def test_a_slope_equals_the_derivative(expression):
    assert sp.simplify(log_slope(expression, x) - x * sp.diff(expression, x) / expression) == 0
