"""States from any pair of conditions: round trips, both phases, and refusals."""

from itertools import combinations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from eoscore.constants import K_B
from eoscore.errors import NoAnswerError

from .places import bent, box, harmonic, held, power, sampled, uniform

NORMAL = ("N", "T", "mu", "S", "U", "fugacity", "n_peak", "PSD")
CONDENSED = ("N", "T", "S", "U", "f_0", "N_0")
UNDETERMINED = {("T", "S"), ("T", "U")}
# The free particle's PSD is a function of the fugacity alone; S and U without N may fix two states.
FIXING = [p for p in combinations(NORMAL, 2) if p not in {("fugacity", "PSD"), ("S", "U")}]
PLACES = {"harmonic": harmonic(), "linear": power(1.0), "stiff": power(12.0), "bent": bent()}


def values(state, names):
    return {name: state.reading(name).value for name in names}


def agree(state, other, rel=1e-10):
    for name in ("N", "T"):
        assert getattr(other, name) == pytest.approx(getattr(state, name), rel=rel, abs=0)


@pytest.mark.parametrize("place", PLACES)
@pytest.mark.parametrize("pair", FIXING, ids="-".join)
def test_bosons_above_the_transition(place, pair):
    gas = held(PLACES[place])
    state = gas.state(N=1e5, T=gas.T_c(N=1e5) * np.array([1.01, 1.5, 4.0, 100.0]))
    agree(state, gas.state(**values(state, pair)))


@pytest.mark.parametrize("place", PLACES)
@pytest.mark.parametrize(
    "pair", [p for p in combinations(CONDENSED, 2) if p not in {*UNDETERMINED, ("S", "U")}], ids="-".join
)
def test_bosons_below_the_transition(place, pair):
    gas = held(PLACES[place])
    state = gas.state(N=1e5, T=gas.T_c(N=1e5) * np.array([0.2, 0.5, 0.9, 0.999]))
    agree(state, gas.state(**values(state, pair)))


@pytest.mark.parametrize("statistics", ["fermi", "classical"])
@pytest.mark.parametrize("place", ["harmonic", "bent"])
@pytest.mark.parametrize("pair", [p for p in FIXING if not {"fugacity", "PSD"} & set(p)], ids="-".join)
def test_other_statistics(statistics, place, pair):
    gas = held(PLACES[place], statistics)
    state = gas.state(N=1e5, T=np.array([280e-9, 400e-9, 2e-6]))
    agree(state, gas.state(**values(state, pair)), rel=1e-9)


@pytest.mark.parametrize("place", [harmonic(top=60e-30), sampled(harmonic()), uniform(), box()])
@pytest.mark.parametrize("statistics", ["bose", "fermi", "classical"])
def test_other_evaluators(place, statistics):
    gas = held(place, statistics)
    extensive = () if gas.uniform else ("S", "U")
    counted = "n" if gas.uniform else "N"
    state = gas.state(**{counted: 1e18 if gas.uniform else 1e5}, T=np.array([100e-9, 400e-9, 900e-9]))
    for name in (*extensive, "PSD"):
        if gas.gas.statistics == "bose" and name == "PSD":
            continue
        again = gas.state(**values(state, (counted, name)))
        assert pytest.approx(state.T, rel=1e-10, abs=0) == again.T


@settings(max_examples=60, deadline=None)
@given(st.floats(2, 8), st.floats(-9, -4), st.sampled_from(sorted(PLACES)))
def test_transition_without_trouble(log_N, log_step, place):
    """(N, S) on both sides of T_c, however close: S is continuous, and T comes back."""
    gas, N = held(PLACES[place]), 10.0**log_N
    T = gas.T_c(N=N) * (1 + 10.0**log_step * np.array([-1.0, 0.0, 1.0]))
    state = gas.state(N=N, T=T)
    assert pytest.approx(T, rel=1e-12, abs=0) == gas.state(N=N, S=state.S).T
    assert state.f_0[0] > 0
    assert state.f_0[2] == 0


def test_arrays_broadcast():
    gas = held(harmonic())
    f = gas.state(N=[1e5, 2e5], T=[[50e-9], [80e-9], [500e-9]]).f_0
    assert f.shape == (3, 2)
    assert f[1, 0] == gas.state(N=1e5, T=80e-9).f_0
    assert np.all(f[2] == 0)


