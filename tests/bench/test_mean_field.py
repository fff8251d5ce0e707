"""How long a Hartree-Fock state takes, as a ratio to the usual iteration on a radial grid."""

from __future__ import annotations

import time

import mpmath
import numpy as np
import pytest
from scipy import constants, optimize

import eoscore

MASS = 83.9134191 * constants.m_u  # AME2020
A_S = 123 * constants.value("Bohr radius")
OMEGA = 2 * np.pi * 100
NUMBER = 1e5
HARMONIC = "V(x, y, z) = m/2*(2*pi*100 Hz)^2*(x^2 + y^2 + z^2)"
CROSSED = """
    P = 1.50 W
    w = 55 um
    zR = pi*w^2/(1064 nm)
    beam(d2, l) = 2*P/(pi*w^2)/(1 + (l/zR)^2)*exp(-2*d2/(w^2*(1 + (l/zR)^2)))
    V(x, y, z) = -7.4e-37 J.m2/W*(beam(y^2 + z^2, x) + beam(x^2 + z^2, y)) + m*g_n*z
"""


def held(place):
    lab = eoscore.loads(
        f"gas g {{ m = 83.9134191 u\n a_s = 123 a0\n treatment hartree_fock\n}}\ntrap t {{ {place} }}"
    )
    return lab["g"].held_in(lab["t"])


def script(T):
    """N_0/N: densities of both parts iterated on 600 radii at each mu, g_(3/2) from a table made with mpmath."""
    logs = np.linspace(np.log(1e-7), np.log(60), 400)
    table = np.array([float(mpmath.polylog(1.5, mpmath.exp(-mpmath.exp(y))).real) for y in logs])
    kT, g = constants.k * T, 4 * np.pi * constants.hbar**2 * A_S / MASS
    wavelength = constants.h / np.sqrt(2 * np.pi * MASS * kT)
    r = np.linspace(0, np.sqrt(60 * kT / MASS) / OMEGA, 600)
    V = MASS / 2 * OMEGA**2 * r**2

    def densities(mu):
        thermal = np.zeros_like(r)
        for _ in range(60):
            condensed = np.maximum((mu - V) / g - 2 * thermal, 0.0)
            y = (V + 2 * g * (condensed + thermal) - mu) / kT
            wanted = np.interp(np.log(np.maximum(y, 1e-7)), logs, table) / wavelength**3
            thermal = (thermal + wanted) / 2
        return condensed, thermal

    def count(density):
        return np.trapezoid(4 * np.pi * r**2 * density, r)

    mu = optimize.brentq(lambda mu: sum(map(count, densities(mu))) / NUMBER - 1, 1e-33, 1e-29, xtol=1e-39)
    return count(densities(mu)[0]) / NUMBER


def fresh(trap, start=1e-7):
    """The condensate fraction at a temperature of its own each time: no result is kept."""
    T = iter(range(100, 100_000))
    return lambda: trap.state(N=NUMBER, T=next(T) * 1e-12 + start).f_0


def test_harmonic_trap(benchmark):
    trap = held(HARMONIC)
    assert 0 < benchmark(fresh(trap)) < 1
    start = time.perf_counter()
    expected = script(1e-7)
    took = time.perf_counter() - start
    benchmark.extra_info["script"] = took
    benchmark.extra_info["ratio"] = took / benchmark.stats.stats.median
    assert trap.state(N=NUMBER, T=1e-7).f_0 == pytest.approx(expected, rel=5e-3)
    assert benchmark.stats.stats.min < 0.05  # the round that others disturbed least


@pytest.mark.parametrize("T", [1e-7, 4e-7], ids=["cold", "warm"])
def test_two_beam_trap(benchmark, T):
    """Once the trap is compiled."""
    trap = held(CROSSED)
    trap.state(N=NUMBER, T=T)
    assert 0 < benchmark(fresh(trap, T)) < 1
    assert benchmark.stats.stats.min < 1
