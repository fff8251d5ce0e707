"""Building and evaluating formulas: sharing, shapes, depth, conditions."""

from __future__ import annotations

import math
import pickle

import numpy as np
import pytest
import sympy
from hypothesis import given, settings
from hypothesis import strategies as st

from eoscore.formula import (
    both,
    call,
    choose,
    constant,
    either,
    evaluate_many,
    less,
    margin,
    negate,
    variable,
)  # fmt: skip
from eoscore.formula.tape import CHUNK

from .expressions import X, Y, pairs

x, y = variable("x"), variable("y")


def test_what_is_built_alike_is_the_same_object():
    assert call("exp", -(x**2)) * y is y * call("exp", -(x**2))


def _travelled(node):
    return pickle.loads(pickle.dumps(node))  # noqa: S301 - what the test itself has packed


def test_a_pickled_formula_comes_back_as_the_same_object():
    tangled = choose(less(x, -0.0), call("atan2", x, 2.5e-3), call("besselj", 1, y) ** x)
    condition = both(less(x, y), negate(less(y, 1)))
    assert _travelled(tangled) is tangled
    assert _travelled(condition) is condition


def test_a_pickle_has_no_depth_and_keeps_what_is_shared():
    """f -> f + sin(f), 20000 times: 40000 levels, and 2^20000 leaves if nothing were shared."""
    deep = x
    for _ in range(20_000):
        deep = deep + call("sin", deep)
    assert len(pickle.dumps(deep)) < 2e6
    assert _travelled(deep) is deep


@pytest.mark.parametrize(
    ("built", "simple"),
    [
        (0 + x, x), (1 * x, x), (x**1, x), (x * 0, constant(0)), (x - x, constant(0)), (x.__neg__().__neg__(), x),
        (x / 1, x), (call("sqrt", x**2 + y**2) ** 2, x**2 + y**2), (call("sqrt", x**2), call("abs", x)),
        (x * x, x**2), (2 * (3 * x), 6 * x), ((x + 1) + 2, x + 3), (call("min", x, x), x),
        (constant(2) ** 3, constant(8)), (choose(less(1, 2), x, y), x), ((x**2) ** 3, x**6),
    ],
)  # fmt: skip
def test_light_simplification(built, simple):
    assert built is simple


@given(pairs(), st.floats(-2, 2), st.floats(-2, 2))
@settings(deadline=None, max_examples=60)
def test_values_agree_with_sympy(pair, a, b):
    formula, twin = pair
    wanted = float(sympy.N(twin.subs({X: sympy.Rational(a), Y: sympy.Rational(b)}), 30))
    assert float(formula.evaluate({"x": a, "y": b})) == pytest.approx(wanted, rel=1e-9, abs=1e-9)


@pytest.mark.parametrize(
    ("name", "args", "wanted"),
    [
        ("ln", (2.0,), math.log(2)), ("log10", (1000.0,), 3), ("atan2", (1.0, -1.0), 3 * math.pi / 4),
        ("sign", (-3.0,), -1), ("max", (1.0, 5.0, 2.0), 5), ("min", (1.0, 5.0, 0.5), 0.5),
        ("ellipk", (0.0,), math.pi / 2), ("ellipe", (1.0,), 1), ("besselj", (0.0, 0.0), 1),
        ("acos", (-1.0,), math.pi), ("cosh", (0.0,), 1), ("erf", (math.inf,), 1),
    ],
)  # fmt: skip
def test_every_function_at_a_known_point(name, args, wanted):
    names = "abc"[: len(args)]
    formula = call(name, *map(variable, names))
    values = dict(zip(names, args, strict=True))
    assert float(formula.evaluate(values)) == pytest.approx(wanted, rel=1e-14, abs=0)


def test_values_broadcast_and_constants_take_the_shape():
    assert (x + y).evaluate({"x": np.zeros((3, 1)), "y": np.ones(4)}).shape == (3, 4)
    assert constant(7).evaluate({"x": np.zeros((3, 1))}).tolist() == [[7], [7], [7]]


def test_long_arrays_run_in_chunks_to_the_same_values():
    points = np.linspace(-1, 1, 5 * CHUNK + 3)
    first, second = evaluate_many([call("exp", x) * y, x**3], {"x": points, "y": 2.0})
    np.testing.assert_allclose(first, 2 * np.exp(points), rtol=1e-15)
    np.testing.assert_allclose(second, points**3, rtol=1e-15)


@pytest.mark.parametrize("power", [-3, -2, -1, -0.5, 0.5, 1.5, 2, 2.5, 3, 7, 12, 0.3])
def test_powers_take_every_short_cut_to_the_same_value(power):
    points = np.linspace(0.1, 3, 50)
    np.testing.assert_allclose((x**power).evaluate({"x": points}), points**power, rtol=1e-14)


def test_outside_the_domain_is_nan_without_a_warning():
    assert np.isnan(call("ln", x).evaluate({"x": -1.0}))


def test_depth_costs_no_recursion():
    deep = x
    for _ in range(20_000):
        deep = call("sin", deep) + x
    assert np.isfinite(deep.evaluate({"x": 0.5}))
    assert np.isfinite(deep.derivative("x").evaluate({"x": 0.5}))
    assert deep.substitute({"x": y}).variables == {"y"}


def test_substitution_is_simultaneous():
    assert (x - 2 * y).substitute({"x": y, "y": x}) is y - 2 * x
    assert float((x * y).substitute({"x": 3.0}).evaluate({"y": 2.0})) == 6


@given(st.floats(-3, 3), st.floats(-3, 3))
def test_a_margin_is_positive_where_its_condition_holds(a, b):
    where = either(both(less(x, y), less(0, x)), negate(less(x, 1, strict=False)))
    holds = (a < b and a > 0) or a > 1
    at = {"x": a, "y": b}
    assert bool(where.evaluate(at)) == holds
    assert not (margin(where).evaluate(at) > 0) ^ holds
    assert bool(negate(where).evaluate(at)) != holds


def test_a_missing_variable_is_named():
    with pytest.raises(ValueError, match="a formula of x, y was evaluated without y"):
        (x + y).evaluate({"x": 1.0})


@pytest.mark.parametrize(
    ("name", "args", "message"),
    [
        ("gamma", (x,), "unknown function 'gamma'; known are abs,"),
        ("atan2", (x,), "takes 2 arguments, not 1"),
    ],
)
def test_an_unfit_call_is_refused(name, args, message):
    with pytest.raises(ValueError, match=message):
        call(name, *args)
