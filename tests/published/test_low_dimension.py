"""Photons, relativistic gases, lattice bands and magnons: the momentum measure of a gas against published numbers.

Every number is the local density or pressure of the uniform gas at mu = 0, so that one function is tried alone.
"""

import math

import numpy as np
import pytest
from scipy.special import ive, zeta

from eoscore.constants import HBAR, K_B, C
from eoscore.gas import gas_of
from eoscore.gas.registry import Signatures
from eoscore.language.reading import read


def gas(block):
    """The gas of a Tarn block."""
    program = read(f"gas probe {{ {block} }}", dispersions=Signatures())
    return gas_of(program.bind("probe", None).gas)


def light():
    return gas("E(p) = c*p\n degeneracy = 2")


def test_photon_number_density():
    """16 pi zeta(3) (k/hc)^3 T^3 = 20286846.033907 m^-3 K^-3 T^3, from the exact constants of the SI (2019)."""
    T = np.array([1.0, 300.0])
    assert light().local_density(0.0, T, 3) == pytest.approx(20286846.033907 * T**3, rel=1e-10, abs=0)
    assert light().local_density(0.0, 300.0, 3) == pytest.approx(5.4774484291549e14, rel=1e-10, abs=0)


def test_radiation_constant():
    """u = 3 P = a T^4, a = 8 pi^5 k^4/(15 h^3 c^3) = 7.56573325028e-16; a c/4 = 5.6703744191844e-8 (CODATA 2022)."""
    u = 3 * light().local_pressure(0.0, 1.0, 3)
    assert u == pytest.approx(7.56573325028e-16, rel=1e-10, abs=0)
    assert u * C / 4 == pytest.approx(5.6703744191844e-8, rel=1e-10, abs=0)


def test_mean_energy_and_entropy_of_a_photon():
    """3 zeta(4)/zeta(3) kT (published 2.70 kT) and 4 zeta(4)/zeta(3) k."""
    T = 2.7255  # K: D. J. Fixsen, Astrophys. J. 707, 916 (2009)
    n, P = (float(f(0.0, T, 3)) for f in (light().local_density, light().local_pressure))
    assert 3 * P / (n * K_B * T) == pytest.approx(2.7011780329191, rel=1e-12, abs=0)
    assert 4 * P / (n * K_B * T) == pytest.approx(3.6015707105588, rel=1e-12, abs=0)
    assert n * 1e-6 == pytest.approx(410.72684792, rel=1e-9, abs=0)  # per cm3, published "about 411"
    assert pytest.approx(1479.26178555, rel=1e-9, abs=0) == 4 * P / (K_B * T) * 1e-6  # photons alone


@pytest.mark.parametrize(("d", "order"), [(2, 2), (3, 3)])
def test_massless_bosons(d, order):
    """kT_c = (pi^2 hbar^3 c^3 n/zeta(3))^(1/3) and (2 pi hbar^2 c^2 n/zeta(2))^(1/2).

    S. Fujita, T. Kimura, Y. Zheng, Found. Phys. 21, 1117 (1991).
    """
    T = 40.0
    n = float(gas("E(p) = c*p").local_density(0.0, T, d))
    per_volume = {2: 2 * math.pi, 3: math.pi**2}[d]
    assert (per_volume * n / zeta(order)) ** (1 / d) * HBAR * C == pytest.approx(K_B * T, rel=1e-12, abs=0)


MASS = 1e-30  # kg; the numbers below are in units of m = hbar = c = k = 1
UNIT_T, UNIT_N = MASS * C**2 / K_B, (MASS * C / HBAR) ** 3
PAIRS = f"m = {MASS / 1e-3} g\n dispersion relativistic {{ antiparticles = 1 }}"
ALONE = f"m = {MASS / 1e-3} g\n dispersion relativistic"


@pytest.mark.parametrize(
    ("t", "density"),
    [
        (0.01, 1.67472105658e-4),
        (0.1, 5.76823910849e-3),
        (1.0, 0.341414688618),
        (10.0, 33.3417729115),
        (100.0, 3333.34177673),
    ],
)
def test_pairs(t, density):
    """Particles less antiparticles at mu = m c^2 by quadrature in mpmath.

    Limit m T^2/3: H. E. Haber, H. A. Weldon, PRL 46, 1497 (1981) (from memory).
    """
    n = float(gas(PAIRS).local_density(0.0, t * UNIT_T, 3)) / UNIT_N
    assert n == pytest.approx(density, rel=1e-9, abs=0)
    if t >= 10:
        assert n == pytest.approx(t**2 / 3, rel=0.03 / t, abs=0)


