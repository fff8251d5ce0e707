"""Ideal gases in power-law traps: Bagnato, Pritchard, Kleppner, Phys. Rev. A 35, 4354 (1987), formulas from memory.

Digits of the closed forms from mpmath: E/NkT_c = a zeta(a+1)/zeta(a), C(T_c-) = a(a+1) zeta(a+1)/zeta(a), the jump
a^2 zeta(a)/zeta(a-1) for a > 2, S = (a+1) zeta(a+1)/zeta(a), a = 3/2 + 3/p.
"""

from math import inf, pi

import numpy as np
import pytest
from scipy.special import zeta

from eoscore.constants import HBAR, K_B

from .held import held, power_trap

HARMONIC = "V(x, y, z) = m/2 * (2*pi*100 Hz)^2 * (x^2 + y^2 + z^2)"
POWERS = [
    (1, 4.5, 4.374123216839, 24.05767769261, 18.95552065349, 5.346150598359),
    (2, 3, 2.701178032919, 10.8047121316763, 6.57686672461295, 3.601570710559),
    (3, 2.5, 2.099784886563, 7.349247102971, 3.20945279247, 2.939698841189),
    (4, 2.25, 1.786105172971, 5.804841812154, 1.608736164124, 2.579929694291),
    (6, 2, 1.461525938803, 4.384577816409, 0, 2.192288908204),
    (12, 1.75, 1.123843129238, 3.090568605404, 0, 1.766039203088),
    (inf, 1.5, 0.770268670193, 1.925671675482, 0, 1.283781116988),
]


@pytest.mark.parametrize(("p", "a", "energy", "C", "jump", "entropy"), POWERS)
def test_at_the_transition(p, a, energy, C, jump, entropy):
    trap, N = power_trap(p), 1e5
    T = trap.T_c(N=N)
    state = trap.state(N=N, T=T)
    assert trap.find(["exponent"], {"T": T})["exponent"].value == pytest.approx(a, rel=1e-12, abs=0)
    assert pytest.approx(energy, rel=1e-12, abs=0) == state.U / (N * K_B * T)
    assert pytest.approx(C, rel=1e-12, abs=0) == state.C_N / (N * K_B)
    assert pytest.approx(entropy, rel=1e-12, abs=0) == state.S / (N * K_B)


@pytest.mark.parametrize(("p", "a", "energy", "C", "jump", "entropy"), POWERS[:4])
def test_jump_of_the_heat_capacity(p, a, energy, C, jump, entropy):
    """From just above T_c, where C differs from its limit by a term of the order of (T/T_c - 1)^(a - 2)."""
    trap, N, step = power_trap(p), 1e5, 1e-11
    above = trap.state(N=N, T=trap.T_c(N=N) * (1 + step)).C_N / (N * K_B)
    assert C - above == pytest.approx(jump, rel=10 * step ** min(a - 2, 1) + 1e-9, abs=0)


@pytest.mark.parametrize("p", [6, 12, inf])
def test_heat_capacity_is_continuous_for_weak_exponents(p):
    """No jump for a <= 2: C differs by alpha^(2 - a), and logarithmically at a = 2 itself."""
    trap, N = power_trap(p), 1e5
    T = trap.T_c(N=N)
    below, above = trap.state(N=N, T=T * (1 + np.array([-1e-9, 1e-9]))).C_N / (N * K_B)
    assert above == pytest.approx(below, rel=0.2 if p == 6 else 2e-3, abs=0)


@pytest.mark.parametrize(("p", "a", "energy", "C", "jump", "entropy"), POWERS)
def test_below_the_transition(p, a, energy, C, jump, entropy):
    """N_0/N = 1 - t^a and E/NkT_c = energy t^(a + 1)."""
    trap, N = power_trap(p), 1e5
    T, t = trap.T_c(N=N), np.array([0.01, 0.3, 0.9])
    state = trap.state(N=N, T=t * T)
    assert state.f_0 == pytest.approx(1 - t**a, abs=1e-12)
    assert pytest.approx(energy * t ** (a + 1), rel=1e-12, abs=0) == state.U / (N * K_B * T)


