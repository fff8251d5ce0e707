"""Sums over oscillator levels against sums made level by level, and against exact limits."""

import math

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.special import zeta

from eoscore.constants import K_B
from eoscore.errors import NoAnswerError
from eoscore.gas.levels import OscillatorLevels
from eoscore.measure.powers import Powers

KT = 1.3e-30  # J
EULER = 0.5772156649015329
FLOOR = Powers([(1.0, 0.0)])
FIELDS = ("N", "U", "S", "Y", "B0", "B1", "B2")


def sums(statistics, quanta, eta, rest=FLOOR, kT=KT):
    """The seven sums at quanta and mu in units of kT, energies in units of kT."""
    levels = OscillatorLevels(tuple(q * kT for q in quanta), rest, statistics)
    moments = levels.moments(eta * kT, kT / K_B)
    values = {name: float(getattr(moments, name)) for name in FIELDS}
    return values | {"U": values["U"] / kT}


def level_by_level(statistics, quanta, eta):
    """The same with every level listed, up to 60 kT above mu."""
    energies = np.zeros(1)
    for q in quanta:
        ladder = q * np.arange(int((max(eta, 0) + 60) / q) + 1)
        energies = (energies[:, None] + ladder).ravel()
        energies = energies[energies < max(eta, 0) + 60]
    e = np.sort(energies)[1:]
    t = e - eta
    if statistics == "bose":
        f, log = 1 / np.expm1(t), -np.log(-np.expm1(-t))
        weight = f * (1 + f)
    elif statistics == "fermi":
        f, log = 1 / (np.exp(np.minimum(t, 700)) + 1), np.logaddexp(0, -t)
        weight = f * (1 - f)
    else:
        f = log = weight = np.exp(-t)
    parts = (f, e * f, t * f + log, log, weight, weight * t, weight * t * t)
    return dict(zip(FIELDS, map(math.fsum, parts), strict=True))


@pytest.mark.parametrize(
    ("statistics", "quanta", "eta"),
    [
        ("bose", (0.5,), 0.0),
        ("bose", (0.5, 1.7), -0.3),
        ("bose", (2.0, 3.1, 5.0), 0.0),
        ("bose", (0.3, 0.4, 7.0), -2.0),
        ("classical", (0.4, 0.9), -1.0),
        ("classical", (3.0,), 2.0),
        ("fermi", (0.5,), -3.0),
        ("fermi", (0.2, 0.9), -0.5),
        ("fermi", (0.5, 0.65, 0.8), 3.0),
        ("fermi", (3.0, 4.1), 40.0),
        ("fermi", (2 * math.pi,), 200.0),
    ],
)
def test_sums_equal_those_over_listed_levels(statistics, quanta, eta):
    came, wanted = sums(statistics, quanta, eta), level_by_level(statistics, quanta, eta)
    for name in FIELDS:  # listed up to 60 kT: what lies above is 1e-22 of it
        assert came[name] == pytest.approx(wanted[name], rel=1e-12 * max(1, eta**2), abs=0), name


def test_cold_bosons_keep_their_relative_accuracy():
    came = sums("bose", (300.0,), 0.0)["N"]  # kT of a three-hundredth of a quantum
    assert came == pytest.approx(math.exp(-300), rel=1e-14, abs=0)


def hot_number(x, dimensions):
    """N of equal quanta x kT, x << 1, from sum_n n^s/(e^{nx} - 1) by its Mellin transform (residues at s + 1, 1, -1).

    Level n has C(n + D - 1, D - 1) states; what is left out is of relative size x^(D + 1).
    """
    zeroth = (EULER - math.log(x)) / x + 0.25 - x / 144
    first = zeta(2) / x**2 - 1 / (2 * x) + 1 / 24
    second = 2 * zeta(3) / x**3 - 1 / (12 * x) + x / 1440
    return {1: zeroth, 2: zeroth + first, 3: zeroth + 1.5 * first + second / 2}[dimensions]


@pytest.mark.parametrize("dimensions", [1, 2, 3])
@pytest.mark.parametrize("x", [1e-6, 1e-4, 1e-2])
def test_hot_bosons_against_their_expansion(x, dimensions):
    assert sums("bose", (x,) * dimensions, 0.0)["N"] == pytest.approx(
        hot_number(x, dimensions), rel=1e-12, abs=0
    )


