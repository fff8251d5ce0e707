"""Thermodynamic identities over dispersions, places and statistics; numbers are told by the gas at mu = -kT/2."""

from __future__ import annotations

from functools import cache

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from eoscore.constants import HBAR, K_B, C
from eoscore.formula import call, variable
from eoscore.formula.field import Field
from eoscore.gas import gas_of
from eoscore.language.facts import GasFacts
from eoscore.state import hold

from .places import MASS, bent, box, harmonic, power

P, PX, PY, PZ = (variable(name) for name in ("p", "px", "py", "pz"))
REST = 1.2e-6 * K_B  # m c^2 of the light particles, near the temperatures
LIGHT = REST / C**2
EDGE, BAND = HBAR * 2e6, 50e-9 * K_B  # of a lattice of pi/2 um, and its tunnelling energy
ISOTROPIC = {
    "slow light": Field(("p",), 3e-3 * P, ()),
    "quartic": Field(("p",), 1e24 * P**4 + P**2 / (2 * MASS), ()),
}
LATTICE = Field(
    ("px", "py", "pz"),
    sum((2 * BAND * (1 - call("cos", q * (np.pi / EDGE))) for q in (PX, PY, PZ)), 0 * PX),
    tuple(EDGE - call("abs", q) for q in (PX, PY, PZ)),
)
DISPERSIONS = {
    "free": {},
    "relativistic": {"mass": LIGHT, "dispersion": "relativistic"},
    "antiparticles": {"mass": LIGHT, "dispersion": "relativistic", "parameters": {"antiparticles": 1.0}},
    "levels": {"dispersion": "trapped", "parameters": {"omega_z": 1e3}},
    "lattice": {"energy": LATTICE},
} | {name: {"energy": energy} for name, energy in ISOTROPIC.items()}
PLACES = {"harmonic": harmonic, "linear": lambda d: power(1.0, d=d), "box": lambda d: box(1e-4**d, d)}
PAIRS = [
    (each, place) for each in DISPERSIONS for place in PLACES if each != "lattice" or place == "harmonic"
]
PAIRS += [("free", "bent")]
FULL = ("levels", "box")  # where N goes as a logarithm of alpha, which soon is below the range of doubles
ANY = st.sampled_from(PAIRS)
STATISTICS = st.sampled_from(["bose", "fermi", "classical"])
T = st.floats(50e-9, 1e-6)
SHARE = st.floats(0.05, 20.0)


@cache
def gas_in(pair, statistics):
    dispersion, place = pair
    facts = {"mass": MASS, "dispersion": "free", "parameters": {}, "energy": None} | DISPERSIONS[dispersion]
    d = 2 if dispersion == "levels" else 3
    gas = gas_of(GasFacts("probe", statistics, 1.0, a_s=None, treatment=None, **facts))
    return hold(gas, bent() if place == "bent" else PLACES[place](d=d))


def number(gas, share, temperature):
    return share * float(gas.state(mu=-0.5 * K_B * temperature, T=temperature).N)


@settings(max_examples=50, deadline=None)
@given(ANY, STATISTICS, SHARE, T)
def test_first_law_and_heat_capacity(pair, statistics, share, temperature):
    """dU = T dS + mu dN, and C_N = dU/dT = T dS/dT, by central differences of relative step 1e-4."""
    gas, h = gas_in(pair, statistics), 1e-4
    N = number(gas, min(share, 2.0) if pair == FULL else share, temperature)
    s = gas.state(N=N * np.array([1, 1, 1, 1 - h, 1 + h]), T=temperature * np.array([1 - h, 1, 1 + h, 1, 1]))
    if len(set(s.f_0 > 0)) > 1:
        return  # the second derivatives jump at T_c
    dT = 2 * h * temperature
    assert s.C_N[1] == pytest.approx((s.U[2] - s.U[0]) / dT, rel=1e-3, abs=0)
    assert s.C_N[1] == pytest.approx((s.S[2] - s.S[0]) / (2 * h), rel=1e-3, abs=0)
    heat, work = temperature * (s.S[4] - s.S[3]), s.mu[1] * (s.N[4] - s.N[3])
    scale = abs(heat) + abs(work) + 1e-6 * abs(s.U[1]) * h
    assert s.U[4] - s.U[3] == pytest.approx(heat + work, rel=0, abs=1e-4 * scale)


