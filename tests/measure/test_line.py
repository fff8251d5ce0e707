"""The route of one coordinate against inverse functions that are known."""

import numpy as np
import pytest
from scipy.special import iv

from eoscore.errors import NoAnswerError
from eoscore.formula import call, choose, less, variable
from eoscore.formula.field import Field
from eoscore.measure import measure_of
from eoscore.measure.landscape import survey

S, L = 1e-30, 1e-6
x, r, rho = (variable(name) / L for name in ("x", "r", "rho"))
SPREAD = np.geomspace(1e-9, 0.99, 30)


def omega(coordinate, v, walls=()):
    return measure_of(Field((coordinate,), S * v, tuple(walls)))


def double_well(v):
    outer, inner = np.sqrt(1 + np.sqrt(v)), np.sqrt(np.maximum(1 - np.sqrt(v), 0))
    return 2 * L * (outer - inner)


def ring(v):
    return np.pi * L**2 * np.where(v < 1, 2 * np.sqrt(v), 1 + np.sqrt(v))


def test_a_double_well_counts_both_halves_and_their_joining():
    measure = omega("x", (x**2 - 1) ** 2)
    v = np.concatenate([SPREAD, [0.9999, 1.0001, 2, 1e3]])
    np.testing.assert_allclose(measure.volume(v * S), double_well(v), rtol=1e-11)
    assert measure.breaks == (pytest.approx(S),)
    assert measure.exponent == 0.5


def test_a_ring_in_the_plane():
    measure = omega("rho", (rho**2 - 1) ** 2)
    v = np.concatenate([SPREAD, [1.0001, 2, 1e3]])
    np.testing.assert_allclose(measure.volume(v * S), ring(v), rtol=1e-11)


def test_a_gaussian_far_from_the_origin_keeps_its_digits():
    measure = omega("x", 1 - call("exp", -2 * ((x - 1000) / 10) ** 2) + 0 * call("abs", x))
    np.testing.assert_allclose(
        measure.volume(SPREAD * S), 20 * L * np.sqrt(-np.log1p(-SPREAD) / 2), rtol=1e-11
    )


def test_a_leak_over_a_pass():
    """x^2 - x^3/3 has its pass at x = 2, 4/3 above the bottom; at that height the other end is at x = -1."""
    measure = omega("x", x**2 - x**3 / 3)
    assert measure.top == pytest.approx(4 / 3 * S, rel=1e-12)
    assert measure.volume(4 / 3 * S) == pytest.approx(3 * L, rel=1e-8)


def test_a_wall_ends_a_well():
    """x^2 with a wall at L: symmetric below v = 1, the wall on one side above."""
    measure = omega("x", x**2 + 0 * call("abs", x), (L - variable("x"),))
    assert measure.volume(0.25 * S) == pytest.approx(L, rel=1e-12)
    assert measure.volume(4 * S) == pytest.approx(3 * L, rel=1e-12)


@pytest.mark.parametrize("b", [0.3, 3.0])
def test_a_lattice_band_has_the_bessel_partition_function(b):
    """int e^(-b(1 - cos k)) dk over the zone = 2 pi I_0(b) e^-b (DLMF 10.32.1)."""
    nodes = omega("x", 1 - call("cos", x), (np.pi * L - call("abs", variable("x")),)).nodes(5 * S)
    total = nodes.w @ np.exp(-b * nodes.v / S) + nodes.foot.volume
    assert total == pytest.approx(2 * np.pi * L * iv(0, b) * np.exp(-b), rel=1e-11)


def test_a_wall_never_adds():
    free = omega("x", (x**2 - 1) ** 2)
    walled = omega("x", (x**2 - 1) ** 2, (variable("x") + L / 2,))
    v = np.linspace(0.1, 3, 20) * S
    assert np.all(walled.volume(v) <= free.volume(v) * (1 + 1e-12))


@pytest.mark.parametrize("v", [x, x**3, -call("abs", x)])
def test_a_slope_holds_nothing(v):
    with pytest.raises(NoAnswerError, match="holds nothing"):
        omega("x", v)


