"""Thermodynamic identities over statistics, places and temperatures."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from eoscore.constants import K_B

from .places import bent, box, harmonic, held, power, sampled

PLACES = {
    "harmonic": harmonic(),
    "linear": power(1.0),
    "bent": bent(),
    "box": box(),
    "cut": harmonic(top=60e-30),
    "sampled": sampled(harmonic()),
    "disc": harmonic(d=2),
}
STATISTICS = st.sampled_from(["bose", "fermi", "classical"])
T = st.floats(20e-9, 2e-6)
N = st.floats(1e3, 1e6)


@settings(max_examples=60, deadline=None)
@given(STATISTICS, st.sampled_from(sorted(PLACES)), N, T)
def test_first_law(statistics, place, number, temperature):
    """dU = T dS + mu dN between neighbouring states, by central differences (h^2 = 1e-8, amplified by mu N/U)."""
    gas, h = held(PLACES[place], statistics), 1e-4
    one = gas.state(N=number * (1 + np.array([-h, h])), T=temperature * (1 + np.array([-h, 2 * h])))
    middle = gas.state(N=number, T=temperature * (1 + h / 2))
    if (one.f_0[0] > 0) != (one.f_0[1] > 0):
        return  # across T_c the second derivatives jump
    change = middle.T * (one.S[1] - one.S[0]) + middle.mu * (one.N[1] - one.N[0])
    scale = abs(middle.T * (one.S[1] - one.S[0])) + abs(middle.mu * (one.N[1] - one.N[0]))
    assert one.U[1] - one.U[0] == pytest.approx(change, abs=1e-4 * scale)


@settings(max_examples=60, deadline=None)
@given(STATISTICS, st.sampled_from(sorted(PLACES)), N, T)
def test_heat_capacity(statistics, place, number, temperature):
    """C_N = dU/dT = T dS/dT at fixed N, by central differences."""
    gas, h = held(PLACES[place], statistics), 1e-4
    state = gas.state(N=number, T=temperature * (1 + np.array([-h, 0.0, h])))
    if len(set(state.f_0 > 0)) > 1:
        return
    by_energy = (state.U[2] - state.U[0]) / (2 * h * temperature)
    by_entropy = (state.S[2] - state.S[0]) / (2 * h)
    assert state.C_N[1] == pytest.approx(by_energy, rel=1e-3, abs=0)
    assert state.C_N[1] == pytest.approx(by_entropy, rel=1e-3, abs=0)


@settings(max_examples=40, deadline=None)
@given(STATISTICS, st.sampled_from([0.0, 1.0, 2.0, 4.0, 12.0]), N, T)
def test_virial_theorem(statistics, p, number, temperature):
    """-J = U/a for Omega ~ E^a: PV = (2/3) U in a box; Euler's relation U = TS + mu N + J."""
    gas = held(box() if p == 0 else power(p), statistics)
    state, a = gas.state(N=number, T=temperature), 1.5 + (3 / p if p else 0.0)
    J = state.U - state.T * state.S - state.mu * (state.N - state.N_0)
    assert pytest.approx(-state.U / a, rel=1e-9, abs=0) == J
    if p == 0:
        assert state.pressure * gas.volume == pytest.approx(2 * state.U / 3, rel=1e-12, abs=0)


@settings(max_examples=40, deadline=None)
@given(STATISTICS, st.floats(-3e-29, -1e-32), T)
def test_compressibility_by_two_routes(statistics, mu, temperature):
    """kappa_T = (dn/dmu)/n^2, with n = dP/dmu, by central differences."""
    gas, h = held(harmonic(), statistics), 1e-4
    state = gas.state(mu=mu * (1 + np.array([-h, 0.0, h])), T=temperature)
    dmu = 2 * h * mu
    assert (state.pressure[2] - state.pressure[0]) / dmu == pytest.approx(state.n_peak[1], rel=1e-4, abs=0)
    slope = (state.n_peak[2] - state.n_peak[0]) / dmu
    assert state.kappa_T[1] == pytest.approx(slope / state.n_peak[1] ** 2, rel=1e-4, abs=0)


@settings(max_examples=40, deadline=None)
@given(st.sampled_from(sorted(PLACES)), N, st.floats(1.01, 3.0))
def test_condensate_fraction(place, number, factor):
    """0 <= f_0 <= 1; it falls with T and rises with N; N_ex rises with T and mu."""
    gas = held(PLACES[place])
    T_c = gas.T_c(N=number)
    temperatures = T_c * np.array([0.1, 0.1 * factor, 0.99, 1.0, factor])
    f = gas.state(N=number, T=temperatures).f_0
    assert np.all((f >= 0) & (f <= 1))
    assert np.all(np.diff(f) <= 0)
    assert np.all(np.diff(gas.N_c(T=temperatures[[0, 1, 3, 4]])) > 0)
    assert np.all(np.diff(gas.state(mu=[-2e-30, -1e-30, -1e-31], T=T_c).N) > 0)


@settings(max_examples=30, deadline=None)
@given(st.sampled_from([1.0, 2.0, 3.0, 6.0, 12.0]), N, st.floats(2.0, 100.0))
def test_critical_temperature_goes_as_a_power(p, number, factor):
    gas, a = held(power(p)), 1.5 + 3 / p
    assert gas.T_c(N=factor * number) / gas.T_c(N=number) == pytest.approx(
        factor ** (1 / a), rel=1e-13, abs=0
    )


@pytest.mark.parametrize("place", sorted(PLACES))
def test_classical_limit(place):
    """At low fugacity z all statistics agree, to a relative z 2^-(3/2)."""
    states = [held(PLACES[place], s).state(mu=-3e-28, T=1e-6) for s in ("bose", "fermi", "classical")]
    z = states[2].fugacity
    for name in ("N", "U", "S", "C_N", "n_peak", "pressure", "kappa_T"):
        values = [getattr(s, name) for s in states]
        assert values[0] == pytest.approx(values[2], rel=3 * z, abs=0)
        assert values[1] == pytest.approx(values[2], rel=3 * z, abs=0)


@pytest.mark.parametrize("statistics", ["bose", "fermi"])
@pytest.mark.parametrize("place", ["harmonic", "bent", "box", "sampled"])
def test_third_law(statistics, place):
    """S -> 0: as T^a for bosons, as T for fermions."""
    state = held(PLACES[place], statistics).state(N=1e5, T=[1e-9, 1e-10, 1e-11])
    assert np.all(np.diff(state.S) < 0)
    assert state.S[-1] / (1e5 * K_B) < 1e-2
    assert np.all(state.S > 0)


def test_exponent_is_the_slope_of_the_critical_number():
    gas, h = held(bent()), 1e-4
    numbers = gas.N_c(T=1e-7 * (1 + np.array([-h, h])))
    slope = np.diff(np.log(numbers))[0] / (2 * h)
    assert gas.find(["exponent"], {"T": 1e-7})["exponent"].value == pytest.approx(slope, rel=1e-7, abs=0)


def test_cutting_the_trap_lowers_the_critical_number():
    """Never more states below a lower top, and all of them for a high one."""
    numbers = [held(harmonic(top=top * 1e-30)).N_c(T=300e-9) for top in (5.0, 20.0, 60.0, 400.0)]
    assert np.all(np.diff(numbers) > 0)
    assert numbers[-1] == pytest.approx(held(harmonic()).N_c(T=300e-9), rel=1e-12, abs=0)
