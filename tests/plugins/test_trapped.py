"""Gases held by oscillator levels, from a file to the state, against closed forms and listed levels."""

import math

import numpy as np
import pytest

import eoscore as eos
from eoscore.constants import HBAR, K_B

OMEGA = 2 * math.pi * 3000.0
ALONG = 2 * math.pi * 30.0
PANCAKE = "dispersion trapped { omega_z = 2*pi*3000 Hz }"
DOT = "dispersion trapped { omega_x = 2*pi*3000 Hz\n omega_y = 2*pi*3000 Hz\n omega_z = 2*pi*3000 Hz }"
WIDE = "trap wide { V(x, y) = m/2*(2*pi*30 Hz)^2*(x^2 + y^2) }"


def gas(statistics, dispersion, place=None):
    lab = eos.loads(f"gas g {{ isotope Li-6\n statistics {statistics}\n {dispersion} }}\n{WIDE}")
    return lab["g"].held_in(lab[place] if place else None)


@pytest.mark.parametrize("N", [1e2, 1e5])
def test_classical_gas_between_dimensions(N):
    """N = z (kT/hbar omega)^2 / (1 - e^{-x}), below and above the lowest level."""
    T = 50e-9
    x = HBAR * OMEGA / (K_B * T)
    z1 = (K_B * T / (HBAR * ALONG)) ** 2 / -math.expm1(-x)
    state = gas("classical", PANCAKE, "wide").state(N=N, T=T)
    assert state.mu == pytest.approx(K_B * T * math.log(N / z1), rel=1e-12, abs=0)
    assert pytest.approx(2 + x / math.expm1(x), rel=1e-12, abs=0) == state.U / (N * K_B * T)
    assert pytest.approx(2 + (x / 2 / math.sinh(x / 2)) ** 2, rel=1e-11, abs=0) == state.C_N / (N * K_B)


def test_closed_shells_of_fermions():
    """Ten fermions fill the shells n = 0, 1, 2 with 1, 3, 6 states, and the next has 10: as many holes as particles.

    6 e^{-(mu - 2)/t} = 10 e^{-(3 - mu)/t}, t = kT in quanta, so mu = 5/2 + (t/2) ln(6/10), and sqrt(60) e^{-1/2t} of
    them are one quantum above the ground state, U = 15.
    """
    t = 0.04
    state = gas("fermi", DOT).state(N=10.0, T=t * HBAR * OMEGA / K_B)
    assert state.mu / (HBAR * OMEGA) == pytest.approx(2.5 + t / 2 * math.log(0.6), rel=1e-7, abs=0)
    assert pytest.approx(math.sqrt(60) * math.exp(-0.5 / t), rel=1e-5, abs=0) == state.U / (HBAR * OMEGA) - 15


@pytest.mark.parametrize("T", [20e-9, 300e-9])
def test_condensed_fraction_counts_every_level_but_the_lowest(T):
    x = HBAR * OMEGA / (K_B * T)
    n = np.arange(1, int(60 / x) + 2)
    excited = math.fsum((n + 1) * (n + 2) / 2 / np.expm1(n * x))
    N = 2 * excited + 10
    state = gas("bose", DOT).state(N=N, T=T)
    assert state.f_0 == pytest.approx(1 - excited / N, rel=1e-10, abs=0)


def test_stiff_levels_leave_two_dimensions():
    """kT far below the quantum across: N_c = (pi^2/6)(kT/hbar omega)^2 of the plane."""
    T = 5e-9
    thin = gas("bose", PANCAKE, "wide")
    assert thin.N_c(T=T) == pytest.approx(math.pi**2 / 6 * (K_B * T / (HBAR * ALONG)) ** 2, rel=1e-10, abs=0)


def test_soft_levels_make_three():
    """kT far above it: N_c -> zeta(3) (kT)^3/(hbar^3 w^2 w_z) (1 + 3 zeta(2)/(6 zeta(3)) x ...), x = hbar w_z/kT."""
    T = 1e-4
    x = HBAR * OMEGA / (K_B * T)
    bulk = (K_B * T / (HBAR * ALONG)) ** 2 / x
    wanted = bulk * (1.2020569031595942 + x * math.pi**2 / 12)
    assert gas("bose", PANCAKE, "wide").N_c(T=T) == pytest.approx(wanted, rel=3 * x**2, abs=0)
