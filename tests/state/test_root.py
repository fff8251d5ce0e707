"""Roots of rising functions."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from eoscore.state.root import rising_root

WIDE = 50.0


def solve(function, wanted, start=0.0):
    wanted = np.asarray(wanted, dtype=float)

    def miss(x, which):
        value, slope = function(x)
        return value - wanted[which], slope

    return rising_root(
        miss, np.full(wanted.size, -WIDE), np.full(wanted.size, WIDE), np.full(wanted.size, start)
    )


@given(st.lists(st.floats(-40, 40), min_size=1, max_size=20), st.floats(-45, 45))
def test_finds_roots_of_a_steep_function(roots, start):
    wanted = np.sinh(np.array(roots))
    assert solve(lambda x: (np.sinh(x), np.cosh(x)), wanted, start) == pytest.approx(
        roots, rel=1e-12, abs=1e-12
    )


@pytest.mark.parametrize("slope", [0.0, np.nan, -1.0])
def test_a_wrong_derivative_only_costs_time(slope):
    root = solve(lambda x: (x**3, np.full_like(x, slope)), [8.0, -27.0], 1.0)
    assert root == pytest.approx([2.0, -3.0], rel=1e-9, abs=0)


def test_points_to_the_end_where_there_is_no_root():
    assert solve(lambda x: (np.tanh(x), 1 / np.cosh(x) ** 2), [2.0]) == pytest.approx([WIDE])


def test_leaves_points_alone_that_are_not_asked():
    x = rising_root(
        lambda x, _: (x - 1, np.ones_like(x)), np.zeros(2), np.full(2, 3.0), np.array([0.5, np.nan])
    )
    assert x[0] == 1
    assert np.isnan(x[1])
