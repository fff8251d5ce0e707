"""Bottoms and passes on creases, in corners and on tips: minima known in closed form, and of published problems."""

import math

import pytest

from eoscore.formula import call, variable
from eoscore.formula.creases import creases
from eoscore.formula.field import Field
from eoscore.measure.landscape import survey

S, E = 1e-5, 1e-29
x, y, z = (variable(name) / S for name in "xyz")


def _of(name):
    return lambda *args: call(name, *args)


size, root, exp, greatest, least = map(_of, ("abs", "sqrt", "exp", "max", "min"))

# Minima (place, value) by hand: along the crease each is one of a parabola.
BOTTOMS = {
    "a cube": (greatest(size(x), size(y), size(z) / 2), (0, 0, 0), 0),
    "an octahedron aslant": (size(x + y) + size(y - z + 0.2) + size(x + 2 * z - 0.1), (0.3, -0.3, -0.1), 0),
    "pulled out of a corner": (
        size(x) + 1.1 * size(y) + 1.2 * size(z) + 2 * (x + y + z - 1) ** 2,
        (0.75, 0, 0),
        0.875,
    ),
    "a bent crease": (size(x + y**2) + 0.1 * y**2, (0, 0), 0),
    "a bent crease, tilted": (
        size(x + y**2) + (y - 1) ** 2 + 0.3 * x,
        (-1 / 0.49, 1 / 0.7),
        0.09 / 0.49 - 0.3 / 0.49,
    ),
    "between two bowls": (greatest(x**2 + y**2, (x - 1) ** 2 + y**2), (0.5, 0), 0.25),
    "along a bent line of tips": (
        root((x - 0.5 * z**2) ** 2 + y**2) + 0.3 * z**2 + 0.1 * z,
        (0.5 / 36, 0, -1 / 6),
        -1 / 120,
    ),
}
# L. Luksan, J. Vlcek, Test problems for nonsmooth unconstrained and linearly constrained optimization, Technical
# Report 798, Prague 2000 (from memory).
PUBLISHED = {
    "crescent": (greatest(x**2 + (y - 1) ** 2 + y - 1, -(x**2) - (y - 1) ** 2 + y + 1), (0, 0), 0),
    "CB3": (greatest(x**4 + y**2, (2 - x) ** 2 + (2 - y) ** 2, 2 * exp(y - x)), (1, 1), 2),
    "DEM": (greatest(5 * x + y, -5 * x + y, x**2 + y**2 + 4 * y), (0, -3), -3),
    "QL": (x**2 + y**2 + 10 * greatest(0, 4 - 4 * x - y, 6 - x - 2 * y), (1.2, 2.4), 7.2),
    "LQ": (greatest(-x - y, -x - y + x**2 + y**2 - 1), (math.sqrt(0.5), math.sqrt(0.5)), -math.sqrt(2)),
    "Mifflin 1": (-x + 20 * greatest(x**2 + y**2 - 1, 0), (1, 0), -1),
    "Mifflin 2": (-x + 2 * (x**2 + y**2 - 1) + 1.75 * size(x**2 + y**2 - 1), (1, 0), -1),
}


def _field(v):
    return Field(tuple(sorted(v.variables)), E * v)


@pytest.mark.parametrize("name", [*BOTTOMS, *PUBLISHED])
def test_a_bottom_that_is_not_smooth(name):
    v, place, value = (BOTTOMS | PUBLISHED)[name]
    found = survey(_field(v))
    assert found.bottom.position == pytest.approx([S * x for x in place], rel=1e-11, abs=1e-13 * S)
    assert found.bottom.value == pytest.approx(value * E, rel=1e-13, abs=1e-15 * E)
    assert len(found.minima) == 1


# Passes: of the cubic x^2 - x^3/3 at x = 2, 4/3 high, and where a bowl meets a slope.
PASSES = {
    "a bowl under a slope": (least(x**2 + y**2, 2 - x), (1, 0), 1),
    "the same, sheared": ((y - 0.2 * x) ** 2 + least(x**2, 1.5 - 0.5 * x), (1, 0.2), 1),
    "a bent gutter": (size(y - 0.3 * x**2) + x**2 - x**3 / 3, (2, 1.2), 4 / 3),
    "a bent funnel": (root((y - 0.3 * x**2) ** 2 + z**2) + x**2 - x**3 / 3, (2, 1.2, 0), 4 / 3),
}


@pytest.mark.parametrize("name", PASSES)
def test_a_pass_that_is_not_smooth(name):
    v, place, height = PASSES[name]
    found = survey(_field(v))
    assert found.depth == pytest.approx(height * E, rel=1e-12)
    assert found.escape.position == pytest.approx([S * x for x in place], rel=1e-6, abs=1e-9 * S)
    assert found.error <= 1e-8


def test_where_a_formula_is_creased():
    u, v = variable("u"), variable("v")
    found = creases(size(u - 1) + greatest(u, v**2) + root(4 * u**2 + (v - 3) ** 2 / 2), ("u", "v"))
    assert set(found) == {(u - 1,), (u - v**2,), (u, v - 3)}
    assert creases(root(u**2 + 1) * exp(-(v**2)), ("u", "v")) == ()
