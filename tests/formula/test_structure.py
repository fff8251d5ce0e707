"""Summands, polynomials and scalings hidden in formulas."""

from __future__ import annotations

from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

from eoscore.formula import call, choose, constant, less, variable
from eoscore.formula.structure import additive_parts, polynomial, scaling_powers

x, y, z = variable("x"), variable("y"), variable("z")
NAMES = ("x", "y", "z")


@pytest.mark.parametrize(
    ("formula", "groups"),
    [
        (3 * (x**2 + y**2 + 4 * z**2), ["x", "y", "z"]),
        (-(x**2 - call("exp", y)) / 2 + 5, ["x", "y"]),
        (call("exp", -(x**2) - y**2) + z, ["xy", "z"]),
        ((x + y) ** 2 + (x - y) ** 2 + z, ["x", "y", "z"]),
        ((x + y) ** 2 + z**4, ["xy", "z"]),
        (x * (x + 1) + y * z, ["x", "yz"]),
        (x * y + y * z + x**2, ["xyz"]),
        (constant(4), [""]),
    ],
)
def test_parts_share_no_name_and_add_up(formula, groups):
    parts = additive_parts(formula, NAMES)
    assert ["".join(sorted(names)) for names, _ in parts] == groups
    at = {"x": 0.3, "y": -1.2, "z": 0.7}
    total = sum(float(part.evaluate(at)) for _, part in parts)
    assert total == pytest.approx(float(formula.evaluate(at)), rel=1e-14, abs=0)


@given(st.dictionaries(st.tuples(*[st.integers(0, 3)] * 3), st.integers(1, 9).map(float), max_size=6))
def test_a_polynomial_is_read_back(terms):
    formula = constant(0)
    for (i, j, k), value in terms.items():
        formula = formula + value * x**i * y**j * z**k
    assert polynomial(formula, NAMES) == terms


def test_products_and_powers_are_multiplied_out():
    assert polynomial((x - y) * (x + y) / 2, "xy") == {(2, 0): 0.5, (0, 2): -0.5}
    assert polynomial((1 + x) ** 4, "x") == {(0,): 1, (1,): 4, (2,): 6, (3,): 4, (4,): 1}


@pytest.mark.parametrize(
    "formula", [call("exp", x), 1 / x, x**0.5, x**y, (x + y + z) ** 40, x + variable("w")]
)
def test_what_is_no_polynomial(formula):
    assert polynomial(formula, NAMES) is None


@pytest.mark.parametrize(
    ("formula", "powers"),
    [
        (call("abs", x) ** 3 + call("abs", y) ** 4, (Fraction(1, 3), Fraction(1, 4))),
        (7 * call("sqrt", x**2 + 4 * y**2), (1, 1)),
        (x * y, (Fraction(1, 2), Fraction(1, 2))),
        ((x**2 + y**2) * (2 + call("cos", call("atan2", y, x))), (Fraction(1, 2), Fraction(1, 2))),
        (call("max", x, 0.0) ** 2 + y**12, (Fraction(1, 2), Fraction(1, 12))),
        (choose(less(x, 0), x**2, 3 * x**2), (Fraction(1, 2), 0)),
    ],
)
def test_scaling_powers(formula, powers):
    assert scaling_powers(formula, ("x", "y")) == dict(zip("xy", powers, strict=True))


@pytest.mark.parametrize("formula", [x**2 + x, x**2 + 1, call("exp", x), constant(3), call("sin", x) * x])
def test_what_has_no_scaling(formula):
    assert scaling_powers(formula, ("x", "y")) is None
