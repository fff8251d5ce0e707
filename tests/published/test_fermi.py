"""Ideal Fermi gases: Butts and Rokhsar, Phys. Rev. A 55, 4346 (1997), and Fermi functions by mpmath."""

from math import pi

import numpy as np
import pytest

from eoscore.constants import HBAR, K_B

from .held import held

LITHIUM = "isotope Li-6\n statistics fermi"
OMEGA = 2 * pi * 100
HARMONIC = "V(x, y, z) = m/2 * (2*pi*100 Hz)^2 * (x^2 + y^2 + z^2)"
BOX = "volume = 1e-12 m3"


def fermi_temperature(trap, N):
    """E_F/k: hbar w (6N)^(1/3) in the trap, hbar^2 (6 pi^2 n)^(2/3)/2m in the box."""
    if trap.volume is None:
        return HBAR * OMEGA * (6 * N) ** (1 / 3) / K_B
    return HBAR**2 * (6 * pi**2 * N / trap.volume) ** (2 / 3) / (2 * trap.gas.mass) / K_B


@pytest.mark.parametrize(("place", "energy"), [(BOX, 0.6), (HARMONIC, 0.75)])
def test_ground_state(place, energy):
    """E_F = hbar w (6 N)^(1/3) = 181.7 hbar w for 1e6, E/NE_F = 3/4 (3/5 in a box); Sommerfeld's t^2 is 1e-11 here."""
    trap, N = held(place, LITHIUM), 1e6
    T = fermi_temperature(trap, N)
    state = trap.state(N=N, T=1e-6 * T)
    assert state.mu / (K_B * T) == pytest.approx(1, rel=1e-11, abs=0)
    assert pytest.approx(energy, rel=1e-10, abs=0) == state.U / (N * K_B * T)
    assert state.f_0 == 0


@pytest.mark.parametrize(("place", "t"), [(BOX, 0.988733549938), (HARMONIC, 0.56966668213)])
def test_where_the_chemical_potential_vanishes(place, t):
    trap, N = held(place, LITHIUM), 1e6
    T = fermi_temperature(trap, N)
    assert pytest.approx(t, rel=1e-10, abs=0) == trap.state(N=N, mu=0.0).T / T


TABLE = [
    (BOX, 0.1, 0.99164123637, 0.624283106151),
    (BOX, 0.2, 0.964576039398, 0.691516225771),
    (BOX, 0.5, 0.743112084259, 1.02164233679),
    (BOX, 1.0, -0.0214607549869, 1.69673935377),
    (HARMONIC, 0.1, 0.967113447255, 0.7979774463),
    (HARMONIC, 0.2, 0.869028606884, 0.929151152715),
    (HARMONIC, 0.5, 0.218013064088, 1.60725892688),
    (HARMONIC, 1.0, -1.77128812543, 3.03052982611),
]


@pytest.mark.parametrize(("place", "t", "mu", "energy"), TABLE)
def test_finite_temperature(place, t, mu, energy):
    trap, N = held(place, LITHIUM), 1e6
    T = fermi_temperature(trap, N)
    state = trap.state(N=N, T=t * T)
    assert state.mu / (K_B * T) == pytest.approx(mu, rel=1e-10, abs=0)
    assert pytest.approx(energy, rel=1e-10, abs=0) == state.U / (N * K_B * T)


def test_degenerate_heat_capacity():
    """C/Nk = pi^2 t in the harmonic trap, pi^2 t/2 in the box (Sommerfeld), to order t^2."""
    t = 1e-4
    for place, slope in ((HARMONIC, pi**2), (BOX, pi**2 / 2)):
        trap, N = held(place, LITHIUM), 1e6
        state = trap.state(N=N, T=t * fermi_temperature(trap, N))
        assert pytest.approx(slope * t, rel=1e-6, abs=0) == state.C_N / (N * K_B)
        assert pytest.approx(slope * t, rel=1e-6, abs=0) == state.S / (N * K_B)


def test_worked_example_of_butts_and_rokhsar():
    """1e5 Li-6, w_r = 3800/s, axial/radial = sqrt 8: T_F is printed as 3.5 uK (10 %); digits computed."""
    trap = held("V(x, y, z) = m/2 * (3800 Hz)^2 * (x^2 + y^2 + 8*z^2)", LITHIUM)
    assert trap.state(N=1e5, T=1e-11).mu / K_B == pytest.approx(3.46211819e-6, rel=1e-7, abs=0)
    assert trap.state(N=1e5, T=1e-11).mu / K_B == pytest.approx(3.5e-6, rel=0.1, abs=0)


def test_fermions_do_not_condense():
    trap = held(HARMONIC, LITHIUM)
    found = trap.find(["T_c", "N_c", "N_0"], {"N": 1e5, "T": 1e-9})
    assert found["N_0"].value == 0
    assert "do not condense" in found["T_c"].why
    assert "do not condense" in found["N_c"].why
    assert np.isnan(found["T_c"].value)