@settings(max_examples=40, deadline=None)
@given(ANY, STATISTICS, st.floats(0.05, 5.0), T)
def test_grand_potential(pair, statistics, alpha, temperature):
    """J = U - TS - mu N has the slopes -S and -N; n = dP/dmu; kappa_T = (dn/dmu)/n^2. In a box J = -PV."""
    gas, h = gas_in(pair, statistics), 1e-4
    mu = -min(alpha * K_B * temperature, 0.9 * REST)  # N = 0 lies at -m c^2 with antiparticles
    s = gas.state(
        mu=mu * np.array([1, 1 - h, 1 + h, 1, 1]), T=temperature * np.array([1, 1, 1, 1 - h, 1 + h])
    )
    J = s.U - s.T * s.S - s.mu * s.N
    assert (J[2] - J[1]) / (2 * h * mu) == pytest.approx(-s.N[0], rel=1e-5, abs=0)
    assert (J[4] - J[3]) / (2 * h * temperature) == pytest.approx(-s.S[0], rel=1e-5, abs=0)
    if pair[0] == "levels":
        return  # no local density in the held direction
    assert (s.pressure[2] - s.pressure[1]) / (2 * h * mu) == pytest.approx(s.n_peak[0], rel=1e-5, abs=0)
    slope = (s.n_peak[2] - s.n_peak[1]) / (2 * h * mu)
    assert s.kappa_T[0] == pytest.approx(slope / s.n_peak[0] ** 2, rel=1e-5, abs=0)
    if pair[1] == "box":
        assert J[0] == pytest.approx(-s.pressure[0] * 1e-12, rel=1e-9, abs=0)


@settings(max_examples=30, deadline=None)
@given(st.sampled_from([1.0, 2.0, 3.0, 4.0]), st.sampled_from([1, 2, 3]), STATISTICS, SHARE, T)
def test_pressure_of_a_power_law(s, d, statistics, share, temperature):
    """P V = (s/d) U for E ~ p^s, above and below T_c."""
    energy = Field(("p",), 1e-30 * (P / 1e-27) ** s, ())
    gas = hold(gas_of(GasFacts("probe", statistics, 1.0, None, None, None, "free", {}, energy)), box(1e-6, d))
    state = gas.state(N=number(gas, share, temperature), T=temperature)
    assert state.pressure * 1e-6 == pytest.approx(s / d * state.U, rel=1e-9, abs=0)


@pytest.mark.parametrize("pair", PAIRS, ids=" in ".join)
def test_nothing_jumps_at_the_transition(pair):
    """N, U and S are continuous, and mu is zero below, where the gas condenses."""
    gas = gas_in(pair, "bose")
    if gas.find(["N_c"], {"T": 300e-9})["N_c"].why:
        return  # it does not condense
    N = float(gas.N_c(T=300e-9))
    s = gas.state(N=N, T=300e-9 * (1 + np.array([-1e-9, 1e-9])))
    for values in (s.U, s.S):
        assert values[1] == pytest.approx(values[0], rel=1e-7, abs=0)
    assert s.f_0[0] < 1e-7
    assert abs(s.mu[1]) < 1e-4 * K_B * 300e-9


@pytest.mark.parametrize("statistics", ["bose", "fermi"])
@pytest.mark.parametrize("pair", PAIRS, ids=" in ".join)
def test_third_law(pair, statistics):
    """S -> 0 at fixed N."""
    gas = gas_in(pair, statistics)
    N = number(gas, 1.0, 300e-9)
    S = gas.state(N=N, T=[30e-9, 3e-9, 0.3e-9]).S
    assert np.all(np.diff(S) < 0)
    assert 0 <= S[-1] < 0.03 * N * K_B
