"""alpha from N and T."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from eoscore.measure import Powers
from eoscore.state.classical import Classical
from eoscore.state.closed import ClosedBose
from eoscore.state.degeneracy import alpha_of_number
from eoscore.state.nodes import NodeBose
from eoscore.state.steps import StepFermi

EXPONENTS = [0.5, 1.0, 1.5, 2.0, 3.0, 4.5]


def back_and_forth(ensemble, alpha, kT):
    return alpha_of_number(ensemble, ensemble.count(alpha, kT)[0], kT)


@settings(max_examples=60, deadline=None)
@given(st.sampled_from(EXPONENTS), st.floats(-6, 2.5), st.floats(-3, 3))
def test_bosons(exponent, log_alpha, log_kT):
    """Close to saturation N itself tells alpha only to eps N_c/(N_c - N)."""
    alpha, kT = np.array([10.0**log_alpha]), np.array([10.0**log_kT])
    for ensemble in (ClosedBose(Powers(((1.0, exponent),))), NodeBose(Powers(((1.0, exponent),), 20.0))):
        n, b = ensemble.count(alpha, kT)
        tolerance = 1e-12 + 4e-15 * float(n[0] / (b[0] * alpha[0]))
        assert back_and_forth(ensemble, alpha, kT) == pytest.approx(alpha, rel=tolerance, abs=0)


@settings(max_examples=60, deadline=None)
@given(st.sampled_from(EXPONENTS), st.floats(-100, 300), st.sampled_from([np.inf, 40.0]))
def test_fermions(exponent, eta, top):
    """Below a top, N tells mu only through the holes: to eps capacity/holes."""
    ensemble = StepFermi(Powers(((1.0, exponent),), top))
    if eta > top - 3:
        eta = top - 3.0
    alpha, kT = np.array([-eta]), np.ones(1)
    assert back_and_forth(ensemble, alpha, kT) == pytest.approx(alpha, rel=1e-12, abs=1e-11)


@given(st.floats(-50, 50))
def test_classical_particles(alpha):
    ensemble = Classical(Powers(((1.0, 2.5),), 7.0))
    assert back_and_forth(ensemble, np.array([alpha]), np.ones(1)) == pytest.approx([alpha], abs=1e-13)


def test_many_at_once_and_one_by_one():
    ensemble = NodeBose(Powers(((1.0, 3.0), (0.5, 2.0)), 30.0))
    rng = np.random.default_rng(5)
    alpha, kT = 10 ** rng.uniform(-3, 1, 300), 10 ** rng.uniform(-1, 2, 300)
    number = ensemble.count(alpha, kT)[0]
    together = alpha_of_number(ensemble, number, kT)
    assert together == pytest.approx(alpha, rel=1e-10, abs=0)
    alone = [alpha_of_number(ensemble, number[i : i + 1], kT[i : i + 1])[0] for i in range(0, 300, 60)]
    assert together[::60] == pytest.approx(alone, rel=1e-11, abs=0)


def test_the_series_of_the_saturated_number():
    """Many temperatures take a series in ln kT, few are summed."""
    ensemble = NodeBose(Powers(((1.0, 3.0), (0.5, 1.5)), 30.0))
    kT = np.geomspace(1e-2, 1e4, 600)
    few = np.array([ensemble.saturated(kT[i : i + 1])[0] for i in range(0, 600, 100)])
    assert ensemble.saturated(kT)[::100] == pytest.approx(few, rel=1e-13, abs=0)