@pytest.mark.parametrize("statistics", ["bose", "fermi", "classical"])
def test_a_measure_of_levels_stands_for_levels(statistics):
    """A flat rest is one state; levels along z times levels along x are levels along both."""
    both = sums(statistics, (0.7, 0.7), -0.4)["N"]
    along = sums(statistics, (0.7,), -0.4)["N"]
    layers = sum(sums(statistics, (0.7,), -0.4 - 0.7 * n)["N"] for n in range(1, 60))
    grounds = along  # levels without a quantum along the other direction
    assert both == pytest.approx(along + grounds + layers, rel=1e-12, abs=0)


@pytest.mark.parametrize(("statistics", "eta"), [("bose", -0.2), ("fermi", 6.0), ("classical", -1.0)])
@pytest.mark.parametrize("k", [0.5, 1.0, 2.5])
def test_a_power_rest_against_its_nodes(statistics, eta, k):
    """The closed form of R(b) and the sum over nodes of the same measure, cut where nothing is occupied."""
    whole = Powers([(KT**-k, k)])
    came, nodes = (sums(statistics, (0.4, 1.1), eta, rest) for rest in (whole, whole.cut(300 * KT)))
    for name in FIELDS:
        assert came[name] == pytest.approx(nodes[name], rel=1e-11, abs=0), name


def test_free_direction_is_the_limit_of_a_soft_one():
    """q -> 0 along x with a wide box instead: sum_n f(n q) -> int f dE/q, less half of the lowest level."""
    q = 1e-4
    soft = sums("bose", (2.0, q), -0.5)["N"]
    rest = Powers([(1 / (q * KT), 1.0)])
    free = sums("bose", (2.0,), -0.5, rest)["N"]
    half = sums("bose", (2.0,), -0.5)["N"] / 2
    lowest = sum(1 / math.expm1(0.5 + q * n) for n in range(1, 400_000))
    assert soft - lowest == pytest.approx(free + half, rel=1e-8, abs=0)


@settings(deadline=None)
@given(st.floats(0.01, 20), st.floats(-8, -0.01), st.floats(1.01, 3))
def test_number_rises_with_temperature_and_mu(x, eta, factor):
    levels = OscillatorLevels((x * KT,), FLOOR, "bose")
    T = KT / K_B
    low, hot, high = (
        float(levels.moments(*at).N) for at in ((eta * KT, T), (eta * KT, factor * T), (eta / factor * KT, T))
    )
    assert hot > low
    assert high > low


@settings(deadline=None)
@given(st.floats(0.05, 5), st.floats(-5, 12))
def test_statistics_are_ordered(x, eta):
    fermi, classical = (sums(kind, (x,), eta)["N"] for kind in ("fermi", "classical"))
    assert 0 < fermi < classical
    if eta < 0:
        assert classical < sums("bose", (x,), eta)["N"]


def test_arrays_broadcast():
    levels = OscillatorLevels((KT, 2 * KT), FLOOR, "bose")
    T = np.array([[0.5], [1.0], [2.0]]) * KT / K_B
    mu = -np.array([0.1, 1.0]) * KT
    moments = levels.moments(mu, T)
    assert moments.N.shape == (3, 2)
    assert moments.N[2, 1] == pytest.approx(float(levels.moments(mu[1], T[2, 0]).N), rel=1e-14, abs=0)


@pytest.mark.parametrize(
    ("mu", "T", "words"),
    [(1e-32, 1e-7, "mu came above the lowest level"), (0.0, 0.0, "need a temperature above zero")],
)
def test_refuses_in_words(mu, T, words):
    with pytest.raises(NoAnswerError, match=words):
        OscillatorLevels((KT,), FLOOR, "bose").moments(mu, T)


def test_a_fermi_gas_too_cold_for_the_line_says_so():
    with pytest.raises(NoAnswerError, match="raise T"):
        OscillatorLevels((KT,), FLOOR, "fermi").moments(KT, 1e-7 * KT / K_B)
