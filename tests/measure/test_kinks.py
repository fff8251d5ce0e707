"""Where formulas have kinks and jumps, against places that are known."""

from __future__ import annotations

import numpy as np
import pytest

from eoscore.formula import both, call, choose, less, variable
from eoscore.measure.kinks import jumps_of, kinks_of
from eoscore.measure.landscape_pieces import monotone_pieces

X = variable("x")
SIGN = call("sign", X - 2)
BOX = choose(both(less(X, 3.0), less(-1.0, X)), X**2, 2 * X**2)


@pytest.mark.parametrize(
    ("formula", "kinks", "jumps"),
    [
        (X**2, (), ()),
        (call("abs", X), (0,), ()),
        (call("sqrt", (X - 1) ** 2), (1,), ()),
        (call("sqrt", X**2 + 1), (), ()),
        (call("abs", X - 1) ** 1.5, (1,), ()),
        (call("min", (X - 3) ** 2, (X + 3) ** 2), (0,), ()),
        (call("max", call("abs", X), 1), (-1, 0, 1), ()),
        (choose(less(X, 0.0), -3 * X, X), (0,), ()),
        (BOX, (-1, 3), (-1, 3)),
        (X * SIGN, (2,), (2,)),
        (call("min", (X - 0.57) ** 2, 4.0), (-1.43, 2.57), ()),
    ],
)
def test_known_places(formula, kinks, jumps):
    assert kinks_of(formula, "x", -100, 100) == pytest.approx(kinks, abs=1e-12)
    assert jumps_of(formula, "x", -100, 100) == pytest.approx(jumps, abs=1e-12)


def test_kinks_between_two_places_only():
    waves = call("abs", call("sin", X))
    assert kinks_of(waves, "x", 1, 10) == pytest.approx([np.pi, 2 * np.pi, 3 * np.pi])


def test_a_jump_is_a_piece_of_no_length():
    falls = X - choose(less(X, 2.0), 0.0, 5.0)
    pieces = monotone_pieces(falls, "x", (-10, 10), jumps_of(falls, "x"))
    assert pieces.signs.tolist() == [1, -1, 1]
    assert pieces.points[1:3] == pytest.approx([2, 2], rel=1e-14)
    assert pieces.points[1] < 2 < pieces.points[2]


@pytest.mark.parametrize("place", [-0.57, 1e-6, 3e5])
def test_kinks_of_any_size_without_ends(place):
    """Brackets reach from 1e-36 to 1e24."""
    hat = call("min", ((X - place) / place) ** 2, 4.0)
    assert kinks_of(hat, "x") == pytest.approx(sorted([-place, 3 * place]), rel=1e-12)
