"""Convolutions against Beta functions, Bessel functions and SciPy's quadrature."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.integrate import quad
from scipy.special import beta, iv

from eoscore.measure import Powers, Sampled, convolve


def sampled(c, k, **more):
    return Sampled(lambda v: c * v**k, k, scale=1.0, route="test", **more)


def joined(k, q):
    """int_0^1 k v^(k-1) (1 - v)^q dv = k B(k, q + 1) (DLMF 5.12.1)."""
    return k * beta(k, q + 1)


@given(st.floats(0.1, 6), st.floats(0.1, 6))
def test_powers_join_by_beta_functions(k, q):
    ((c, total),) = convolve(Powers([(2.0, k)]), Powers([(3.0, q)])).powers()
    assert total == pytest.approx(k + q)
    assert c == pytest.approx(6 * joined(k, q), rel=1e-12)


@pytest.mark.parametrize(("k", "q"), [(0.5, 1.5), (0.25, 1.5), (3.0, 1.5), (1 / 12, 1.5), (0.5, 0.5)])
def test_quadrature_agrees_with_the_beta_function(k, q):
    measure = convolve(sampled(2.0, k), Powers([(3.0, q)]))
    v = np.geomspace(1e-9, 1e2, 40)
    np.testing.assert_allclose(measure.volume(v), 6 * joined(k, q) * v ** (k + q), rtol=2e-13)


def test_a_floor_is_a_factor():
    measure = convolve(Powers([(5.0, 0.0)]), sampled(2.0, 0.5))
    assert measure.volume(4.0) == pytest.approx(20, rel=1e-14)


def test_a_floor_within_a_sum_counts_once():
    """(2 + v) joined with sampled v is 2 v + v^2/2."""
    measure = convolve(Powers([(2.0, 0.0), (1.0, 1.0)]), sampled(1.0, 1.0))
    assert measure.volume(3.0) == pytest.approx(6 + 4.5, rel=1e-12)


def test_the_lowest_top_holds():
    measure = convolve(sampled(1.0, 1.0, top=2.0), sampled(1.0, 1.0, top=3.0))
    assert measure.top == 2
    assert measure.volume(9.0) == pytest.approx(2, rel=1e-12)


def test_the_order_does_not_matter():
    a = Sampled(lambda v: v + v**2, 1.0, scale=1.0, top=4.0, route="a")
    b = Sampled(lambda v: np.sqrt(v) * (1 + v), 0.5, scale=1.0, top=5.0, route="b")
    v = np.linspace(0.01, 4, 50)
    np.testing.assert_allclose(convolve(a, b).volume(v), convolve(b, a).volume(v), rtol=1e-12)


@pytest.mark.parametrize("energy", [0.1, 0.5, 0.9])
def test_two_gaussian_wells_agree_with_scipy(energy):
    well = Sampled(lambda v: 2 * np.sqrt(-np.log1p(-v)), 0.5, scale=1.0, top=0.95, route="test")
    reach = np.sqrt(-np.log1p(-energy))

    def chord(x):
        return 4 * np.sqrt(max(-np.log1p(-(energy + np.expm1(-x * x))), 0.0))

    expected = quad(chord, 0, reach, epsabs=0, epsrel=1e-12)[0]
    assert convolve(well, well).volume(energy) == pytest.approx(expected, rel=1e-11)


def band(v):
    """Length of 1 - cos(x) on (-pi, pi) below v."""
    low, high = np.sqrt(np.clip(v, 0, 2) / 2), np.sqrt(np.clip(2 - v, 0, 2) / 2)
    return np.where(v < 1, 4 * np.arcsin(low), 2 * np.pi - 4 * np.arcsin(high))


@pytest.fixture(scope="module")
def plane():
    """Two bands 1 - cos x, the first with a van Hove logarithm in their sum."""
    line = Sampled(band, 0.5, scale=1.0, breaks=(2.0,), route="band")
    return convolve(line, line)


@pytest.mark.parametrize("b", [0.2, 1.0, 10.0])
def test_a_plane_of_bands_has_the_squared_partition_function(plane, b):
    nodes = plane.nodes(9.0)
    total = nodes.w @ np.exp(-b * nodes.v) + nodes.foot.volume
    assert total == pytest.approx((2 * np.pi * iv(0, b) * np.exp(-b)) ** 2, rel=1e-11)


def test_a_plane_of_bands_fills_its_zone(plane):
    assert plane.breaks == (2.0, 4.0)
    assert plane.volume(4.5) == pytest.approx(4 * np.pi**2, rel=1e-11)


@settings(max_examples=10, deadline=None)
@given(st.floats(0.3, 3), st.floats(0.3, 3))
def test_the_stated_error_holds(k, q):
    measure = convolve(sampled(1.0, k), sampled(1.0, q))
    true = joined(k, q) * 2.0 ** (k + q)
    assert abs(measure.volume(2.0) / true - 1) <= 10 * measure.error
