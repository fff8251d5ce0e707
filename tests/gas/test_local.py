"""Local density and pressure from a momentum measure, against polylogarithms and limits."""

import math

import mpmath
import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from eoscore.constants import K_B
from eoscore.errors import NoAnswerError
from eoscore.gas.local import local_density, local_pressure
from eoscore.measure.powers import Powers

KT = 2e-30  # J
T = KT / K_B


def unit_power(k):
    """Omega(v) = v^k / Gamma(k + 1) in units of kT: then N is a polylogarithm of order k, P/kT of order k + 1."""
    return Powers([(1 / (math.gamma(k + 1) * KT**k), k)])


def polylog(order, eta, statistics):
    if statistics == "classical":
        return math.exp(eta)
    sign = 1 if statistics == "bose" else -1
    return float((sign * mpmath.polylog(order, sign * mpmath.exp(eta))).real)


@pytest.mark.parametrize(
    ("statistics", "eta"),
    [
        ("bose", -1e-6),
        ("bose", -0.3),
        ("bose", -40.0),
        ("fermi", -3.0),
        ("fermi", 0.5),
        ("fermi", 60.0),
        ("classical", -2.0),
    ],
)
@pytest.mark.parametrize("cut", [math.inf, 300 * KT], ids=["closed", "nodes"])
@pytest.mark.parametrize("k", [0.5, 1.5, 3.0])
def test_powers_give_polylogarithms(statistics, eta, k, cut):
    measure, mu = unit_power(k).cut(cut), eta * KT
    assert local_density(measure, mu, T, statistics) == pytest.approx(
        polylog(k, eta, statistics), rel=1e-11, abs=0
    )
    wanted = polylog(k + 1, eta, statistics)
    assert local_pressure(measure, mu, T, statistics) / KT == pytest.approx(wanted, rel=1e-11, abs=0)


@pytest.mark.parametrize("cut", [math.inf, 300 * KT])
@pytest.mark.parametrize("k", [1.4, 1.5, 2.0, 4.0])
def test_saturated_bosons_give_zeta(k, cut):
    """At mu = 0 the sum is zeta(k), the share of the lowest energies included (DLMF 25.5.1)."""
    came = local_density(unit_power(k).cut(cut), 0.0, T, "bose")
    assert came == pytest.approx(float(mpmath.zeta(k)), rel=1e-11, abs=0)


@pytest.mark.parametrize("k", [0.5, 1.0])
def test_bosons_without_a_finite_density_at_mu_zero(k):
    assert local_density(unit_power(k), np.array([0.0, -KT]), T, "bose")[0] == math.inf


def test_a_full_band_of_fermions_holds_its_states():
    """Far above the top of a band every state is taken, and P rises as mu times their number."""
    band = unit_power(1.5).cut(3 * KT)
    states = float(band.volume(3 * KT))
    mu = np.array([80.0, 81.0]) * KT
    assert local_density(band, mu, T, "fermi") == pytest.approx(states, rel=1e-10, abs=0)
    assert np.diff(local_pressure(band, mu, T, "fermi")) / KT == pytest.approx(states, rel=1e-10, abs=0)


@settings(deadline=None)
@given(
    st.sampled_from(["bose", "fermi", "classical"]),
    st.floats(0.6, 4),
    st.floats(-8, -0.05),
    st.floats(1.01, 2),
)
def test_pressure_rises_with_mu_and_temperature(statistics, k, eta, factor):
    measure, mu = unit_power(k), eta * KT
    base = local_pressure(measure, mu, T, statistics)
    assert local_pressure(measure, mu / factor, T, statistics) > base
    assert local_pressure(measure, mu, factor * T, statistics) > base


def test_bosons_above_the_bottom_are_refused_in_words():
    with pytest.raises(NoAnswerError, match="mu came above the least energy"):
        local_density(unit_power(1.5), KT, T, "bose")
