"""Routes with closed forms: quadratic forms, walls, quasi-homogeneous potentials, functions of them."""

from math import gamma, pi

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from eoscore.errors import NoAnswerError
from eoscore.formula import call, constant, variable
from eoscore.formula.field import Field
from eoscore.measure import convolve, measure_of
from eoscore.measure.powers import Powers

S, L = 1e-30, 1e-6  # J and m: the units of an ultracold gas
x, y, z, r, rho = (variable(name) / L for name in ("x", "y", "z", "r", "rho"))
BALL = 4 * pi / 3 * L**3


def size(q):
    return call("abs", q)


def omega(coordinates, v, walls=()):
    return measure_of(Field(coordinates, S * v, tuple(walls)))


def power(measure):
    ((c, k),) = measure.powers()
    return c * S**k, k


@pytest.mark.parametrize(
    ("coordinates", "v", "c", "k"),
    [
        (("x", "y", "z"), x**2 + 4 * y**2 + x * y + z**2 + x + 3, BALL / np.sqrt(3.75), 1.5),
        (("x",), x**2 + 5 * x, 2 * L, 0.5),
        (("r",), r**3, BALL, 1.0),
        (("r",), r**12, BALL, 0.25),
        (("rho",), 2 * rho**2, pi * L**2 / 2, 1.0),
        (("x", "y", "z"), call("sqrt", x**2 + y**2 + 4 * z**2), BALL / 2, 3.0),
        (("x", "y", "z"), x**2 + y**2 + 1e8 * z**2, BALL / 1e4, 1.5),
        (("x", "y", "z"), size(x) + size(y) + 2 * size(z), 8 / 6 / 2 * L**3, 3.0),
        (("rho", "z"), rho**2 + z**4, pi * L**3 * 2 * gamma(1.25) / gamma(2.25), 1.25),
    ],
)
def test_a_power_law_has_its_closed_form(coordinates, v, c, k):
    found = power(omega(coordinates, v))
    assert found == pytest.approx((c, k), rel=1e-12)


@settings(max_examples=15, deadline=None)
@given(st.floats(0.5, 12), st.floats(0.5, 12))
def test_sums_of_powers_have_gamma_functions(p, q):
    """|x|^p + |y|^q < v has the area 4 Gamma(1 + 1/p) Gamma(1 + 1/q) / Gamma(1 + 1/p + 1/q) (Dirichlet)."""
    c, k = power(omega(("x", "y"), size(x) ** p + size(y) ** q))
    area = 4 * gamma(1 + 1 / p) * gamma(1 + 1 / q) / gamma(1 + 1 / p + 1 / q) * L**2
    assert (c, k) == pytest.approx((area, 1 / p + 1 / q), rel=1e-11)


@pytest.mark.parametrize("tilt", [0.1, 0.5, 1.5])
def test_a_tilted_cone_is_an_ellipsoid_off_centre(tilt):
    """In u = 2 z the region |u| + (tilt/2) u_z < v is r < v / (1 + e cos): 4 pi/3 / (1 - e^2)^2, e = tilt/2."""
    c, k = power(omega(("x", "y", "z"), call("sqrt", x**2 + y**2 + 4 * z**2) + tilt * z))
    assert (c, k) == pytest.approx((BALL / 2 / (1 - tilt**2 / 4) ** 2, 3), rel=1e-11)


def test_a_box_is_a_floor():
    walls = (L - size(variable("x")), L - variable("y"), variable("y"), variable("z"), 2 * L - variable("z"))
    assert omega(("x", "y", "z"), constant(3.0), walls).powers() == ((pytest.approx(4 * L**3), 0.0),)


def test_a_can_with_a_tilted_floor_is_linear():
    c, k = power(omega(("rho", "z"), z, (2 * L - variable("rho"), variable("z"))))
    assert (c, k) == pytest.approx((4 * pi * L**3, 1), rel=1e-13)


def test_a_biased_cone_is_a_square_below_the_root():
    measure = omega(("x", "y", "z"), call("sqrt", 1 + x**2 + y**2 + 4 * z**2))
    v = np.geomspace(1e-9, 1e6, 40)
    np.testing.assert_allclose(measure.volume(v * S), BALL / 2 * (v**2 + 2 * v) ** 1.5, rtol=1e-13)


