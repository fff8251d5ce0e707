"""Files that give a state by any pair: each gives back what N and T gave; pairs that no state has are told."""

from __future__ import annotations

from itertools import combinations

import pytest

import eoscore

LAB = """gas rubidium { isotope Rb-87 }
trap bowl { V(x, y, z) = m/2*(2*pi*100 Hz)^2*(x^2 + y^2 + z^2) }
trap box { volume = 1e-6 mm3 }
"""
CONDENSED = ("N", "T", "S", "U", "f_0", "N_0")
THIN = ("N", "T", "mu", "S", "U", "fugacity", "n_peak", "PSD")
LOOSE = {("T", "S"), ("T", "U"), ("S", "U"), ("fugacity", "PSD")}
UNITS = {"T": "K", "mu": "J", "S": "J/K", "U": "J", "n_peak": "m-3"}
PAIRS = [
    (temperature, pair)
    for temperature, names in (("100 nK", CONDENSED), ("300 nK", THIN))
    for pair in combinations(names, 2)
    if pair not in LOOSE or (pair[0] == "T" and temperature == "300 nK")
]


def found(question, **options):
    (answer,) = eoscore.loads(f"{LAB}find {question}").answers(**options)
    return answer.found


@pytest.fixture(scope="module")
def states():
    names = ", ".join(dict.fromkeys(CONDENSED + THIN))
    return {T: found(f"{names} for rubidium in bowl with N = 1e5, T = {T}") for T in ("100 nK", "300 nK")}


@pytest.mark.parametrize(("temperature", "pair"), PAIRS, ids=str)
def test_any_pair_gives_the_state_back(states, temperature, pair):
    state = states[temperature]
    given = ", ".join(f"{name} = {float(state[name].value)!r} {UNITS.get(name, '')}" for name in pair)
    again = found(f"N, T for rubidium in bowl with {given}")
    for name in ("N", "T"):
        assert float(again[name].value) == pytest.approx(float(state[name].value), rel=1e-9, abs=0)


@pytest.mark.parametrize("density", ["n", "n_peak"])
def test_the_density_of_an_unbounded_gas(density):
    # n lambda^3 = zeta(3/2)/(1 - f_0) below T_c (Einstein 1925); the excited gas alone is n_peak.
    at = found("n, n_peak, lambda_T for rubidium in uniform with T = 100 nK, f_0 = 0.25")
    expected = 2.61237534868549 / (0.75 if density == "n" else 1.0) / float(at["lambda_T"].value) ** 3
    assert float(at[density].value) == pytest.approx(expected, rel=1e-12, abs=0)


@pytest.mark.parametrize(
    ("conditions", "words"),
    [
        ("N = 1e5, PSD = 2.7", " to 2.61238"),
        ("N = 1e5, f_0 = 1.2", "f_0 came as 1.2; it lies between 0 and 1"),
        ("PSD = 1, f_0 = 0.2", "PSD and f_0 fix no state"),
        ("S = 1e-18 J/K, U = 1e-25 J", "give N with one of them"),
        ("T = 100 nK, S = 1 J/K", "at this temperature S is at most"),
    ],
)
def test_pairs_without_a_state_are_told_with_the_range(conditions, words):
    assert words in found(f"mu for rubidium in bowl with {conditions}")["mu"].why


@pytest.mark.parametrize(
    ("conditions", "words"),
    [
        ("T = 100 nK, f_0 = 1", "reaches 1 at T = 0 alone"),
        ("T = 100 nK, mu = 1e-30 J", "mu came as 1e-30 J; bosons have mu at or below"),
        ("T = 100 nK, U = 1 J", "at this temperature U is at most"),
        ("N = 1e5, S = 0 J/K", "S came as 0 J/K; it must be above zero"),
    ],
)
def test_cautions_have_nothing_to_say_where_there_is_no_state(conditions, words):
    text = LAB.replace("Rb-87", "Rb-87\na_s = 100 a0")
    (answer,) = eoscore.loads(f"{text}find n_peak for rubidium in bowl with {conditions}").answers()
    assert words in answer.found["n_peak"].why


def test_fermions_are_told_how_many_a_finite_trap_holds():
    text = LAB.replace("Rb-87", "K-40\nstatistics fermi").replace("V(x", "E_max = k_B*100 nK\nV(x")
    (answer,) = eoscore.loads(f"{text}find mu for rubidium in bowl with N = 1e9, T = 100 nK").answers()
    assert "below the escape energy there are 1507" in answer.found["mu"].why  # (E_max/hbar w)^3/6


def test_the_range_reaches_into_the_condensed_phase():
    knife = LAB.replace("V(x", "E_max = k_B*2 uK V(x")
    (answer,) = eoscore.loads(f"{knife}find T for rubidium in bowl with N = 1e5, U = 1 J").answers()
    assert "with this N, U runs from 0 J to" in answer.found["T"].why


def test_lambda_T_is_as_uncertain_as_all_that_gives_T():
    # Of a condensate S ~ T^3 alone, so lambda_T ~ S^(-1/6).
    finding = found("lambda_T for rubidium in bowl with N = 1e5, S = 1.0(1)e-18 J/K")["lambda_T"]
    assert float(finding.sigma / finding.value) == pytest.approx(0.1 / 6, rel=1e-5, abs=0)
