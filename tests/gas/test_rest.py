"""The partition function of a measure, against incomplete Gamma functions."""

import math

import numpy as np
import pytest
from scipy.special import gammainc

from eoscore.gas.rest import boltzmann_of, thermal_nodes
from eoscore.measure.powers import Powers

KT = np.array([3e-30])  # J
COLD = np.zeros(1)


@pytest.mark.parametrize("top", [math.inf, 5.0, 0.2])
@pytest.mark.parametrize("k", [0.5, 1.0, 3.0])
def test_powers_with_and_without_top(k, top):
    """int_0^top e^{-bE} d(E^k) = Gamma(k + 1) b^-k P(k, b top) (DLMF 8.2.4), and its derivatives by b."""
    scale = float(KT[0])
    measure = Powers([(scale**-k, k)], top * scale)
    b = np.array([0.7, 1.0, 40.0])
    values = boltzmann_of(measure, KT, COLD)(b / scale)
    for n, value in enumerate(values):
        wanted = math.gamma(k + n + 1) * k / (k + n) * b ** -(k + n) * gammainc(k + n, b * top)
        assert value / scale**n == pytest.approx(wanted, rel=1e-12, abs=0)


@pytest.mark.parametrize("at", [1.0 + 2.0j, 0.8 - 5.0j])
def test_complex_inverse_energies(at):
    """The nodes are fine enough for the oscillation that a complex b brings."""
    scale = float(KT[0])
    whole = Powers([(scale**-1.5, 1.5)])
    b = np.array([at / scale])
    closed = boltzmann_of(whole, KT, COLD)(b)
    nodes = boltzmann_of(whole.cut(200 * scale), KT, np.array([20 * scale]))(b)
    for one, other in zip(closed, nodes, strict=True):
        assert abs(one - other) <= 1e-10 * abs(one)


def test_a_flat_floor_is_one_atom():
    v, w = thermal_nodes(Powers([(2.0, 0.0), (1.0, 1.0)], 1.0), np.ones(1), COLD)
    assert (v[0], w[0]) == (0.0, pytest.approx(2.0))
    assert w.sum() == pytest.approx(3.0, rel=1e-12, abs=0)


def test_nodes_at_a_step_keep_the_whole_measure():
    measure = Powers([(1.0, 2.0)], 50.0)
    v, w = thermal_nodes(measure, np.ones(1), np.array([30.0]))
    assert w.sum() == pytest.approx(2500.0, rel=1e-13, abs=0)
    assert w @ v == pytest.approx(2 / 3 * 50**3, rel=1e-13, abs=0)
