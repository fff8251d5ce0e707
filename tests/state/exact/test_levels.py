"""Exact levels: against closed forms, dense matrices of other kinds, and published criteria of T_c."""

from __future__ import annotations

import numpy as np
import pytest
from scipy.constants import hbar, k, physical_constants

import eoscore

MASS = 84 * physical_constants["atomic mass constant"][0]
UNIT = hbar**2 / MASS / 1e-12  # J: hbar = m = 1 with lengths in um
WALLS = "V(x, y, z) = 0 J where " + ", ".join(f"{c} > 0 um, {c} < 10 um" for c in "xyz")
TWELVE = f"V(x, y, z) = {UNIT / 2!r} J*((x/(1 um))^12 + (y/(1 um))^12 + (z/(1 um))^12)"


def held(place, levels="levels exact", gas="m = 84 u"):
    lab = eoscore.loads(f"gas g {{ {gas} }}\ntrap t {{ {place}\n {levels} }}")
    return lab["g"].held_in(lab["t"])


def ratio(place, N):
    return held(place).T_c(N=N) / held(place, "").T_c(N=N)


@pytest.mark.parametrize(
    ("N", "expected"),
    [(1e3, 0.926511867047), (1e4, 0.965535773557), (1e5, 0.984060592344), (1e8, 0.998426576123)],
)
def test_harmonic_trap(N, expected):
    """N_ex(mu = E_0) = N, by the exact sum of mpmath (method of Ketterle and van Druten, PRA 54, 656 (1996))."""
    for place in ("V(r) = m/2*(2*pi*100 Hz)^2*r^2", "V(x, y, z) = m/2*(2*pi*80 Hz)^2*(x^2 + y^2 + z^2)"):
        assert ratio(place, N) == pytest.approx(expected, rel=1e-9)


@pytest.mark.parametrize(("N", "expected"), [(1e3, 1.258334827), (1e4, 1.146354316), (1e5, 1.081788358)])
def test_hard_cube(N, expected):
    """Theta-function sums, mu = E_ground, T_0 of the bulk; digits worked out with mpmath."""
    exact = ratio(WALLS, N)
    assert exact == pytest.approx(expected, rel=1e-7)
    shift = held(WALLS, "").find(["shift_size"], {"N": N})["shift_size"]
    assert shift.value == pytest.approx(expected - 1, rel=1e-6)
    assert "all orders" in shift.route


@pytest.mark.parametrize(("N", "expected"), [(1e3, 1.107257741), (1e4, 1.047901468), (1e5, 1.021831378)])
def test_periodic_cube(N, expected):
    """As for walls; the ground state has no energy."""
    assert ratio("volume = 1e-15 m3", N) == pytest.approx(expected, rel=1e-8)


@pytest.mark.parametrize(("N", "expected"), [(1e3, 0.986770699), (1e4, 0.992055363), (1e5, 0.996153355)])
def test_sum_of_twelfth_powers(N, expected):
    """sum x_i^12/2 with hbar = m = 1: a sinc-function diagonalisation on two grids; no rise of 40 % is seen."""
    assert ratio(TWELVE, N) == pytest.approx(expected, rel=1e-6)


def test_lowest_level_of_a_twelfth_power():
    """E_0 = 2.045642228 for the three directions, by the same diagonalisation."""
    assert held(TWELVE).model.whole.lowest / UNIT == pytest.approx(2.045642228, rel=1e-9)


def dense_numbers(potential, box, points, kT):
    """N_ex of three equal directions at mu = E_0, from a matrix of finite differences of second order."""
    x = np.linspace(-box, box, points + 2)[1:-1]
    h = x[1] - x[0]
    matrix = np.diag(1 / h**2 + potential(x)) - np.diag(np.full(points - 1, 0.5 / h**2), 1)
    matrix -= np.diag(np.full(points - 1, 0.5 / h**2), -1)
    e = np.linalg.eigvalsh(matrix)
    e = (e - e[0])[:60]
    whole = (e[:, None, None] + e[:, None] + e).ravel()
    return float(np.sum(1 / np.expm1(np.sort(whole)[1:] / kT)))


def test_against_a_dense_matrix():
    """V = sum x^4/2 + x^2/10 by finite differences, extrapolated to step 0 from two grids."""
    kT = 3.0
    potential = lambda x: x**4 / 2 + x**2 / 10
    coarse, fine = (dense_numbers(potential, 5.0, n, kT) for n in (399, 799))
    reference = (4 * fine - coarse) / 3
    terms = " + ".join(f"(({c}/(1 um))^4/2 + ({c}/(1 um))^2/10)" for c in "xyz")
    trap = held(f"V(x, y, z) = {UNIT!r} J*({terms})")
    assert trap.N_c(T=kT * UNIT / k) == pytest.approx(reference, rel=1e-6)


def test_heat_capacity_and_fraction_are_consistent():
    """C_N = dU/dT at fixed N across the smooth transition; f_0 = 1 - N_ex/N."""
    trap = held(WALLS)
    T = 0.8 * trap.T_c(N=1e3)
    state, h = trap.state(N=1e3, T=T), 1e-4
    slope = (trap.state(N=1e3, T=T * (1 + h)).U - trap.state(N=1e3, T=T * (1 - h)).U) / (2 * h * T)
    assert pytest.approx(slope, rel=1e-6, abs=0) == state.C_N
    assert state.f_0 == pytest.approx(1 - trap.N_c(T=T) / 1e3, rel=1e-10)


