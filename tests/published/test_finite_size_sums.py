"""Exact sums over the levels of an oscillator."""

import math

import pytest

from eoscore.constants import K_B, H
from eoscore.gas.levels import OscillatorLevels
from eoscore.measure.powers import Powers

FLOOR = Powers([(1.0, 0.0)])


def excited(x, dimensions):
    """N_ex at mu = lowest level, x = hbar omega/kT."""
    return float(OscillatorLevels((x * K_B,) * dimensions, FLOOR, "bose").moments(0.0, 1.0).N)


@pytest.mark.parametrize(
    ("x", "dimensions", "number"),
    [
        (0.1, 1, 29.04731312293595),
        (0.1, 2, 188.5823864744253),
        (0.1, 3, 1469.990194368076),
        (0.01, 1, 518.4885156445064),
        (0.01, 2, 16917.87085079344),
        (0.01, 3, 1227170.298514768),
    ],
)
def test_excited_number_at_the_lowest_level(x, dimensions, number):
    """sum_k [(1 - e^{-kx})^-D - 1] by mpmath; method of W. Ketterle, N. J. van Druten, PRA 54, 656 (1996)."""
    assert excited(x, dimensions) == pytest.approx(number, rel=1e-12, abs=0)


def test_one_dimension_asymptote():
    """(gamma - ln x)/x + 1/4 for x -> 0 (from memory; the next term is of order x)."""
    x = 0.01
    assert excited(x, 1) == pytest.approx((0.5772156649015329 - math.log(x)) / x + 0.25, rel=2e-7, abs=0)


def test_photons_between_curved_mirrors():
    """J. Klaers et al., Nature 468, 545 (2010): 77000 photons (from memory), 300 K, 41 GHz, two polarisations.

    The exact level sum of one polarisation is 39014.95470766, worked out with mpmath.
    """
    levels = OscillatorLevels((H * 4.1e10,) * 2, FLOOR, "bose")
    one = float(levels.moments(0.0, 300.0).N)
    assert one == pytest.approx(39014.95470766, rel=1e-10, abs=0)
    assert 2 * one == pytest.approx(77000, rel=0.02, abs=0)
