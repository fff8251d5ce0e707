"""Leaks along guides that run aslant or aside of the coordinates, against the same guide straightened out."""

import math

import pytest

from eoscore.formula import call, variable
from eoscore.formula.field import Field
from eoscore.measure.landscape import survey

S, E = 1e-5, 1e-29
x, y, z = (variable(name) / S for name in ("x", "y", "z"))
WELL = -8 * call("exp", -(x**2) / 2)
ASIDE = 0.5 * x**2 / (1 + x**2 / 16)  # from the bottom to a line 8 S aside
GUIDES = {
    "aslant": (y - 0.5 * x) ** 2 + z**2,
    "aside": (y - ASIDE) ** 2 + z**2,
    "aslant and bent": (y - 0.5 * x) ** 2 + (z - 0.3 * y**2 / (1 + y**2 / 9)) ** 2,
}


@pytest.mark.parametrize("guide", GUIDES.values(), ids=GUIDES)
def test_a_guide_leaks_at_infinity(guide):
    """Along the guide V is -8 e^(-x^2/2): the escape is at 0, which no line along a coordinate reaches."""
    found = survey(Field(("x", "y", "z"), E * (WELL + guide)))
    assert found.depth == pytest.approx(8 * E, rel=1e-9, abs=0)
    assert found.escape.position is None


@pytest.mark.parametrize("guide", GUIDES.values(), ids=GUIDES)
def test_a_tilted_guide_leaks_over_the_same_pass(guide):
    """A tilt along the guide: the depth is that of the well in one dimension."""
    line = survey(Field(("x",), E * (WELL + 0.2 * x)))
    found = survey(Field(("x", "y", "z"), E * (WELL + 0.2 * x + guide)))
    assert found.depth == pytest.approx(line.depth, rel=1e-9, abs=0)
    assert found.escape.position[0] == pytest.approx(line.escape.position[0], rel=1e-6, abs=0)


def test_a_plane_that_holds_everywhere_has_no_leak():
    found = survey(Field(("x", "y"), E * (x**2 + 0.3 * (y - call("sin", x)) ** 2)))
    assert found.depth == math.inf
