"""Hundreds and thousands of wells along a line against sums over fine grids, which know nothing of wells."""

import numpy as np
import pytest

from eoscore.errors import NoAnswerError
from eoscore.formula import call, variable
from eoscore.formula.field import Field
from eoscore.measure import Powers, convolve, measure_of
from eoscore.measure.crowded import Crowd
from eoscore.measure.landscape import survey

S, L = 1e-30, 1e-6
x, y, rho = (variable(name) / L for name in ("x", "y", "rho"))
LEVELS = (0.003, 0.3, 0.99, 1.01, 4.0, 77.0)


def lattice(at, width=10.0):
    """Wells at whole numbers: 313 of them for a width of 10."""
    return (at / width) ** 2 + call("sin", np.pi * at) ** 2


def plain(at, width=10.0):
    return (at / width) ** 2 + np.sin(np.pi * at) ** 2


def length_below(v, level, step):
    """Length of an even function below a level, from its values at steps from 0, linear between: an error of step^2."""
    low, high = np.minimum(v[:-1], v[1:]), np.maximum(v[:-1], v[1:])
    return 2 * step * np.sum(np.clip((level - low) / np.maximum(high - low, 1e-300), 0.0, 1.0))


def partition(kT, width=10.0):
    """int e^(-V/kT) dx by the trapezoidal rule, which converges geometrically for entire functions that fall off."""
    at = np.arange(-8 * width * np.sqrt(kT) - 2, 8 * width * np.sqrt(kT) + 2, 1 / 256)
    return np.exp(-plain(at, width) / kT).sum() / 256


def summed(nodes, kT):
    return nodes.w @ np.exp(-nodes.v / (kT * S)) + nodes.foot.volume


@pytest.fixture(scope="module")
def wells():
    return measure_of(Field(("x",), S * lattice(x)))


def test_a_lattice_in_an_envelope_is_a_crowd_without_breaks(wells):
    assert isinstance(wells, Crowd)
    assert wells.breaks == ()
    assert wells.exponent == 0.5


@pytest.mark.parametrize("level", LEVELS)
def test_the_length_below_an_energy(wells, level):
    step = 2e-5
    v = plain(np.arange(0, 10 * np.sqrt(level) + 1, step))
    assert wells.volume(level * S) == pytest.approx(L * length_below(v, level, step), rel=1e-7)


def test_the_density_is_the_derivative(wells):
    v = np.array([0.1, 0.55, 3.3]) * S
    step = 1e-6 * v
    slope = (wells.volume(v + step) - wells.volume(v - step)) / (2 * step)
    np.testing.assert_allclose(wells.density(v), slope, rtol=1e-5)


@pytest.mark.parametrize("kT", [0.05, 0.4, 3.0])
def test_nodes_know_the_partition_function(wells, kT):
    assert summed(wells.nodes(60 * kT * S), kT) == pytest.approx(L * partition(kT), rel=1e-11)


def test_a_crowd_is_scaled_and_cut(wells):
    changed = wells.scaled(3.0).cut(2 * S)
    assert isinstance(changed, Crowd)
    assert changed.volume(7 * S) == pytest.approx(3 * wells.volume(2 * S), rel=1e-14)
    assert changed.density(3 * S) == 0
    nodes = changed.nodes()
    assert nodes.w.sum() + nodes.foot.volume == pytest.approx(3 * wells.volume(2 * S), rel=1e-12)


@pytest.mark.parametrize("k", [0.5, 1.0, 2.5])
@pytest.mark.parametrize("kT", [0.1, 1.0])
def test_partition_functions_multiply(wells, k, kT):
    """A power v^k has Z = Gamma(k + 1) kT^k."""
    from scipy.special import gamma

    joined = convolve(wells, Powers([(1.0, k)]))
    expected = L * partition(kT) * gamma(k + 1) * (kT * S) ** k
    assert summed(joined.nodes(50 * kT * S), kT) == pytest.approx(expected, rel=1e-8)


