"""Monotone pieces and allowed stretches of functions of one variable."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import Phase, given, settings
from hypothesis import strategies as st

from eoscore.formula import call, constant, variable
from eoscore.measure.landscape_pieces import monotone_pieces, positive_intervals

x = variable("x")


@given(st.lists(st.integers(-4, 4), min_size=1, max_size=4, unique=True))
@settings(deadline=None, max_examples=20, phases=[Phase.generate])
def test_roots_of_the_slope_are_all_found(roots):
    """The slope is the product of (x - root): its antiderivative turns exactly there."""
    coefficients = np.polynomial.polynomial.polyint(np.polynomial.polynomial.polyfromroots(roots))
    f = constant(0)
    for c in coefficients[::-1]:
        f = f * x + float(c)
    np.testing.assert_allclose(monotone_pieces(f, "x").points[1:-1], sorted(roots), atol=1e-8)


@pytest.mark.parametrize("width", [1e-9, 1e-6, 1e-3])
def test_a_narrow_bump_on_a_wide_slope_is_not_stepped_over(width):
    f = x**2 + 100 * width * call("exp", -(((x - 3) / width) ** 2))
    turns = monotone_pieces(f, "x").points[1:-1]
    assert turns.size == 3
    assert np.sum(np.abs(turns - 3) < 10 * width) == 2


@pytest.mark.parametrize(
    ("walls", "stretches"),
    [
        ((x,), [(0, np.inf)]),
        ((1 - x**2,), [(-1, 1)]),
        ((x**2 - 1,), [(-np.inf, -1), (1, np.inf)]),
        ((1e-10 - x**2, x + 1e-6), [(-1e-6, 1e-5)]),
        ((x, -x - 1), []),
        ((), [(-np.inf, np.inf)]),
    ],
)
def test_stretches_between_walls(walls, stretches):
    found = positive_intervals(walls, "x")
    assert len(found) == len(stretches)
    for one, wanted in zip(found, stretches, strict=True):
        assert one == pytest.approx(wanted, rel=1e-14, abs=1e-30)


def test_too_many_pieces_leave_gaps_far_out():
    """sin^2 in a wide envelope turns 60,000 times; what is followed is whole, and the rest is said."""
    found = monotone_pieces((x / 100) ** 2 + call("sin", np.pi * x) ** 2, "x")
    (left, near), (right, far) = found.gaps
    inner = found.points[np.abs(found.points) < right]
    assert left == -far
    assert near == -right
    assert 1000 < right < 15_708 < far  # the last turn is where 2 x / 100^2 = pi
    assert inner.size == pytest.approx(4 * right, abs=4)


@pytest.mark.parametrize("u", [1.0, 1e-27, 1e-6])
def test_a_rise_that_no_bound_proves_is_seen(u):
    """q^2/(1 + q^2): far out the two terms of its slope cancel, so that intervals tell nothing; yet it is one well."""
    q = x / u
    found = monotone_pieces(q**2 / (1 + q**2), "x")
    assert found.gaps.size == 0
    assert found.signs[np.searchsorted(found.points, [-10 * u, 10 * u]) - 1].tolist() == [-1.0, 1.0]
    assert found.points[np.abs(found.points) < 1e4 * u].tolist() == [0.0]
