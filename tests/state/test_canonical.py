"""Condensates of a fixed number, against enumeration, closed forms and the limit of many particles."""

from __future__ import annotations

from itertools import combinations_with_replacement

import mpmath
import numpy as np
import pytest
from scipy.constants import hbar, k

import eoscore
from eoscore.errors import NoAnswerError
from eoscore.state.canonical import condensate_statistics
from eoscore.state.fixed_number import probability_at

QUANTUM = hbar * 2 * np.pi * 100 / k  # K


def harmonic(coordinates="xyz", levels="levels exact"):
    squares = " + ".join(f"{c}^2" for c in coordinates)
    text = f"trap t {{ V({', '.join(coordinates)}) = m/2*(2*pi*100 Hz)^2*({squares})\n {levels} }}"
    lab = eoscore.loads("gas g { m = 84 u }\n" + text)
    return lab["g"].held_in(lab["t"])


def test_three_particles_by_enumeration():
    """Every way to put 3 bosons on the levels of two dimensions, up to 14 quanta."""
    T = 0.9 * QUANTUM
    levels = sorted(a + b for a in range(15) for b in range(15 - a))
    ways = np.array(list(combinations_with_replacement(range(len(levels)), 3)))
    chance = np.exp(-np.array(levels)[ways].sum(axis=1) / 0.9)
    condensed = (ways == 0).sum(axis=1)
    expected = np.array([chance[condensed == n].sum() for n in range(4)]) / chance.sum()
    found = condensate_statistics(harmonic("xy"), 3, T)
    assert found.probability == pytest.approx(
        expected, abs=3e-4
    )  # levels above are left out by the enumeration
    assert found.mean == pytest.approx(expected @ np.arange(4), rel=1e-5)


@pytest.mark.parametrize(("N", "x"), [(7, 0.4), (300, 0.02)])
def test_one_dimension_in_closed_form(N, x):
    """P(M excited) ~ q^M prod_(j <= M) 1/(1 - q^j), q = e^-x: partitions into M parts (Euler)."""
    logs = np.concatenate([[0.0], np.cumsum(-x - np.log(-np.expm1(-x * np.arange(1.0, N + 1))))])
    expected = np.exp(logs - logs.max())[::-1]
    found = harmonic("x").condensate_statistics(N, QUANTUM / x)
    assert found.probability == pytest.approx(expected / expected.sum(), rel=1e-9, abs=1e-13)


def test_far_below_T_c():
    """The condensate is a reservoir: mean N - sum n, variance sum n (n + 1) over excited levels, n = 1/(e^(e/kT) - 1).

    P. Navez et al., PRL 79, 1789 (1997), from memory; the sums here run over the shells (s + 1)(s + 2)/2.
    """
    held, shell = harmonic(), np.arange(1.0, 400)
    T = 0.6 * held.T_c(N=5000)
    found = condensate_statistics(held, 5000, T)
    n = 1 / np.expm1(shell * QUANTUM / T)
    states = (shell + 1) * (shell + 2) / 2
    assert found.mean == pytest.approx(5000 - np.sum(states * n), rel=1e-9)
    assert found.variance == pytest.approx(np.sum(states * n * (n + 1)), rel=1e-8)
    assert found.probability.sum() == pytest.approx(1, rel=1e-12)


def test_ten_thousand_particles_far_above():
    """A hot gas holds nearly none in its lowest level: z/(1 - z) of the grand ensemble, and no overflow."""
    held = harmonic()
    T = 1.5 * held.T_c(N=1e4)
    z = held.state(N=1e4, T=T).fugacity
    assert condensate_statistics(held, 10_000, T).mean == pytest.approx(z / (1 - z), rel=1e-2)


WORDS = [
    ("", 10, 1e-8, "levels exact"),
    ("levels exact", 10**6, 1e-8, "from 1 to"),
    ("levels exact", 10, 0.0, "above zero"),
]


@pytest.mark.parametrize(("levels", "N", "T", "words"), WORDS)
def test_words(levels, N, T, words):
    with pytest.raises(NoAnswerError, match=words):
        condensate_statistics(harmonic(levels=levels), N, T)


def partition_functions(N, kT, dimension=3, quantum=1.0):
    """Z_M of all levels of an oscillator with M = 0 ... N bosons, by mpmath, energies from the lowest level."""
    mp = mpmath.mp
    single = [1 / (1 - mp.e ** (-k * quantum / mp.mpf(kT))) ** dimension for k in range(1, N + 1)]
    z = [mp.mpf(1)]
    for m in range(1, N + 1):
        z.append(mp.fsum(single[k - 1] * z[m - k] for k in range(1, m + 1)) / m)
    return z


@pytest.mark.parametrize("kT", [1.5, 4.0, 20.0])
def test_quantities_against_the_partition_functions_of_all_levels(kT):
    """P(N_0 >= n) = Z_(N - n)/Z_N of all levels, e_0 = 0 (N. Borrmann et al., Phys. Rev. A 60, 1519 (1999), memory)."""
    N = 60
    z = partition_functions(N, kT)
    at_least = [float(z[N - n] / z[N]) for n in range(N + 1)] + [0.0]
    expected = -np.diff(at_least)
    state = harmonic().state(N=N, T=kT * QUANTUM)
    n = np.arange(N + 1)
    mean = sum(at_least[1:])
    variance = expected @ (n - mean) ** 2
    for reading, value in (
        (state.reading("N_0_canonical"), mean),
        (state.reading("Delta_N_0"), variance**0.5),
    ):
        assert abs(reading.value - value) <= reading.error + 1e-13 * N
        assert reading.error < 1e-10 * N
    found = probability_at(state, n)
    assert np.all(np.abs(found.value - expected) <= found.error + 1e-15)