def test_two_crossed_lattices():
    both = convolve(measure_of(Field(("x", "y"), S * (lattice(x) + lattice(y)))), Powers([(1.0, 1.0)]))
    for kT in (0.2, 0.6):
        expected = (L * partition(kT)) ** 2 * kT * S
        assert summed(both.nodes(50 * kT * S), kT) == pytest.approx(expected, rel=1e-6)


def test_rings_in_the_plane():
    wells = measure_of(Field(("rho",), S * lattice(rho)))
    at = np.linspace(0, 20, 4_000_001)
    below = np.pi * np.diff(np.append(at, 20.0) ** 2) @ (plain(at) < 1.7)
    assert isinstance(wells, Crowd)
    assert wells.volume(1.7 * S) == pytest.approx(L**2 * below, rel=1e-5)


def test_wells_without_number_are_sampled_within_the_error():
    """31,000 wells, of which some 9,000 are followed."""
    wells = measure_of(Field(("x",), S * lattice(x, 100.0)))
    for level, step in ((1.5, 1e-4), (3000.0, 2e-3), (8000.0, 2e-3)):
        v = plain(np.arange(0, 100 * np.sqrt(level) + 1, step), 100.0)
        error = abs(wells.volume(level * S) / (L * length_below(v, level, step)) - 1)
        assert error < wells.error_below(level * S) + 1e-7
        assert wells.error_below(level * S) < 1e-4


def test_a_lattice_below_a_finite_depth():
    """Waves on a Gaussian: everything below the escape at 1 is held."""
    wave = 1 - (1 + 0.2 * call("cos", 2 * np.pi * x)) * call("exp", -((x / 30) ** 2)) / 1.2
    wells = measure_of(Field(("x",), S * wave))
    at = np.arange(0, 200, 1e-4)
    v = 1 - (1 + 0.2 * np.cos(2 * np.pi * at)) * np.exp(-((at / 30) ** 2)) / 1.2
    assert wells.top == pytest.approx(S, rel=1e-12)
    for level in (0.1, 0.5, 0.95):
        assert wells.volume(level * S) == pytest.approx(L * length_below(v, level, 1e-4), rel=1e-6)


def test_many_wells_of_no_smooth_shape_are_refused_in_words():
    cusps = (x / 10) ** 2 + call("abs", call("sin", np.pi * x)) ** 1.5
    with pytest.raises(NoAnswerError, match=r"more than \d+ wells along x.*put walls"):
        measure_of(Field(("x",), S * cusps))


def test_a_deep_well_far_out_among_too_many_is_refused_in_words():
    hidden = call("sin", np.pi * x) ** 2 - 5 * call("exp", -(((x - 2e5) / 1e4) ** 2))
    landscape = survey(Field(("x",), S * hidden))
    assert not landscape.holds
    assert "a deeper one may lie beyond" in landscape.why


def test_a_tilt_does_not_hide_the_bottom_of_thousands_of_wells():
    """sin^2 in an envelope about -250: the bottom is next to it, at a whole number."""
    landscape = survey(Field(("x",), S * (lattice(x, 100.0) + 0.05 * x)))
    assert landscape.holds
    assert landscape.bottom.position[0] == pytest.approx(-250 * L, abs=0.01 * L)
    assert landscape.bottom.kind == "quadratic"
    assert len(landscape.minima) == 1000


@pytest.mark.parametrize("kT", [0.1, 2.0])
def test_three_wells_with_shoulders_outside(kT):
    """(x/1.4)^2 + sin^2: the outer flanks have shoulders for ever, and no break tells of them."""
    joined = convolve(measure_of(Field(("x",), S * lattice(x, 1.4))), Powers([(1.0, 2.5)]))
    expected = L * partition(kT, 1.4) * 15 * np.sqrt(np.pi) / 8 * (kT * S) ** 2.5  # Gamma(7/2)
    assert summed(joined.nodes(60 * kT * S), kT) == pytest.approx(expected, rel=1e-8)
    assert joined.error < 1e-6