def test_a_pole_at_the_centre_is_no_slope_to_measure_wells_by():
    """r^2/2 + c/r^2 = e at r^2 = e +- sqrt(e^2 - 2 c), the bottom at r = (2 c)^(1/4), where V is sqrt(2 c)."""
    c = 0.07
    field = Field(("r",), S * (r**2 / 2 + c / r**2))
    bottom = survey(field).bottom
    assert bottom.position[0] == pytest.approx(L * (2 * c) ** 0.25, rel=1e-14)
    assert bottom.value == pytest.approx(S * np.sqrt(2 * c), rel=1e-14)
    assert bottom.curvatures == pytest.approx((0, 0, 4 * S / L**2), rel=1e-13)
    v = np.geomspace(1e-12, 1e4, 40)
    low, root = np.sqrt(2 * c), np.sqrt(v * (v + 2 * np.sqrt(2 * c)))
    outer, product = v + low + root, low**2 / (v + low + root)
    shell = 2 * root * (outer + np.sqrt(outer * product) + product) / (np.sqrt(outer) + np.sqrt(product))
    np.testing.assert_allclose(measure_of(field).volume(v * S), 4 / 3 * np.pi * L**3 * shell, rtol=1e-11)


@pytest.mark.parametrize("more", [0.0, 0 * call("abs", variable("x"))], ids=["closed form", "line"])
def test_a_power_that_leaps_from_nothing_to_everything(more):
    """x^1000000: Omega is the width of a box but for a factor v^(1e-6)."""
    measure = omega("x", x**1_000_000 + more)
    np.testing.assert_allclose(measure.volume(SPREAD * S), 2 * L * SPREAD**1e-6, rtol=1e-12)


def high(v):
    return np.sqrt(np.maximum(v, 0))


STEPS = [
    # V, where it is least, and the length below v, all in units of S and L
    (
        x**2 + choose(less(x, 1.0), 0.0, 1.0),
        0,
        lambda v: high(v) + np.maximum(np.minimum(high(v), 1), high(v - 1)),
    ),
    (
        x**2 + choose(less(x, 1.0), 1.5, 0.0),
        1,
        lambda v: high(v - 0.5) + np.minimum(high(v - 0.5), 1) + high(v + 1) - 1,
    ),
    (-choose(less(call("abs", x), 1.0), 1.0, 0.0), 0, lambda v: 2 + 0 * v),
    (
        call("abs", x) - choose(less(call("abs", x - 5.5), 0.5), 10.0, 0.0),
        5,
        lambda v: np.minimum(v, 1) + 2 * np.maximum(v - 5, 0),
    ),
]


@pytest.mark.parametrize(("potential", "place", "length"), STEPS)
def test_steps_go_up_and_down(potential, place, length):
    """V jumps: its least value may stand at the side of a step, and the length below v has kinks at both its ends."""
    field = Field(("x",), S * potential)
    assert survey(field).bottom.position[0] == pytest.approx(place * L, rel=1e-9, abs=1e-18)
    measure = measure_of(field)
    v = np.array([0.1, 0.3, 0.7, 1.2, 1.7, 2.5, 6, 9])
    v = v[v * S < measure.top]
    np.testing.assert_allclose(measure.volume(v * S), length(v) * L, rtol=1e-11)


def test_a_core_is_cut_out():
    """V(r) = r beyond a core that is higher by far: a shell of 4 pi/3 ((1 + v)^3 - 1)."""
    v = np.array([0.1, 1.0, 10.0])
    measure = omega("r", r + choose(less(r, 1.0), 100.0, 0.0))
    np.testing.assert_allclose(measure.volume(v * S), 4 * np.pi / 3 * L**3 * ((1 + v) ** 3 - 1), rtol=1e-11)


def test_poles_that_cancel_where_both_are_infinite():
    """(r0/r)^12 - 2 (r0/r)^6: bottom -1 at r0, curvature 72/r0^2; far inside it is infinity less infinity."""
    found = survey(Field(("r",), S * (r**-12 - 2 * r**-6)))
    assert found.bottom.position[0] == pytest.approx(L, rel=1e-13)
    assert found.bottom.curvatures == pytest.approx((0, 0, 72 * S / L**2), rel=1e-12)
    assert found.depth == pytest.approx(S, rel=1e-12)