def test_many_particles_are_the_continuum():
    """The shift of a harmonic trap over its first order tends to 1 as N^(-1/3) ln N."""
    place = "V(r) = m/2*(2*pi*100 Hz)^2*r^2"
    left = [(ratio(place, N) - 1) / (-0.727503602287948 * N ** (-1 / 3)) - 1 for N in (1e4, 1e7)]
    assert abs(left[1]) < abs(left[0]) / 2.5


@pytest.mark.parametrize(
    ("place", "power"),
    [
        ("V(r) = 2e-31 J*(r/(1 um))^4", -4 / 9),
        ("V(r) = 1e-24 J/m*r", -2 / 9),
    ],
)
def test_the_shift_falls_with_the_right_power(place, power):
    """The lowest level over kT_c: r^p gives N^(-2p/(3(p + 2))) (Salasnich, Int. J. Mod. Phys. B 16, 2185 (2002))."""
    N = np.array([1e9, 1e12])
    shift = held(place, "").find(["shift_size"], {"N": N})["shift_size"].value
    assert np.log(shift[1] / shift[0]) / np.log(N[1] / N[0]) == pytest.approx(power, rel=0.03)


def test_walls_take_a_layer_away():
    """States miss a layer as thick as lambda_T at walls: shift N^(1/3) is a straight line in ln N, by long waves."""
    N = np.array([1e9, 1e12, 1e15])
    shift = held("V(r) = 0 J where r < 10 um", "").find(["shift_size"], {"N": N})["shift_size"].value
    first, second = np.diff(shift * N ** (1 / 3))
    assert second == pytest.approx(first, rel=0.01)


def test_one_dimension():
    """N_ex of 1D at hbar w/kT = 0.01: sum_l 1/(e^(0.01 l) - 1) = 518.4885156445064 (mpmath)."""
    trap = held("V(x) = m/2*(2*pi*100 Hz)^2*x^2")
    T = hbar * 2 * np.pi * 100 / k / 0.01
    assert trap.N_c(T=T) == pytest.approx(518.4885156445064, rel=1e-9)


@pytest.mark.parametrize(
    ("place", "radial"),
    [
        ("V(x, y, z) = 1e-24 J/m*sqrt(x^2 + y^2 + z^2)", "V(r) = 1e-24 J/m*r"),
        (
            "V(x, y, z) = 1e-31 J*((x^2 + y^2)/(1 um)^2)^2 + 1e-31 J*(z/(1 um))^2 where x^2 + y^2 < (9 um)^2",
            "V(rho, z) = 1e-31 J*(rho/(1 um))^4 + 1e-31 J*(z/(1 um))^2 where rho < 9 um",
        ),
    ],
)
def test_what_turns_about_the_origin_may_be_written_in_x_y_z(place, radial):
    assert held(place).N_c(T=2e-8) == pytest.approx(held(radial).N_c(T=2e-8), rel=1e-9)


WORDS = [
    ("V(x, y, z) = 1e-24 J/m*sqrt(x^2 + y^2 + 4*z^2)", "m = 84 u", "depend on each other"),
    (
        "V(x, y, z) = 1e-30 J*(x^2 + y^2 + z^2 + x^2*y^2/(1 um)^2)/(1 um)^2",
        "m = 84 u",
        "depend on each other",
    ),
    ("V(x) = -1e-29 J*exp(-(x/(1 um))^2)", "m = 84 u", "holds at every energy"),
    ("volume = 1 mm3", "m = 84 u\n statistics fermi", "fermions"),
    ("volume = 1 mm3", "m = 84 u\n E(p) = abs(p)*(1 m/s)", "free particles"),
    ("volume = 1 mm3", "m = 84 u\n a_s = 1 nm\n treatment hartree_fock", "ideal gas"),
]


@pytest.mark.parametrize(("place", "gas", "words"), WORDS)
def test_words(place, gas, words):
    text = f"gas g {{ {gas} }}\ntrap t {{ {place}\n levels exact }}\n"
    lab = eoscore.loads(text + "find U for g in t with N = 1e4, T = 1 uK")
    assert words in lab.answers()[0].found["U"].reasons[0].text


def test_the_line_in_the_file():
    with pytest.raises(eoscore.TarnError, match="no way to count levels"):
        eoscore.loads("trap t { volume = 1 mm3\n levels some }\ngas g { m = 1 u }\nfind depth for g in t")
    with pytest.raises(eoscore.TarnError, match="belongs into `trap NAME"):
        eoscore.loads("gas g { m = 1 u\n levels exact }")
    text = "gas g { m = 84 u }\ntrap t { volume = 1 mm3\n levels exact }\n"
    answer = eoscore.loads(text + "find T_c for g in t with N = 1e5")
    assert "exact sums" in answer.answers()[0].found["T_c"].route


@pytest.mark.parametrize(
    ("place", "N", "expected", "within"),
    [
        ("V(r) = 0 J where r < 10 um", 1e3, 1.21656629, 1e-7),
        ("V(r) = 0 J where r < 10 um", 1e4, 1.12223661, 1e-7),
        (f"V(r) = {UNIT / 2!r} J*(r/(1 um))^12", 1e3, 0.98370, 1e-5),
        (f"V(r) = {UNIT / 2!r} J*(r/(1 um))^12", 1e4, 0.990920, 1e-6),
    ],
)
def test_isotropic(place, N, expected, within):
    """A hard sphere by spherical Bessel zeros; r^12/2 by a sinc-function diagonalisation on two grids."""
    assert ratio(place, N) == pytest.approx(expected, rel=within)
