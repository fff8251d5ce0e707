"""Relativistic gases with antiparticles: Haber and Weldon, Phys. Rev. Lett. 46, 1497 (1981), from memory.

Digits from mpmath in units m = hbar = c = k = 1.
"""

import numpy as np
import pytest

from eoscore.constants import HBAR, K_B, C
from eoscore.errors import NoAnswerError

from .places import box, harmonic, held, uniform

MASS = 1e-35
LENGTH, HOT = HBAR / (MASS * C), MASS * C**2 / K_B


def relativistic(place, statistics="bose", antiparticles=1.0):
    return held(place, statistics, mass=MASS, dispersion="relativistic", antiparticles=antiparticles)


@pytest.mark.parametrize(
    ("t", "antiparticles", "n"),
    [
        (0.01, 1, 1.67472105658e-4),
        (0.1, 1, 5.76823910849e-3),
        (1.0, 1, 0.341414688618),
        (10.0, 1, 33.3417729115),
        (100.0, 1, 3333.34177673),
        (1.0, 0, 0.372622858034),
        (10.0, 0, 139.85659845),
        (100.0, 0, 123480.252458),
    ],
)
def test_critical_density(t, antiparticles, n):
    gas = relativistic(uniform(), antiparticles=float(antiparticles))
    assert gas.n_c(T=t * HOT) * LENGTH**3 == pytest.approx(n, rel=2e-11, abs=0)
    assert gas.T_c(n=n / LENGTH**3) / HOT == pytest.approx(t, rel=1e-10, abs=0)


def test_ultra_relativistic_limit():
    """kT_c = (3 n (hbar c)^3/(m c^2))^(1/2) and f_0 = 1 - (T/T_c)^2, to a relative 2.5e-6 at kT = 100 m c^2."""
    gas = relativistic(uniform())
    T, n = 100 * HOT, 3333.34 / LENGTH**3
    assert gas.T_c(n=n) / HOT == pytest.approx((3 * n * LENGTH**3) ** 0.5, rel=3e-6, abs=0)
    t = T / gas.T_c(n=2 * n)
    assert gas.state(n=2 * n, T=T).f_0 == pytest.approx(1 - t**2, abs=3e-6)


@pytest.mark.parametrize("statistics", ["bose", "fermi", "classical"])
@pytest.mark.parametrize("share", [0.9, 0.1, 1e-3, 1e-6])
def test_number_is_a_difference(statistics, share):
    """alpha from N when particles and antiparticles nearly cancel, and N = 0 at mu = -m c^2."""
    gas = relativistic(box(1e-15), statistics)
    full = relativistic(box(1e-15)).N_c(T=HOT)
    state = gas.state(N=share * full, T=HOT)
    again = gas.state(mu=state.mu, T=HOT)
    assert pytest.approx(share * full, rel=2e-9 if share < 1e-5 else 1e-11, abs=0) == again.N
    assert state.mu / (MASS * C**2) > -1
    assert pytest.approx(0, abs=1e-13 * full) == gas.state(mu=-MASS * C**2, T=HOT).N


@pytest.mark.parametrize("statistics", ["bose", "fermi", "classical"])
def test_first_law_with_pairs(statistics):
    """The gap counts in U: T dS + mu dN = dU, by central differences."""
    gas, h = relativistic(harmonic(1e9), statistics), 1e-4
    N = 0.5 * relativistic(harmonic(1e9)).N_c(T=HOT)
    state = gas.state(N=N * (1 + np.array([-h, h])), T=HOT * (1 + np.array([-h, 2 * h])))
    middle = gas.state(N=N, T=HOT * (1 + h / 2))
    change = middle.T * np.diff(state.S)[0] + middle.mu * np.diff(state.N)[0]
    assert np.diff(state.U)[0] == pytest.approx(change, rel=1e-6, abs=0)
    around = gas.state(N=N, T=middle.T * np.array([1 - h, 1 + h]))
    assert np.diff(around.U)[0] / (2 * h * middle.T) == pytest.approx(middle.C_N, rel=1e-6, abs=0)


def test_chemical_potential_between_the_two_condensates():
    gas = relativistic(box(1e-15))
    with pytest.raises(NoAnswerError, match="with antiparticles mu must also stay above"):
        _ = gas.state(mu=-2.5 * MASS * C**2, T=HOT).N