def test_grids_share_one_recursion_and_may_have_any_number():
    """Between whole numbers a straight line; temperatures along the other axis."""
    held = harmonic()
    state = held.state(N=[10, 10.25, 11, 300], T=[[2e-8], [4e-8]])
    value = state.N_0_canonical
    assert value.shape == (2, 4)
    assert value[:, 1] == pytest.approx(0.75 * value[:, 0] + 0.25 * value[:, 2], rel=1e-13)
    alone = held.condensate_statistics(300, 4e-8)
    assert value[1, 3] == pytest.approx(alone.mean, rel=1e-13)
    assert state.Delta_N_0[1, 3] == pytest.approx(alone.variance**0.5, rel=1e-12)


def test_fluctuations_of_a_box():
    """Far below T_c: 16.532316 t^2 + pi^(3/2) zeta(1/2) t^(3/2) + 1/12, t = kT/gap, beyond which all is exponential.

    The first term by E. M. Lifshitz, L. P. Pitaevskii, Statistical Physics 2, section 27, with the sum of n^-4 over a
    cubic lattice, both from memory; the others by a Mellin transform of sum n(n + 1) over the levels.
    """
    lab = eoscore.loads("gas g { m = 84 u }\ntrap t { volume = 1e-15 m3\n levels exact }")
    held = lab["g"].held_in(lab["t"])
    T = 0.35 * held.T_c(N=5000)
    t = k * T / held.model.whole.gap
    expected = 16.532316 * t**2 + np.pi**1.5 * float(mpmath.zeta(0.5)) * t**1.5 + 1 / 12
    assert held.state(N=5000, T=T).Delta_N_0 ** 2 == pytest.approx(expected, rel=1e-6)


def test_in_the_language():
    """Mean, standard deviation and the whole distribution; a sigma, and the number that another quantity spreads."""
    text = "gas g { m = 84 u }\ntrap t { f = 100(1) Hz\n V(r) = m/2*(2*pi*f)^2*r^2\n levels exact }\n"
    text += "find N_0_canonical, Delta_N_0 for g in t with N = 50(2), T = 10 nK\n"
    text += "find P_N_0, N_0_canonical, V_at for g in t with N = 50, T = 10 nK\n"
    text += "    over N_0 = even(0, 50, 51), r = [0 m, 1 um]"
    lab = eoscore.loads(text)
    moments, chances = (answer.found for answer in lab.answers())
    held = lab["g"].held_in(lab["t"])
    alone = held.condensate_statistics(50, 1e-8)
    assert moments["N_0_canonical"].value == pytest.approx(alone.mean, rel=1e-12)
    assert set(moments["N_0_canonical"].budget) == {"f", "N"}
    assert moments["Delta_N_0"].value == pytest.approx(alone.variance**0.5, rel=1e-12)
    assert chances["P_N_0"].value == pytest.approx(np.stack([alone.probability] * 2, axis=1), rel=1e-12)
    assert np.ptp(chances["N_0_canonical"].value) == 0
    assert np.ptp(chances["V_at"].value, axis=0) == pytest.approx([0, 0], abs=0)


@pytest.mark.parametrize(
    ("given", "words"),
    [
        ({"N": 0.5, "T": 1e-8}, "from 1 to 20000"),
        ({"N": 3e4, "T": 1e-8}, "from 1 to 20000"),
        ({"N": 10, "T": -1e-8}, "above zero"),
        ({"N": 10, "mu": -1e-30}, "N and T themselves; N, mu came"),
    ],
)
def test_words_of_quantities(given, words):
    readings = harmonic().find(["N_0_canonical", "Delta_N_0"], given)
    assert all(words in reading.why for reading in readings.values())


def test_words_of_probabilities():
    state = harmonic().state(N=10, T=1e-8)
    assert "none is given" in state.reading("P_N_0").why
    found = probability_at(state, [0.5, 3, 11])
    assert "whole number" in found.why
    assert found.missing.tolist() == [True, False, False]
    assert found.value[2] == 0


@pytest.mark.parametrize(
    ("question", "words"),
    [
        ("P_N_0 for g in t with N = 10, T = 1 nK", "is the probability of some number N_0"),
        ("N_0_canonical for g in t with N = 10", "needs the number N and the temperature T; only N is given"),
        ("P_N_0 for g in t with N = 10, T = 1 nK, N_0 = 2 m", "`N_0` must be a pure number"),
    ],
)
def test_complaints(question, words):
    text = f"gas g {{ m = 1 u }}\ntrap t {{ volume = 1 mm3\n levels exact }}\nfind {question}"
    with pytest.raises(eoscore.TarnError, match=words):
        eoscore.loads(text)


def test_levels_of_a_dispersion():
    """All directions held as oscillator levels: the same as the trap."""
    omegas = "\n".join(f"omega_{x} = 2*pi*100 Hz" for x in "xyz")
    lab = eoscore.loads(f"gas g {{ m = 84 u\n dispersion trapped {{ {omegas} }} }}")
    found = lab["g"].held_in(None).condensate_statistics(100, 1e-8)
    assert found.mean == pytest.approx(harmonic().condensate_statistics(100, 1e-8).mean, rel=1e-12)
