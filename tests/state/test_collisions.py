"""The elastic collision rate."""

from math import pi

import numpy as np
import pytest

from eoscore.constants import K_B

from .places import MASS, box, harmonic, held, power, sampled

A_S = 5e-9


def speed(T):
    return 8 * pi * A_S**2 * np.sqrt(16 * K_B * T / (pi * MASS))


@pytest.mark.parametrize(
    ("place", "share"), [(harmonic(), 2**-1.5), (power(1.0), 2**-3.0), (power(6.0), 2**-0.5)]
)
@pytest.mark.parametrize("route", ["closed", "function"])
def test_classical_gas(place, share, route):
    """int n^2/int n = n_peak 2^(-3/p) for n ~ exp(-(r/l)^p)."""
    gas = held(place if route == "closed" else sampled(place), "classical", a_s=A_S)
    state = gas.state(N=1e5, T=[500e-9, 2e-6])
    assert state.rate_coll == pytest.approx(speed(state.T) * state.n_peak * share, rel=1e-9, abs=0)


def test_saturated_bose_gas():
    """Harmonic: lambda^-3 sum_ij (ij)^(-3/2) (i + j)^(-3/2)/zeta(3), extrapolated from partial sums."""
    gas = held(harmonic(), a_s=A_S)
    T = 100e-9
    state = gas.state(N=1e6, T=T)
    i = np.arange(1.0, 3001.0)

    def partial(n):
        x = i[:n]
        return ((x[:, None] * x) ** -1.5 * (x[:, None] + x) ** -1.5).sum()

    a, b = partial(1500), partial(3000)
    total = b + (b - a) / (2**2 - 1)  # the tail falls as N^-2
    density = total / 1.2020569031595942 / state.lambda_T**3
    assert state.rate_coll == pytest.approx(speed(T) * density, rel=1e-7, abs=0)


@pytest.mark.parametrize("statistics", ["bose", "classical"])
def test_box(statistics):
    gas = held(box(), statistics, a_s=A_S)
    state = gas.state(N=1e5, T=1e-6)
    assert state.rate_coll == pytest.approx(speed(1e-6) * state.n, rel=1e-12, abs=0)


def test_a_high_top_changes_nothing():
    open_, cut = (held(harmonic(top=top), a_s=A_S).state(N=1e5, T=300e-9) for top in (np.inf, 4e-28))
    assert cut.rate_coll == pytest.approx(open_.rate_coll, rel=1e-10, abs=0)


def test_fermions_of_one_kind_do_not_meet():
    assert held(harmonic(), "fermi", a_s=A_S).state(N=1e5, T=1e-7).rate_coll == 0


@pytest.mark.parametrize(
    ("gas", "words"),
    [
        (held(harmonic(), "fermi", a_s=A_S, degeneracy=2.0), "several spin states"),
        (held(harmonic(d=2), a_s=A_S), "three dimensions"),
        (held(harmonic()), "no scattering length"),
    ],
)
def test_rates_that_are_not_defined(gas, words):
    assert words in gas.find(["rate_coll"], {"N": 1e5, "T": 1e-6})["rate_coll"].why