@pytest.mark.parametrize(
    ("t", "density"), [(1.0, 0.372622858034), (10.0, 139.85659845), (100.0, 123480.252458)]
)
def test_without_antiparticles(t, density):
    """Particles alone at mu = m c^2 by quadrature in mpmath; both cases: arXiv:0706.2833."""
    n = float(gas(ALONE).local_density(0.0, t * UNIT_T, 3)) / UNIT_N
    assert n == pytest.approx(density, rel=1e-9, abs=0)


def test_magnons_of_a_ferromagnet():
    """n Q a^3 = zeta(3/2)/(4 pi)^(3/2) (kT/2JS)^(3/2); Kittel, Intro. Solid State Phys., prints 0.0587."""
    T = 10.0
    two_js = 1e-21  # J; E = 2 J S a^2 k^2
    a = 3e-10
    n = float(gas("E(p) = 1e-21 J * (0.3 nm*p/hbar)^2").local_density(0.0, T, 3))
    per_cell = n * a**3 / (K_B * T / two_js) ** 1.5
    assert per_cell == pytest.approx(0.0586436213476, rel=1e-12, abs=0)
    assert per_cell == pytest.approx(0.0587, abs=1e-4)


BAND = """
    J = 1e-30 J
    a = 500 nm
    E(px, py, pz) = 2*J*(3 - cos(px*a/hbar) - cos(py*a/hbar) - cos(pz*a/hbar))
        where abs(px) < pi*hbar/a, abs(py) < pi*hbar/a, abs(pz) < pi*hbar/a
"""
J, A = 1e-30, 500e-9


@pytest.fixture(scope="module")
def band():
    return gas(BAND)


@pytest.mark.parametrize(
    ("t", "filling"),
    [(0.1, 0.001872872955278), (1.0, 0.06725117068456), (5.0, 0.8602835772494), (10.0, 2.07686768569)],
)
def test_critical_filling_of_a_lattice(band, t, filling):
    """sum_j [e^{-2jJ/kT} I_0(2jJ/kT)]^3 by mpmath: K(b) of each of three equal bands is a Bessel function."""
    n = float(band.local_density(0.0, t * J / K_B, 3)) * A**3
    assert n == pytest.approx(filling, rel=1e-10, abs=0)


def test_watson_integral(band):
    """n_c -> I_3 kT/2J - 1/2 + <E>/12 kT for hot bosons, <E> = 6 J the middle of the band.

    I_3 = 0.505462019717326: G. N. Watson, Q. J. Math. 10, 266 (1939); 1/(e^x - 1) = 1/x - 1/2 + x/12 - ...
    """
    t = 1e4
    n = float(band.local_density(0.0, t * J / K_B, 3)) * A**3
    assert (n + 0.5 - 0.5 / t) * 2 / t == pytest.approx(0.505462019717326, rel=1e-10, abs=0)


def test_partition_of_a_band(band):
    """K(b) a^3 = [e^{-2bJ} I_0(2bJ)]^3 (DLMF 10.32.1)."""
    b = np.array([0.1, 1.0, 7.0]) / J
    assert band.dispersion.partition(b, 3) * A**3 == pytest.approx(ive(0, 2 * b * J) ** 3, rel=1e-9, abs=0)


@pytest.mark.parametrize(
    ("t", "mu", "energy"),
    [
        (0.1, 0.99164123637, 0.624283106151),
        (0.2, 0.964576039398, 0.691516225771),
        (0.5, 0.743112084259, 1.02164233679),
        (1.0, -0.0214607549869, 1.69673935377),
    ],
)
def test_uniform_fermi_gas(t, mu, energy):
    """mu/E_F and E/N E_F at T/T_F by mpmath's polylogarithm; n and P = 2U/3V follow from mu."""
    fermions = gas("m = 6 u\n statistics fermi")
    fermi_energy, k_f = 1e-29, math.sqrt(2 * fermions.mass * 1e-29) / HBAR
    T = t * fermi_energy / K_B
    n = float(fermions.local_density(mu * fermi_energy, T, 3))
    assert n == pytest.approx(k_f**3 / (6 * math.pi**2), rel=1e-10, abs=0)
    P = float(fermions.local_pressure(mu * fermi_energy, T, 3))
    assert 1.5 * P / (n * fermi_energy) == pytest.approx(energy, rel=1e-10, abs=0)
