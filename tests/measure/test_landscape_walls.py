"""Bottoms and passes on walls of several shapes, against geometry by hand and root finding of another hand."""

from __future__ import annotations

import math

import pytest
from scipy.optimize import fsolve, minimize_scalar

from eoscore.formula import call, constant
from eoscore.formula.field import Field
from eoscore.measure.landscape import survey

from .potentials import SR84, E, G, S, exp, x, y, z

W, DEPTH = 5e-5, 5e-28
WELL = -DEPTH * exp(-2 * (x**2 + y**2 + z**2) / W**2) + SR84 * G * z


def _v(u, h):
    return -DEPTH * math.exp(-2 * (u * u + h * h) / W**2) + SR84 * G * h


def _lowest():
    return minimize_scalar(
        lambda h: _v(0, h), bounds=(-1e-5, 0), method="bounded", options={"xatol": 1e-14}
    ).fun


def _highest(place, low, high):
    """The highest V along a curve t -> (x, z) between two values of t, by SciPy."""
    options = {"xatol": 1e-12}
    found = minimize_scalar(lambda t: -_v(*place(t)), bounds=(low, high), method="bounded", options=options)
    return -found.fun


def test_a_bottom_on_a_bent_wall_and_an_oblique_one():
    """A can whose floor z = 0.1 y tilts: z + 0.02 x is least where (x, y) points along -(0.02, 0.1)."""
    walls = ((4 * S) ** 2 - x**2 - y**2, z - 0.1 * y, 6 * S - z)
    found = survey(Field(("x", "y", "z"), SR84 * 0.3 * (z + 0.02 * x), walls))
    low = -4 * S / math.hypot(0.02, 0.1)
    assert found.bottom.position == pytest.approx((0.02 * low, 0.1 * low, 0.01 * low), rel=1e-8)
    assert len(found.minima) == 1


def test_a_bottom_on_a_ball_that_is_kept_out():
    """On the sphere V = E (1 + z^2/S^2 + 0.1 z/S): least at z = -0.05 S; the poles are no minima."""
    v = E * (x**2 + y**2 + 2 * z**2) / S**2 + 0.1 * E * z / S
    found = survey(Field(("x", "y", "z"), v, (x**2 + y**2 + z**2 - S**2,)))
    assert found.bottom.position[2] == pytest.approx(-0.05 * S, rel=1e-6)
    assert {round(m.value / E, 9) for m in found.minima} == {1 - 0.0025}


def test_the_tip_of_a_funnel():
    floor = z - call("sqrt", x**2 + y**2)
    found = survey(Field(("x", "y", "z"), SR84 * G * z, (floor, 10 * S - z)))
    assert found.bottom.position == pytest.approx((0, 0, 0), abs=1e-12)


def test_a_pass_beside_a_rod():
    """A rod below the well closes the straight way out: the pass is where V is highest on its side."""
    found = survey(Field(("x", "y", "z"), WELL, (x**2 + (z + 6e-5) ** 2 - (3e-5) ** 2,)))

    def side(t):
        return 3e-5 * math.cos(t), -6e-5 + 3e-5 * math.sin(t)

    assert found.depth == pytest.approx(_highest(side, -0.5, 0.5) - _lowest(), rel=1e-9, abs=0)
    assert found.error <= 1e-8


def test_a_pass_along_an_oblique_floor():
    found = survey(Field(("x", "y", "z"), WELL, (z + 2e-5 - 0.5 * x,)))
    top = _highest(lambda t: (t, -2e-5 + 0.5 * t), -8e-5, -3e-5)
    assert found.depth == pytest.approx(top - _lowest(), rel=1e-9, abs=0)
    assert found.error <= 1e-8


def test_walls_that_just_meet_leave_no_slit():
    """A room x < 25 um and a passage x > 25 um of different widths meet in a line that leads nowhere."""
    room = call("max", 20e-6 - call("abs", y), x - 25e-6)
    passage = call("max", call("max", 3e-6 - call("abs", y), 25e-6 - x), x - 40e-6)
    barrier = 1e-28 * exp(-(((x - 30e-6) / 10e-6) ** 2)) - 1e-26 * x + constant(0) * y
    found = survey(Field(("x", "y"), barrier, (x + 20e-6, room, passage)))

    def minus_v(u):
        return -1e-28 * math.exp(-(((u - 30e-6) / 10e-6) ** 2)) + 1e-26 * u

    options = {"xatol": 1e-14}
    top = -minimize_scalar(minus_v, bounds=(25e-6, 35e-6), method="bounded", options=options).fun
    low = minimize_scalar(lambda u: -minus_v(u), bounds=(-5e-6, 5e-6), method="bounded", options=options).fun
    assert found.depth == pytest.approx(top - low, rel=1e-9, abs=0)


@pytest.mark.parametrize("turn", [20.0, 65.0, 110.0])
def test_a_leak_between_two_oblique_walls(turn):
    """A wedge that opens along no axis of the coordinates: on its middle line V is that of one dimension."""
    c, s = math.cos(math.radians(turn)), math.sin(math.radians(turn))
    along, across = c * x + s * y, c * y - s * x
    v = -E * exp(-2 * (along**2 + across**2) / S**2) + 0.05 * E * along / S
    walls = (0.5 * S - 0.2 * along - across, 0.5 * S - 0.2 * along + across)
    found = survey(Field(("x", "y"), v, walls))

    def minus_v(u):
        return math.exp(-2 * u * u) - 0.05 * u

    options = {"xatol": 1e-12}
    top = -minimize_scalar(minus_v, bounds=(-3, -0.5), method="bounded", options=options).fun
    low = minimize_scalar(lambda u: -minus_v(u), bounds=(-0.5, 0.5), method="bounded", options=options).fun
    assert found.depth == pytest.approx((top - low) * E, rel=1e-9, abs=0)


def test_a_way_out_over_a_well_that_is_not_known_says_what_it_may_be_wrong_by():
    """The saddle between two wells, by SciPy's root finder; a hill beside them offers a higher way out."""
    pieces = [
        (-2.1616, 0.8637, 1.0725, -0.9097),
        (-2.3017, -2.2439, 0.7765, 1.968),
        (0.4514, 2.4192, 1.3051, 0.815),
    ]
    v = (-0.0227 * x - 0.1189 * y) * (E / S)
    for a, b, w, depth in pieces:
        v = v - depth * E * exp(-2 * ((x / S - a) ** 2 + (y / S - b) ** 2) / w**2)

    def slope(u):
        parts = [
            (math.exp(-2 * ((u[0] - a) ** 2 + (u[1] - b) ** 2) / w**2) * 4 * d / w**2, a, b)
            for a, b, w, d in pieces
        ]
        return (
            -0.0227 + sum(e * (u[0] - a) for e, a, _ in parts),
            -0.1189 + sum(e * (u[1] - b) for e, _, b in parts),
        )

    turned = (0.9926 * x + 0.1211 * y) / S + 2.606
    found = survey(Field(("x", "y"), v, (turned,)))
    place = fsolve(slope, (-2.045, -1.047), xtol=1e-13)
    height = float(v.evaluate({"x": place[0] * S, "y": place[1] * S})) - found.bottom.value
    assert found.depth == pytest.approx(height, rel=found.error, abs=0)
    assert found.error <= 0.02
