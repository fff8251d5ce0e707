"""The evaluators against each other, against arbitrary precision, and against their own laws."""

import mpmath
import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from eoscore.measure import Powers, Sampled
from eoscore.state.classical import Classical
from eoscore.state.closed import ClosedBose, ClosedFermi
from eoscore.state.nodes import NodeBose
from eoscore.state.steps import StepFermi

ALPHA = np.array([0.0, 1e-20, 1e-9, 1e-3, 0.04, 0.3, 2.0, 50.0])
KT = np.array([1.0, 2.0, 0.01, 3.0, 1.0, 1.0, 5.0, 1.0])
TERMS = [((1.0, 3.0),), ((1.0, 1.5),), ((1.0, 3.0), (2.0, 2.0)), ((1.0, 4.5),), ((1.0, 1.0),), ((1.0, 0.5),)]
NAMES = ("N", "U", "S", "Y", "B0", "B1", "B2")


def asked(terms):
    """States at which the sums are finite: at alpha = 0 only for exponents above 1."""
    return slice(0 if terms[-1][1] > 1 else 1, None)


@pytest.mark.parametrize("terms", TERMS)
@pytest.mark.parametrize("name", NAMES)
def test_nodes_of_bosons_agree_with_closed_forms(terms, name):
    some = asked(terms)
    closed = ClosedBose(Powers(terms)).sums(ALPHA[some], KT[some])
    nodes = NodeBose(Powers(terms)).sums(ALPHA[some], KT[some])
    assert getattr(nodes, name) == pytest.approx(getattr(closed, name), rel=1e-12, abs=0)


@pytest.mark.parametrize("terms", TERMS)
def test_nodes_of_a_sampled_measure(terms):
    """The same function without its formula."""
    some = asked(terms)
    powers = Powers(terms)
    sampled = Sampled(powers.volume, powers.exponent, scale=1.0, route="function")
    closed, nodes = (e.sums(ALPHA[some], KT[some]) for e in (ClosedBose(powers), NodeBose(sampled)))
    for name in NAMES:
        assert getattr(nodes, name) == pytest.approx(getattr(closed, name), rel=1e-11, abs=0)


@pytest.mark.parametrize("terms", TERMS)
def test_steps_of_fermions_agree_with_closed_forms(terms):
    eta = np.array([-50.0, -2.0, 0.0, 0.5, 3.0, 12.0])
    kT = np.ones_like(eta)
    closed = ClosedFermi(Powers(terms)).sums(-eta, kT)
    steps = StepFermi(Powers(terms))
    steps.closed = None
    for name in ("N", "U", "Y", "B0"):
        assert getattr(steps.sums(-eta, kT), name) == pytest.approx(getattr(closed, name), rel=1e-12, abs=0)
    for name in ("S", "B1", "B2"):  # differences in the closed form
        assert getattr(steps.sums(-eta, kT), name) == pytest.approx(getattr(closed, name), rel=1e-11, abs=0)


@pytest.mark.parametrize("eta", [30.0, 1e3, 1e7, 1e11])
@pytest.mark.parametrize("sampled", [False, True])
def test_degenerate_fermions(eta, sampled):
    """Sommerfeld's expansion for E^3, exact up to e^-eta (DLMF 25.12.11 and the Bernoulli polynomials)."""
    measure = Powers(((1.0, 3.0),))
    if sampled:
        measure = Sampled(measure.volume, 3.0, scale=1.0, route="function")
    sums = StepFermi(measure).sums(np.array([-eta]), np.ones(1))
    pi2 = np.pi**2
    assert pytest.approx(eta**3 + pi2 * eta, rel=1e-13, abs=0) == sums.N
    assert pytest.approx(0.75 * eta**4 + 1.5 * pi2 * eta**2 + 7 * pi2**2 / 20, rel=1e-13, abs=0) == sums.U
    assert pytest.approx(pi2 * eta**2 + 7 * pi2**2 / 15, rel=1e-12, abs=0) == sums.S
    assert pytest.approx(3 * eta**2 + pi2, rel=1e-13, abs=0) == sums.B0
    assert (
        pytest.approx(2 * pi2 * eta, rel=1e-12 + 1e-15 * eta, abs=0) == sums.B1
    )  # the two sides of the step cancel


@pytest.mark.parametrize("statistics", [NodeBose, StepFermi, Classical])
@pytest.mark.parametrize(("alpha", "top"), [(0.01, 4.0), (1.5, 12.0), (0.4, 0.3)])
def test_below_an_escape_energy(statistics, alpha, top):
    """N, U and S below a top by mpmath's quadrature of the occupation of each level."""
    sums = statistics(Powers(((1.0, 1.5),), top)).sums(np.array([alpha]), np.ones(1))
    sign = {NodeBose: -1, StepFermi: 1, Classical: 0}[statistics]

    def integral(g):
        return float(mpmath.quad(lambda q: 3 * q * q * g(q * q), mpmath.linspace(0, mpmath.sqrt(top), 6)))

    def f(x):
        return 1 / (mpmath.exp(x + alpha) + sign)

    def entropy(x):
        if sign == 0:
            return f(x) * (1 + x + alpha)
        return -f(x) * mpmath.log(f(x)) - sign * (1 - sign * f(x)) * mpmath.log(1 - sign * f(x))

    assert sums.N[0] == pytest.approx(integral(f), rel=1e-12, abs=0)
    assert sums.U[0] == pytest.approx(integral(lambda x: x * f(x)), rel=1e-12, abs=0)
    assert sums.S[0] == pytest.approx(integral(entropy), rel=1e-12, abs=0)


@settings(max_examples=40, deadline=None)
@given(
    st.sampled_from(["bose", "fermi", "classical"]),
    st.floats(0.05, 6.0),
    st.floats(1.1, 4.5),
    st.sampled_from([np.inf, 5.0, 30.0]),
)
def test_second_derivatives(statistics, alpha, exponent, top):
    """B is the matrix of second derivatives, by central differences (relative error of the order of h^2)."""
    measure = Powers(((1.0, exponent),), top)
    bose = ClosedBose if top == np.inf else NodeBose
    ensemble = {"bose": bose, "fermi": StepFermi, "classical": Classical}[statistics](measure)
    h = 1e-4
    mu = -alpha + np.array([0.0, h, -h, 0.0, 0.0]) * alpha
    kT = 1.0 + np.array([0.0, 0.0, 0.0, h, -h])
    s = ensemble.sums(-mu / kT, kT)
    assert (s.N[1] - s.N[2]) / (2 * h * alpha) == pytest.approx(s.B0[0], rel=1e-5, abs=0)
    assert (s.N[3] - s.N[4]) / (2 * h) == pytest.approx(s.B1[0], rel=1e-5, abs=0)
    assert (s.S[3] - s.S[4]) / (2 * h) == pytest.approx(s.B2[0], rel=1e-5, abs=0)
    assert s.S[0] == pytest.approx(s.Y[0] + s.U[0] + alpha * s.N[0], rel=1e-11, abs=0)


def test_nothing_comes_of_nothing():
    """Points that have no state stay out, and do not disturb the others."""
    alpha, kT = np.array([np.nan, 1.0]), np.array([1.0, 1.0])
    for ensemble in (NodeBose(Powers(((1.0, 3.0),), 9.0)), StepFermi(Powers(((1.0, 3.0),), 9.0))):
        sums = ensemble.sums(alpha, kT)
        assert np.isnan(sums.N[0])
        assert sums.N[1] == ensemble.sums(alpha[1:], kT[1:]).N[0]
        assert np.isnan(ensemble.sums(alpha[:1], kT[:1]).S[0])
