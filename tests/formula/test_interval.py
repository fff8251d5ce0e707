"""Bounds over boxes always hold the values inside."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from eoscore.formula import call, choose, constant, less, variable
from eoscore.formula.interval import bounds

from .expressions import pairs

x, y = variable("x"), variable("y")
ends = st.tuples(st.floats(-3, 3), st.floats(-3, 3)).map(sorted)


@given(pairs(), ends, ends, st.floats(0, 1), st.floats(0, 1))
@settings(deadline=None, max_examples=150)
def test_every_value_inside_a_box_lies_within_the_bounds(pair, across, along, s, t):
    a, b = across[0] + s * (across[1] - across[0]), along[0] + t * (along[1] - along[0])
    a, b = min(a, across[1]), min(b, along[1])
    low, high = bounds(pair[0], {"x": tuple(across), "y": tuple(along)})
    assert low <= pair[0].evaluate({"x": a, "y": b}) <= high


FUNCTIONS = [
    "sqrt", "exp", "ln", "log10", "sin", "cos", "tan", "asin", "acos", "atan", "sinh", "cosh", "tanh", "abs",
    "sign", "erf", "ellipk", "ellipe",
]  # fmt: skip
_FORMULAS = [
    *(call(name, x) for name in FUNCTIONS), *(call(name, x).derivative("x") for name in FUNCTIONS),
    1 / x, x**-2, x**3, x**0.5, x**-1.5, (1 + x**2) ** x, call("besselj", 0, x), call("besselj", 1, 5 * x),
    call("atan2", x, x - 1), call("min", x, 1 - x), call("max", x, x**2), choose(less(x, 0.3), x, 2 - x),
]  # fmt: skip


@pytest.mark.parametrize("formula", _FORMULAS, ids=range(len(_FORMULAS)))
@given(ends)
@settings(max_examples=30)
def test_functions_are_held_where_they_are_defined(formula, box):
    points = np.linspace(*box, 101)
    values = formula.evaluate({"x": points})
    low, high = bounds(formula, {"x": tuple(box)})
    defined = np.isfinite(values)
    assert not defined.any() or ((low <= values[defined]) & (values[defined] <= high)).all()


def test_bounds_are_tight_where_a_variable_stands_once():
    low, high = bounds(3 * x**2 - call("cos", y), {"x": (-1.0, 2.0), "y": (0.0, 1.0)})
    assert (low, high) == (pytest.approx(-1, abs=1e-12), pytest.approx(12 - np.cos(1), abs=1e-12))


def test_many_boxes_at_once():
    low, high = bounds(x**2, {"x": (np.array([-1.0, 1.0]), np.array([1.0, 2.0]))})
    np.testing.assert_allclose((low, high), ([0, 1], [1, 4]), atol=1e-12)


def test_division_by_an_interval_around_zero_is_unbounded():
    assert bounds(1 / x, {"x": (-1.0, 2.0)}) == (-np.inf, np.inf)
    assert bounds(constant(2), {"x": (0.0, 1.0)})[0] <= 2


def test_missing_ends_are_named():
    with pytest.raises(ValueError, match="bounds need the ends of y"):
        bounds(x + y, {"x": (0.0, 1.0)})
