"""Rays about bottoms and boxes above, against quadratures over one coordinate."""

import numpy as np
import pytest
from scipy.integrate import quad

from eoscore.errors import NoAnswerError
from eoscore.formula import call, variable
from eoscore.formula.field import Field
from eoscore.measure import measure_of
from eoscore.measure.cells import cells
from eoscore.measure.landscape import survey
from eoscore.measure.landscape_record import Landscape, Minimum

S, L = 1e-30, 1e-6
x, y, z, rho = (variable(name) / L for name in ("x", "y", "z", "rho"))
RANGE = 5  # of the focused beam below


def beam(radius2):
    widening = 1 + (z / RANGE) ** 2
    return -call("exp", -2 * radius2 / widening) / widening


def beam_volume(v):
    """Slices of a focused beam are discs of area pi/2 w^2 ln(1 / ((1 - v) w^2)), w^2 = 1 + (z/zR)^2."""
    end = RANGE * np.sqrt(v / (1 - v))

    def disc(at):
        width = 1 + (at / RANGE) ** 2
        return -np.pi / 2 * width * np.log((1 - v) * width)

    return 2 * L**3 * quad(disc, 0, end, epsrel=1e-12, epsabs=0)[0]


@pytest.mark.parametrize(("coordinates", "radius2"), [(("x", "y", "z"), x**2 + y**2), (("rho", "z"), rho**2)])
def test_a_focused_beam_below_a_knife(coordinates, radius2):
    field = Field(coordinates, S * beam(radius2))
    measure = measure_of(field, survey(field), 0.8 * S)
    assert measure.route == "about the bottom"
    assert measure.top == 0.8 * S
    for v in (1e-6, 0.1, 0.5, 0.79):
        assert measure.volume(v * S) == pytest.approx(beam_volume(v), rel=1e-11)


def test_a_focused_beam_at_its_threshold_holds_no_finite_number():
    with pytest.raises(NoAnswerError, match=r"infinite.*E_max"):
        measure_of(Field(("rho", "z"), S * beam(rho**2)))


def test_a_tilted_cone_with_curvature():
    """Along a ray h q + c q^2 = v, so the rest is an integral over the polar angle."""
    field = Field(
        ("x", "y", "z"), S * (call("sqrt", x**2 + y**2 + 4 * z**2) + 0.3 * z + 0.1 * (x**2 + y**2 + z**2))
    )
    measure = measure_of(field)

    def ray(angle, v):
        h = np.sqrt(np.sin(angle) ** 2 + 4 * np.cos(angle) ** 2) + 0.3 * np.cos(angle)
        return ((np.sqrt(h * h + 0.4 * v) - h) / 0.2) ** 3 / 3 * np.sin(angle)

    for v in (0.1, 1.0, 10.0):
        expected = 2 * np.pi * L**3 * quad(ray, 0, np.pi, (v,), epsrel=1e-12)[0]
        assert measure.volume(v * S) == pytest.approx(expected, rel=1e-9)


def double_well(v):
    """(x^2 - 1)^2 + (1 + x^2)(y^2 + z^2): slices are discs of area pi (v - (x^2 - 1)^2) / (1 + x^2)."""
    inner, outer = np.sqrt(max(1 - np.sqrt(v), 0.0)), np.sqrt(1 + np.sqrt(v))
    area = quad(lambda at: np.pi * (v - (at**2 - 1) ** 2) / (1 + at**2), inner, outer, epsrel=1e-12, epsabs=0)
    return 2 * L**3 * area[0]


@pytest.fixture(scope="module")
def joined():
    """A measure of the double well; the landscape is written down, so that boxes alone are tested."""
    field = Field(("x", "y", "z"), S * ((x**2 - 1) ** 2 + (1 + x**2) * (y**2 + z**2)))
    hessian = np.diag([8.0, 4.0, 4.0]) * S / L**2
    minima = tuple(Minimum((side * L, 0.0, 0.0), 0.0, "quadratic", hessian) for side in (1.0, -1.0))
    return cells(field, Landscape(field.coordinates, minima[0], minima), 3 * S)


@pytest.mark.parametrize("v", [1e-4, 0.1, 0.5, 0.9, 1.0, 1.1, 2.0, 3.0])
def test_a_double_well_in_space(joined, v):
    error = abs(joined.volume(v * S) / double_well(v) - 1)
    assert error < 3e-4  # pointwise; sums over nodes average the scatter of the boxes
    assert error < max(joined.error, 1e-12)


@pytest.mark.parametrize("T", [0.05, 0.1, 0.2])
def test_a_double_well_has_the_partition_function_of_its_slices(joined, T):
    """int e^(-V/T) = int dx e^(-(x^2 - 1)^2/T) pi T / (1 + x^2), but for e^(-3/T) above the ceiling."""
    nodes = joined.nodes()
    total = nodes.w @ np.exp(-nodes.v / S / T) + nodes.foot.volume
    slices = quad(
        lambda at: np.exp(-((at**2 - 1) ** 2) / T) * np.pi * T / (1 + at**2), 0, np.inf, epsrel=1e-12
    )[0]
    assert total == pytest.approx(2 * L**3 * slices, rel=1e-5 if T < 0.15 else 5e-5)


def test_a_round_wall_stops_a_round_well():
    """x^2 + y^2 within the unit circle: pi v up to the wall, pi above."""
    field = Field(("x", "y"), S * (x**2 + y**2), (1 - x**2 - y**2,))
    measure = measure_of(field, ceiling=2 * S)
    for v, area in ((0.01, 0.01), (0.5, 0.5), (0.9, 0.9), (1.5, 1.0)):
        assert measure.volume(v * S) == pytest.approx(np.pi * area * L**2, rel=1e-5)


def test_an_outside_beyond_the_pass_is_not_counted():
    """x^2 - x^3/3 + y^2 + xy^2/10 leaks over x = 2 at 4/3; the slices of x are chords of 2 sqrt(...)."""
    field = Field(("x", "y"), S * (x**2 - x**3 / 3 + y**2 * (1 + x / 10)))
    measure = measure_of(field)

    def chord(at):
        return 2 * np.sqrt(max(4 / 3 - at**2 + at**3 / 3, 0.0) / (1 + at / 10))

    expected = L**2 * quad(chord, -1, 2, epsrel=1e-10)[0]
    assert measure.top == pytest.approx(4 / 3 * S, rel=1e-8)
    assert measure.volume(4 / 3 * S) == pytest.approx(expected, rel=2e-4)
    assert measure.volume(S) < expected
