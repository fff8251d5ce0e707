"""Axes that change the trap, axes that change the state, and the order in which they come back."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

import eoscore
from eoscore.answer.grid import Grid
from eoscore.answer.holding import HeldGases
from eoscore.language.dimension import ONE
from eoscore.language.question import Axis


def axis(name, points, *, thermodynamic):
    return Axis(name, "list", tuple(float(i) for i in range(points)), points, ONE, None, thermodynamic)


axes_of = st.permutations("abcd").flatmap(
    lambda names: st.lists(st.tuples(st.integers(1, 4), st.booleans()), max_size=4).map(
        lambda parts: tuple(axis(n, p, thermodynamic=t) for n, (p, t) in zip(names, parts, strict=False))
    )
)


def test_a_question_without_over_is_one_stop_without_axes():
    grid = Grid(())
    assert [stop.values for stop in grid.stops()] == [{}]
    assert grid.assemble([np.array(3.0)]).shape == ()


@given(axes_of)
def test_every_point_comes_back_where_its_names_say(axes):
    grid = Grid(axes)
    weights = {name: 10.0**power for power, name in enumerate("abcd")}

    def value(stop):
        arrays = grid.arrays({})
        return sum((weights[n] * v for n, v in (arrays | stop.values).items()), np.array(0.0))

    whole = grid.assemble([value(stop) for stop in grid.stops()])
    meshes = np.meshgrid(*(a.values for a in axes), indexing="ij") if axes else []
    expected = sum((weights[a.name] * mesh for a, mesh in zip(axes, meshes, strict=True)), np.array(0.0))
    np.testing.assert_array_equal(whole, expected)
    assert whole.shape == grid.shape


def test_the_first_name_runs_slowest():
    grid = Grid((axis("P", 2, thermodynamic=False), axis("w", 2, thermodynamic=False)))
    assert [stop.values for stop in grid.stops()] == [
        {"P": 0.0, "w": 0.0},
        {"P": 0.0, "w": 1.0},
        {"P": 1.0, "w": 0.0},
        {"P": 1.0, "w": 1.0},
    ]


@pytest.mark.parametrize("over", [("N", "P"), ("P", "N")])
def test_quantities_with_entries_keep_them_last(over):
    grid = Grid(tuple(axis(name, 2 + (name == "N"), thermodynamic=name == "N") for name in over))
    whole = grid.assemble([np.full((1, 3), stop.values["P"]) for stop in grid.stops()], (3,))
    assert whole.shape == (*grid.shape, 3)


def test_gases_that_differ_by_a_s_alone_share_their_states():
    text = "gas a { m = 84 u\na_s = 100(1) a0 }\ntrap b { V(x) = 1e-20 N/m*x^2 }\nfind freq for a in b\n"
    program, held = eoscore.loads(text).program, HeldGases()
    (literal,) = program.literals
    one, other = (held.of(program.bind("a", "b", {}, {literal.index: a_s})) for a_s in (5e-9, 6e-9))
    assert (one.gas.a_s, other.gas.a_s) == (5e-9, 6e-9)
    assert one.model is other.model
