"""Exact derivatives against SymPy and against mpmath's high-precision differences."""

from __future__ import annotations

import mpmath
import pytest
import sympy
from hypothesis import given, settings
from hypothesis import strategies as st

from eoscore.formula import call, choose, constant, gradient, hessian, less, variable

from .expressions import X, Y, pairs

x, y = variable("x"), variable("y")


@given(pairs(), st.floats(-2, 2), st.floats(-2, 2))
@settings(deadline=None, max_examples=60)
def test_first_derivatives_agree_with_sympy(pair, a, b):
    formula, twin = pair
    slope = sympy.diff(twin, X).subs({X: sympy.Rational(a), Y: sympy.Rational(b)})
    wanted = float(sympy.N(slope, 30))
    assert float(formula.derivative("x").evaluate({"x": a, "y": b})) == pytest.approx(
        wanted, rel=1e-8, abs=1e-8
    )


_MPMATH = {
    "sqrt": mpmath.sqrt, "exp": mpmath.exp, "ln": mpmath.log, "log10": mpmath.log10, "sin": mpmath.sin,
    "cos": mpmath.cos, "tan": mpmath.tan, "asin": mpmath.asin, "acos": mpmath.acos, "atan": mpmath.atan,
    "sinh": mpmath.sinh, "cosh": mpmath.cosh, "tanh": mpmath.tanh, "abs": abs, "erf": mpmath.erf,
    "ellipk": mpmath.ellipk, "ellipe": mpmath.ellipe,
}  # fmt: skip


@pytest.mark.parametrize("name", sorted(_MPMATH))
@pytest.mark.parametrize("order", [1, 2, 3])
def test_functions_of_one_variable(name, order):
    formula = call(name, x)
    for _ in range(order):
        formula = formula.derivative("x")
    with mpmath.workdps(40):
        wanted = float(mpmath.diff(_MPMATH[name], mpmath.mpf("0.37"), order))
    assert float(formula.evaluate({"x": 0.37})) == pytest.approx(wanted, rel=1e-11, abs=1e-13)


@pytest.mark.parametrize("m", [-20.0, -0.6, -0.3, 0.0, 0.01, 0.49, 0.51, 0.9, 0.999])
@pytest.mark.parametrize("name", ["ellipk", "ellipe"])
def test_elliptic_integrals_are_smooth_through_zero(name, m):
    """mpmath's Taylor coefficients; at m = 0 the usual closed forms of the derivatives are 0/0."""
    with mpmath.workdps(40):
        wanted = [float(mpmath.diff(_MPMATH[name], mpmath.mpf(m), n)) for n in (1, 2, 3)]
    formula = call(name, x)
    for value in wanted:
        formula = formula.derivative("x")
        assert float(formula.evaluate({"x": m})) == pytest.approx(value, rel=2e-9, abs=0)


@pytest.mark.parametrize("order", [0, 1, 2, 0.5])
def test_bessel_functions(order):
    with mpmath.workdps(30):
        wanted = float(mpmath.diff(lambda t: mpmath.besselj(order, t), 1.7, 2))
    second = call("besselj", order, x).derivative("x").derivative("x")
    assert float(second.evaluate({"x": 1.7})) == pytest.approx(wanted, rel=1e-12, abs=0)


@pytest.mark.parametrize(
    ("formula", "wanted"),
    [
        (call("min", x**2, 3 * x), 3.0), (call("max", x**2, 3 * x), 8.0), (call("sign", x), 0.0),
        (choose(less(x, 5), x**3, x), 48.0), (call("atan2", x, 3.0), 3 / 25), (call("atan2", 3.0, x), -3 / 25),
        (constant(2) ** x, 16 * 0.6931471805599453), (x**x, 256 * 2.386294361119891), (constant(3), 0.0),
    ],
)  # fmt: skip
def test_kinks_and_general_powers_at_four(formula, wanted):
    assert float(formula.derivative("x").evaluate({"x": 4.0})) == pytest.approx(wanted, rel=1e-14, abs=0)


def test_gradient_and_hessian_are_symmetric_and_exact():
    f = call("exp", x * y) * y
    assert [float(g.evaluate({"x": 0.0, "y": 2.0})) for g in gradient(f, "xy")] == [4, 1]
    second = hessian(f, "xy")
    assert second[0][1] is second[1][0]
    assert float(second[0][1].evaluate({"x": 0.0, "y": 2.0})) == 4


def test_a_distance_that_is_squared_again_is_smooth_at_the_origin():
    d = call("sqrt", x**2 + y**2)
    f = call("exp", -2 * d**2)
    assert float(f.derivative("x").derivative("x").evaluate({"x": 0.0, "y": 0.0})) == -4


def test_a_variable_order_is_refused():
    with pytest.raises(ValueError, match="order of besselj depends on x"):
        call("besselj", x, y).derivative("x")