REFUSED = [
    ({"T": 1e-7, "mu": 1e-31}, "bosons have mu at or below the lowest level"),
    ({"N": 1e5, "mu": 1e-31}, "bosons have mu at or below the lowest level"),
    ({"N": 1e5, "T": -1.0}, "T came as -1 K; it must be above zero"),
    ({"N": 0.0, "T": 1e-7}, "N came as 0; it must be above zero"),
    ({"N": 1e5, "T": np.nan}, "not finite"),
    ({"N": 1e5, "f_0": 0.0}, "every state above T_c has f_0 = 0"),
    ({"N": 1e5, "f_0": 1.5}, "it lies between 0 and 1"),
    ({"N": 1e5, "N_0": 2e5}, "not below N"),
    ({"N": 1e5, "PSD": 5.0}, "PSD runs from"),
    ({"N": 1e5, "mu": 0.0}, "may have any temperature below T_c: give T"),
    ({"T": 1e-7, "S": 1e-10}, "S is at most"),
    ({"T": 1e-7, "PSD": 2.7}, "PSD is at most 2.61238"),
    ({"T": 1e-7, "fugacity": 1.5}, "fugacity came above 1"),
    ({"mu": -1e-31, "fugacity": 1.0}, "any temperature below T_c"),
    ({"fugacity": 0.5, "PSD": 0.5}, "do not fix a state"),
    ({"N": 1e5, "U": 1e300}, "no state has that N and that U: with this N, U runs from 0 J to"),
    ({"N": 1e5, "S": -1e-20}, "S came as -1e-20 J/K; it must be above zero"),
    ({"N": 1e5, "f_0": 1.0}, "and reaches 1 at T = 0 alone"),
]


@pytest.mark.parametrize(("conditions", "words"), REFUSED)
def test_states_that_do_not_exist(conditions, words):
    gas = held(harmonic())
    state = gas.state(**conditions)
    with pytest.raises(NoAnswerError, match=words):
        _ = state.U
    reading = state.reading("f_0")
    assert words in reading.why
    assert np.isnan(reading.value)


@pytest.mark.parametrize(
    ("conditions", "words"),
    [
        ({"N": 1e5}, r"two conditions and came with 1 \(N\)"),
        ({"N": 1e5, "T": 1e-7, "S": 1e-20}, "came with 3"),
        ({"N": 1e5, "depth": 1e-28}, "cannot be found from depth; two of T, N, mu"),
        ({"mu": -1e-31, "f_0": 0.5}, "with a condensate mu does not know its size"),
        ({"N": 1e5, "n": 1e19}, "n came for a trap|N and n came together"),
        ({"n": 1e19, "T": 1e-7}, "n came for a trap"),
        ({"S": 1e-20, "U": 1e-27}, "give N with one of them"),
    ],
)
def test_pairs_that_fix_nothing(conditions, words):
    with pytest.raises(NoAnswerError, match=words):
        held(harmonic()).state(**conditions)


def test_fermions_fill_a_band_but_once():
    gas = held(harmonic(top=5e-30), "fermi")
    state = gas.state(N=[1e3, 1e9], T=1e-8)
    assert state.reading("mu").why.startswith("N came as 1e+09; below the escape energy there are")
    assert np.ma.is_masked(state.mu[1])
    assert state.mu[0] < 5e-30


def test_fermions_need_their_least_energy():
    gas = held(harmonic(), "fermi")
    with pytest.raises(NoAnswerError, match=r"with this N, U runs from"):
        _ = gas.state(N=1e5, U=1e-28).T


def test_a_saturated_gas_may_have_any_condensate():
    gas = held(harmonic())
    state = gas.state(N=1e5, T=50e-9)
    for pair in UNDETERMINED:
        with pytest.raises(NoAnswerError, match=r"condensate|at most"):
            _ = gas.state(**values(state, pair)).N


def test_gases_that_never_condense():
    """One dimension in a box: a = 1/2; N grows without end as mu -> 0, at every T."""
    gas = held(box(1e-3, 1))
    state = gas.state(N=1e12, T=1e-9)
    assert state.f_0 == 0
    assert -1e-8 < state.mu / (K_B * 1e-9) < 0
    with pytest.raises(NoAnswerError, match=r"a = 0\.5"):
        gas.T_c(N=1e5)
    with pytest.raises(NoAnswerError, match=r"a = 0\.5"):
        gas.state(N=1e5, f_0=0.5)
    assert "no limit" in gas.state(mu=0.0, T=1e-9).reading("N").why


@pytest.mark.parametrize("name", ["N", "S", "U", "N_0"])
def test_a_uniform_gas_has_no_end(name):
    with pytest.raises(NoAnswerError, match="give its density n"):
        held(uniform()).state(**{name: 1.0, "T": 1e-7})