def test_a_biased_field_with_a_separate_axis_gives_two_powers():
    """sqrt(U^2 + rho^2) and z^2: pi (v^2 + 2 U v) joined with v^2 gives E^4/6 + 2 U E^3/3, so E^3 + 3 U E^2."""
    place = omega(("x", "y", "z"), call("sqrt", 1 + x**2 + y**2) + z**2)
    (c3, k3), (c4, k4) = convolve(place, Powers([(1.0, 1.5)])).powers()
    assert (k3, k4) == (3, 4)
    assert 3 * c3 / (4 * c4 * S) == pytest.approx(3, rel=1e-12)


def test_a_biased_field_with_a_bent_axis():
    """sqrt(rho^2 + (U + z^2)^2) - U with p^2: rho(E) ~ E^3 + 2 U E^2 (Luiten, Reynolds, Walraven 1996, from memory)."""
    place = omega(("x", "y", "z"), call("sqrt", x**2 + y**2 + (1 + z**2) ** 2))
    energy = np.array([0.01, 0.1, 1.0, 10.0])
    states = convolve(place, Powers([(1.0, 1.5)])).density(energy * S)
    expected = energy**3 + 2 * energy**2
    np.testing.assert_allclose(states / states[0], expected / expected[0], rtol=1e-10)


def test_a_gaussian_well_has_logarithms_and_a_top():
    measure = omega(("x", "y", "z"), -call("exp", -2 * (x**2 + y**2 + 4 * z**2)))
    v = np.geomspace(1e-9, 0.999, 40)
    assert measure.top == pytest.approx(S, rel=1e-15)
    np.testing.assert_allclose(measure.volume(v * S), BALL / 2 * (-np.log1p(-v) / 2) ** 1.5, rtol=1e-13)
    nodes = measure.nodes(0.99 * S)
    assert nodes.w.sum() + nodes.foot.volume == pytest.approx(float(measure.volume(0.99 * S)), rel=1e-12)


def test_separate_pieces_leak_at_the_lowest_escape():
    measure = omega(("x", "y"), -call("exp", -(x**2)) - 2 * call("exp", -(y**2)))
    assert measure.top == pytest.approx(S, rel=1e-14)


@settings(max_examples=10, deadline=None)
@given(st.floats(-1.5, 1.5))
def test_rotation_changes_nothing(angle):
    c, s = np.cos(angle), np.sin(angle)
    u, w = c * x - s * y, s * x + c * y
    plain = omega(("x", "y"), call("sqrt", x**2 + 9 * y**2 + 1))
    turned = omega(("x", "y"), call("sqrt", u**2 + 9 * w**2 + 1))
    assert turned.volume(0.7 * S) == pytest.approx(float(plain.volume(0.7 * S)), rel=1e-12)


@pytest.mark.parametrize("scale", [0.1, 3.0])
def test_longer_lengths_hold_more(scale):
    small = omega(("x", "y", "z"), -call("exp", -(x**2) - y**2 - z**2))
    large = omega(("x", "y", "z"), -call("exp", -((x / scale) ** 2) - (y / scale) ** 2 - (z / scale) ** 2))
    assert large.volume(0.5 * S) == pytest.approx(scale**3 * float(small.volume(0.5 * S)), rel=1e-12)


def test_a_lower_top_never_holds_more():
    measure = omega(("x", "y", "z"), -call("exp", -(x**2) - y**2 - z**2))
    volumes = [float(measure.cut(top * S).volume(S)) for top in (0.2, 0.5, 0.9)]
    assert volumes == sorted(volumes)


@pytest.mark.parametrize(
    ("coordinates", "v"), [(("x", "y"), x + y**2), (("x", "y"), y**2 + 0 * x), (("x",), -(x**2))]
)
def test_what_holds_nothing_says_so(coordinates, v):
    with pytest.raises(NoAnswerError, match=r"holds nothing|no end"):
        omega(coordinates, v)