def test_harmonic_critical_temperature():
    """kT_c = hbar w (N/zeta(3))^(1/3) = 0.94 hbar w N^(1/3); 209.5 nK for 1e5 Rb-87 at 100 Hz."""
    trap = held(HARMONIC)
    T = trap.T_c(N=1e5)
    assert T * K_B / (HBAR * 2 * pi * 100 * 1e5 ** (1 / 3)) == pytest.approx(
        0.940498970257041, rel=1e-12, abs=0
    )
    assert pytest.approx(209.506613934e-9, rel=1e-9, abs=0) == T


@pytest.mark.parametrize(
    ("t", "z", "C"),
    [
        (1.5, 0.340004551071, 3.15448425304),
        (2.0, 0.147414113732, 3.05965761411),
        (3.0, 0.0442723456345, 3.01697067809),
    ],
)
def test_harmonic_above_the_transition(t, z, C):
    """C = 12 g4/g3 - 9 g3/g2, by mpmath."""
    trap, N = held(HARMONIC), 1e5
    state = trap.state(N=N, T=t * trap.T_c(N=N))
    assert state.fugacity == pytest.approx(z, rel=1e-10, abs=0)
    assert pytest.approx(C, rel=1e-10, abs=0) == state.C_N / (N * K_B)


@pytest.mark.parametrize("p", [1, 2, 12])
def test_peak_density_at_the_transition(p):
    """n(0) lambda^3 = zeta(3/2) in every trap, where the local picture holds."""
    trap = power_trap(p)
    assert pytest.approx(2.61237534868549, rel=1e-12, abs=0) == trap.state(N=1e5, T=trap.T_c(N=1e5)).PSD


def test_harmonic_energy_goes_as_that_of_massless_particles():
    """U ~ T^4 below T_c (Romero-Rochin, Bagnato, Braz. J. Phys. 35, 607, 2005)."""
    U = held(HARMONIC).state(N=1e6, T=[50e-9, 100e-9]).U
    assert np.log2(U[1] / U[0]) == pytest.approx(4, rel=1e-12, abs=0)


def test_two_dimensional_photons():
    """N_c = (pi^2/6)(kT/hbar w)^2 per polarisation at 300 K, 41 GHz: 77000 (Klaers et al., Nature 468, 545, 2010)."""
    trap = held("V(rho) = m/2 * (2*pi*4.1e10 Hz)^2 * rho^2", "m = 7e-36 kg\n degeneracy = 2")
    assert trap.N_c(T=300.0) == pytest.approx(76472.941093661, rel=1e-10, abs=0)
    assert trap.N_c(T=300.0) == pytest.approx(77000, rel=0.02, abs=0)
    N = trap.N_c(T=300.0)
    assert pytest.approx(6 * zeta(3) / zeta(2), rel=1e-12, abs=0) == trap.state(N=N, T=300.0).C_N / (N * K_B)


@pytest.mark.parametrize(
    ("N", "ratio"),
    [(1e3, 0.926511867047), (1e4, 0.965535773557), (1e5, 0.984060592344), (1e8, 0.998426576123)],
)
def test_saturation_of_a_finite_oscillator(N, ratio):
    """N_exc(mu = E0) = N by exact sums over levels, over T_c of the semiclassical gas (mpmath)."""
    trap = held(
        None,
        "isotope Rb-87\n f = 100 Hz\n dispersion trapped { omega_x = 2*pi*f omega_y = 2*pi*f omega_z = 2*pi*f }",
    )
    smooth = HBAR * 2 * pi * 100 / K_B * (N / zeta(3)) ** (1 / 3)
    assert trap.T_c(N=N) / smooth == pytest.approx(ratio, rel=1e-9, abs=0)
