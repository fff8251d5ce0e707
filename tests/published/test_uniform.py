"""The uniform ideal Bose gas in three dimensions.

Formulas from Einstein (1925) and textbook chapters as noted; digits from mpmath with CODATA 2022.
"""

import numpy as np
import pytest

import eoscore
from eoscore.constants import HBAR, K_B, M_U

from .held import held

RUBIDIUM_MASS = 86.909180529 * M_U
BOX = "volume = 1 m3"


@pytest.fixture(scope="module")
def box():
    return held(BOX)


def test_critical_temperature_constant(box):
    """kT_c = C hbar^2 n^(2/3)/m with C = 2 pi/zeta(3/2)^(2/3) (Einstein 1925)."""
    n = 1e19
    constant = K_B * box.T_c(n=n) * box.gas.mass / (HBAR**2 * n ** (2 / 3))
    assert constant == pytest.approx(3.31250200939562, rel=1e-12, abs=0)


def test_critical_temperature_of_rubidium(box):
    assert box.T_c(n=1e19) == pytest.approx(85.81774598e-9, rel=1e-9, abs=0)


def test_wavelength_and_critical_pressure_of_rubidium(box):
    """h/sqrt(2 pi m k T), and P_c = zeta(5/2) kT/lambda^3, which does not know n."""
    state = box.state(n=[3e18, 3e19], T=100e-9)
    assert state.lambda_T == pytest.approx(592.1981924e-9, rel=1e-9, abs=0)
    assert box.state(n=1e20, T=100e-9).pressure == pytest.approx(8.918023289e-12, rel=1e-9, abs=0)


@pytest.mark.parametrize(
    ("name", "unit", "value"),
    [
        ("pressure", "NkT", 0.513512446795188),
        ("U", "NkT", 0.770268670192782),
        ("S", "Nk", 1.28378111698797),
        ("C_N", "Nk", 1.92567167548195),
    ],
)
def test_at_the_transition(box, name, unit, value):
    """zeta(5/2)/zeta(3/2) times 1, 3/2, 5/2, 15/4 (Pathria, ch. 7, from memory; 1.925 Nk in AJP 72, 1193, 2004)."""
    n = 1e19
    T = box.T_c(n=n)
    scale = n * K_B * (T if unit == "NkT" else 1.0)
    assert getattr(box.state(n=n, T=T), name) / scale == pytest.approx(value, rel=1e-12, abs=0)


def test_slope_break_of_the_heat_capacity(box):
    """Delta dC/dT = (27/16 pi) zeta(3/2)^2 Nk/T_c (Landau-Lifshitz give 3.66); slopes by differences, 1e-3."""
    n, h = 1e19, 1e-4
    T = box.T_c(n=n)
    C = box.state(n=n, T=T * (1 + h * np.array([-2.0, -1.0, 1.0, 2.0, 3.0]))).C_N / (n * K_B)
    left = (C[1] - C[0]) / h
    right = (-2.5 * C[2] + 4 * C[3] - 1.5 * C[4]) / h
    assert left - right == pytest.approx(3.66576873386935, rel=2e-3, abs=0)
    assert left == pytest.approx(2.88850751322293, rel=1e-3, abs=0)


@pytest.mark.parametrize(
    ("t", "z", "C"),
    [
        (1.5, 0.851169124496, 1.71034420459),
        (2.0, 0.66341753059, 1.6313807937),
        (3.0, 0.420345417665, 1.5692344434),
    ],
)
def test_above_the_transition(box, t, z, C):
    """From g-functions by mpmath."""
    n = 1e19
    state = box.state(n=n, T=t * box.T_c(n=n))
    assert state.fugacity == pytest.approx(z, rel=1e-10, abs=0)
    assert state.C_N / (n * K_B) == pytest.approx(C, rel=1e-10, abs=0)


def test_virial_expansion(box):
    """PV/NkT = 1 - 0.1767767 x - 0.0033000 x^2 - 0.000111289 x^3, x = n lambda^3 (Pathria, ch. 7, from memory)."""
    T, x = 1e-6, 0.02
    n = x / box.state(n=1e15, T=T).lambda_T ** 3
    ratio = box.state(n=n, T=T).pressure / (n * K_B * T)
    series = 1 - 0.176776695296637 * x - 0.00330005981991684 * x**2 - 0.000111289328467 * x**3
    assert ratio == pytest.approx(series, abs=2e-12)


def test_london_expansion_of_the_heat_capacity(box):
    """C = 1.5 Nk (1 + 0.231 t^-3/2 + 0.045 t^-3 + 0.007 t^-9/2) (London 1954, p. 203, by AJP 72, 1193, ref. 9)."""
    n, t = 1e19, np.array([4.0, 8.0])
    C = box.state(n=n, T=t * box.T_c(n=n)).C_N / (1.5 * n * K_B)
    assert pytest.approx(1 + 0.2309 * t**-1.5 + 0.0450 * t**-3 + 0.007 * t**-4.5, abs=2e-5) == C


@pytest.mark.parametrize(("volume", "T"), [(27.6, 3.13469117482)])
def test_london_helium(volume, T):
    """3.13 K with 27.6 cm3/mol (London, Phys. Rev. 54, 947, 1938, from memory); digits with the modern mass."""
    helium = held(BOX, "m = 4.00260325413 u")
    n = 6.02214076e23 / (volume * 1e-6)
    assert helium.T_c(n=n) == pytest.approx(T, rel=1e-8, abs=0)
    assert helium.T_c(n=n) == pytest.approx(3.13, abs=0.005)


@pytest.mark.parametrize(("density", "T"), [(145.0, 3.13437620), (146.2, 3.15164555)])
def test_helium_at_handbook_densities(density, T):
    helium = held(BOX, "m = 4.00260325413 u")
    assert helium.T_c(n=density / helium.gas.mass) == pytest.approx(T, rel=1e-8, abs=0)


def test_huang_number():
    """T_c = K0/(V^(2/3) M), V in cm3/mol, M in u; the textbook (Huang, from memory) rounds K0 to 115."""
    T = held(BOX, "m = 1 u").T_c(n=6.02214076e23 / 1e-6)
    assert pytest.approx(114.589113621, rel=1e-9, abs=0) == T


def test_photons_at_zero_chemical_potential():
    """411 photons per cm3 at 2.7255 K (Fixsen 2009), 2 zeta(3)/pi^2 (kT/hbar c)^3; digits from SI constants."""
    lab = eoscore.loads("gas light { E(p) = c*p\n degeneracy = 2 }")
    state = lab["light"].held_in(lab["uniform"]).state(mu=0.0, T=2.7255)
    assert state.n == pytest.approx(410.72684792e6, rel=1e-9, abs=0)


def test_black_body_energy_density():
    """u = a T^4, a = 8 pi^5 k^4/(15 h^3 c^3), and S/N k = 4 zeta(4)/zeta(3)."""
    light = held("volume = 1 m3", "E(p) = c*p\n degeneracy = 2")
    state = light.state(mu=0.0, T=300.0)
    assert pytest.approx(7.56573325028e-16 * 300.0**4, rel=1e-10, abs=0) == state.U
    assert pytest.approx(3.6015707105588, rel=1e-12, abs=0) == state.S / (state.N * K_B)
    assert pytest.approx(2.7011780329191, rel=1e-12, abs=0) == state.U / (state.N * K_B * 300)
