"""Condensates of a fixed number, against enumeration, closed forms and the limit of many particles."""

from __future__ import annotations

from itertools import combinations_with_replacement

import numpy as np
import pytest
from scipy.constants import hbar, k

import eoscore
from eoscore.errors import NoAnswerError
from eoscore.state.canonical import condensate_statistics

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
