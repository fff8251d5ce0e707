"""Sampled measures against the functions they were sampled from."""

from concurrent.futures import ThreadPoolExecutor

import numpy as np
import pytest
from scipy.special import i0

from eoscore.measure import Sampled


def well(v):
    """Length of a Gaussian well 1 - e^(-x^2) below v."""
    return 2 * np.sqrt(-np.log1p(-v))


def band(v):
    """Length of 1 - cos(x) on (-pi, pi) below v, by the half angle where that keeps the digits."""
    low = np.sqrt(np.clip(v, 0, 2) / 2)
    high = np.sqrt(np.clip(2 - v, 0, 2) / 2)
    return np.where(v < 1, 4 * np.arcsin(low), 2 * np.pi - 4 * np.arcsin(high))


@pytest.fixture
def gaussian():
    return Sampled(well, 0.5, scale=1.0, top=0.95, route="test")


@pytest.fixture
def lattice():
    return Sampled(band, 0.5, scale=1.0, breaks=(2.0,), route="test")


def test_values_come_back(gaussian):
    v = np.geomspace(1e-14, 0.95, 500)
    np.testing.assert_allclose(gaussian.volume(v), well(v), rtol=1e-14)
    assert gaussian.error < 1e-14


def test_the_density_is_the_derivative(gaussian):
    v = np.geomspace(1e-12, 0.94, 300)
    np.testing.assert_allclose(gaussian.density(v), 1 / ((1 - v) * np.sqrt(-np.log1p(-v))), rtol=1e-11)


def test_below_the_foot_is_a_pure_power(gaussian):
    v = gaussian.foot / 1024
    assert gaussian.volume(v) == pytest.approx(2 * np.sqrt(v), rel=1e-13)
    assert gaussian.density(v) == pytest.approx(1 / np.sqrt(v), rel=1e-13)


def test_shapes_are_kept(gaussian):
    assert gaussian.volume(0.5).shape == ()
    assert gaussian.density(np.full((2, 3), 0.5)).shape == (2, 3)


def test_a_band_edge_is_resolved(lattice):
    v = np.concatenate([np.linspace(0.01, 5, 200), 2 - np.geomspace(1e-12, 1e-2, 50)])
    np.testing.assert_allclose(lattice.volume(v), band(v), rtol=1e-13)


@pytest.mark.parametrize("b", [0.1, 1.0, 30.0])
def test_a_band_has_the_bessel_partition_function(lattice, b):
    """int e^(-b(1 - cos x)) dx over a period = 2 pi I_0(b) e^-b (DLMF 10.32.1)."""
    nodes = lattice.nodes(5.0)
    total = nodes.w @ np.exp(-b * nodes.v) + nodes.foot.volume
    assert total == pytest.approx(2 * np.pi * i0(b) * np.exp(-b), rel=1e-13)


def test_a_logarithmic_break_is_resolved():
    def omega(v):
        gap = np.abs(v - 1)
        bend = np.where(gap > 0, (v - 1) * np.log(np.where(gap > 0, gap, 1)), 0)
        return 4 * v + bend * v

    measure = Sampled(omega, 1.0, scale=1.0, breaks=(1.0,), top=3.0, route="test")
    v = np.concatenate([np.linspace(0.01, 3, 101), 1 + np.geomspace(1e-9, 1, 50)])
    np.testing.assert_allclose(measure.volume(v), omega(v), rtol=1e-12)


def test_noise_does_not_multiply_panels():
    rng = np.random.default_rng(7)
    calls = []

    def noisy(v):
        calls.append(v.size)
        return v * (1 + 1e-8 * rng.standard_normal(v.size))

    measure = Sampled(noisy, 1.0, scale=1.0, top=1.0, route="test")
    measure.volume(1.0)
    assert sum(calls) < 10_000
    assert measure.error < 1e-7


def test_unbounded_measures_grow_when_asked():
    measure = Sampled(lambda v: v + v**2, 1.0, scale=1.0, route="test")
    assert measure.volume(1e6) == pytest.approx(1e6 + 1e12, rel=1e-13)


def test_threads_may_ask_at_once():
    measure = Sampled(lambda v: v + v**2, 1.0, scale=1.0, route="test")
    with ThreadPoolExecutor(8) as pool:
        found = list(pool.map(lambda k: float(measure.volume(10.0**k)), range(-6, 7)))
    np.testing.assert_allclose(found, [10.0**k + 100.0**k for k in range(-6, 7)], rtol=1e-13)


def test_a_changed_measure_is_scaled_and_cut(gaussian):
    changed = gaussian.scaled(3.0).cut(0.5)
    assert changed.volume(0.9) == pytest.approx(3 * well(0.5), rel=1e-14)
    assert changed.density(0.7) == 0
    nodes = changed.nodes()
    assert nodes.w.sum() + nodes.foot.volume == pytest.approx(3 * well(0.5), rel=1e-13)


def test_the_error_rises_with_energy():
    measure = Sampled(
        lambda v: v, 1.0, scale=1.0, top=2.0, error=lambda v: np.where(v > 1, 1e-3, 1e-12), route="test"
    )
    measure.volume(2.0)
    low, high = measure.error_below([0.5, 1.9])
    assert low < 1e-11
    assert high == pytest.approx(1e-3, rel=1e-6)
    assert measure.error == pytest.approx(1e-3, rel=1e-6)
