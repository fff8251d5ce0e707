"""The parts that sums over levels are made of: levels on grids, orbits, tails, joined sums."""

from __future__ import annotations

import numpy as np
import pytest
from scipy.constants import hbar, k, physical_constants
from scipy.linalg import eigh_tridiagonal
from scipy.special import jn_zeros, zeta

import eoscore
from eoscore.errors import NoAnswerError
from eoscore.state.exact.integers import joined
from eoscore.state.exact.line import Line
from eoscore.state.exact.radial import Radial
from eoscore.state.exact.spectral import converged, eigenvalues

MASS = 84 * physical_constants["atomic mass constant"][0]
QUANTUM = hbar * 2 * np.pi * 100  # J
UNIT = hbar**2 / MASS / 1e-12  # J: hbar = m = 1 with lengths in um


def solved(potential, count, points, reach=6.0):
    ends = np.array([-reach]), np.array([reach])
    return eigenvalues(lambda x, _: potential(x), *ends, 1.0, count, points)[0]


def field(place):
    lab = eoscore.loads(f"gas g {{ m = 84 u }}\ntrap t {{ {place} }}")
    return lab["g"].held_in(lab["t"]).place.field


def test_levels_of_a_box_are_squares():
    x = eigenvalues(lambda x, _: np.zeros_like(x), np.zeros(2), np.array([1.0, 2.0]), 1.0, 20, 80)
    squares = (np.pi * np.arange(1, 21)) ** 2
    assert x == pytest.approx(np.array([squares, squares / 4]), rel=1e-10)


def test_spectral_convergence():
    """The error of the tenth level of x^4 falls faster than any power: each step gains more than the last."""
    exact = solved(lambda x: x**4, 10, 120, 4.0)[-1]
    points = [24, 28, 32, 36]
    errors = [abs(solved(lambda x: x**4, 10, n, 4.0)[-1] - exact) for n in points]
    powers = np.diff(np.log(errors)) / np.diff(np.log(points))
    assert powers[-1] < powers[0] < -4


def test_two_grids_tell_the_error():
    """Levels 2 n + 1 of -d^2/dx^2 + x^2; an edge in the potential is seen."""
    ends = np.array([-8.0]), np.array([8.0])
    levels, error = converged(lambda x, _: x**2, *ends, 1.0, 16)
    assert levels[0] == pytest.approx(2 * np.arange(16) + 1, rel=1e-9)
    assert error < 1e-9
    assert converged(lambda x, _: np.where(x > 0.123, 30.0, 0.0), *ends, 1.0, 16)[1] > 1e-5


@pytest.mark.parametrize("step", [0.03, 0.1, 0.3])
def test_joined_sums(step):
    """sum e^(-b n) = 1/(1 - e^-b)."""
    whole = joined(20) @ np.exp(-step * np.arange(20)) + np.exp(-19 * step) / step
    assert whole == pytest.approx(1 / -np.expm1(-step), rel=1e-9)


def test_joined_sums_of_powers():
    """sum (n + 1)^-4 = zeta(4), with its integral from the last known term on."""
    n = np.arange(30.0)
    assert joined(30) @ (n + 1) ** -4 + 30**-3 / 3 == pytest.approx(zeta(4), rel=1e-10)


@pytest.mark.parametrize("kT", [0.2, 1, 5, 30, 1000])
@pytest.mark.parametrize(("name", "dimension"), [("r", 3), ("rho", 2)])
def test_sums_of_an_isotropic_oscillator(kT, name, dimension):
    """Z = (1 - e^-x)^-d from the radial levels alone, its mean energy d/(e^x - 1) quanta."""
    radial = Radial(field(f"V({name}) = m/2*(2*pi*100 Hz)^2*{name}^2"), MASS)
    z0, z1, _ = radial.sums(np.array([1 / (kT * QUANTUM)]), kT * QUANTUM)
    stated = radial.error_at(kT * QUANTUM)
    assert stated < (1e-6 if kT < 10 else 1e-8)
    assert 1 + z0[0] == pytest.approx((-np.expm1(-1 / kT)) ** -dimension, rel=stated)
    assert z1[0] / (1 + z0[0]) / QUANTUM == pytest.approx(dimension / np.expm1(1 / kT), rel=10 * stated)


@pytest.mark.parametrize("m", [0, 1, 5, 24])
def test_levels_of_a_hard_circle(m):
    """Squares of the zeros of J_m (scipy)."""
    energies = Radial(field("V(rho) = 0 J where rho < 1 um"), MASS).shells[0].energies[m] / UNIT
    assert energies == pytest.approx(jn_zeros(m, 16) ** 2 / 2, rel=1e-9)


def test_a_can_level_by_level():
    """N_ex at mu = E_0 and kT = 40 hbar^2/(m R^2): zeros of J_m, sines along the axis, all summed."""
    lab = eoscore.loads(
        "gas g { m = 84 u }\ntrap t { V(rho, z) = 0 J where rho < 1 um, z > 0 um, z < 2 um\n levels exact }"
    )
    kT, zeros = 40.0, [jn_zeros(m, 40) for m in range(70)]
    plane = np.concatenate([np.tile(z**2 / 2, 1 + (m > 0)) for m, z in enumerate(zeros)])
    plane = plane[plane < 40 * kT]
    levels = np.sort(np.add.outer(plane, (np.pi / 2 * np.arange(1, 40)) ** 2 / 2).ravel())
    expected = np.sum(1 / np.expm1((levels[1:] - levels[0]) / kT))
    trap = lab["g"].held_in(lab["t"])
    assert trap.N_c(T=kT * UNIT / k) == pytest.approx(expected, rel=1e-6)


@pytest.mark.parametrize("kT", [10.0, 300.0])
def test_sums_of_a_hard_sphere(kT):
    """Levels (zero of J_(l + 1/2))^2/2 of a sphere of radius 1: the s waves n pi; here l = 0 and 1 by themselves."""
    radial = Radial(field("V(r) = 0 J where r < 1 um"), MASS)
    first = radial.shells[0].energies / UNIT
    assert first[0] == pytest.approx((np.pi * np.arange(1, 17)) ** 2 / 2, rel=1e-9)
    tan = np.array(
        [4.493409457909064, 7.725251836937707, 10.904121659428900]
    )  # tan x = x (DLMF 10.21, from memory)
    assert first[1, :3] == pytest.approx(tan**2 / 2, rel=1e-9)
    assert radial.error_at(kT * UNIT) < 1e-6


@pytest.mark.parametrize(
    "place",
    [
        "V(r) = 1e-24 J/m*r",
        "V(r) = 2e-31 J*(r/(1 um))^4",
        "V(r) = 1e-31 J*((r/(1 um))^2 - 25)^2",
        "V(r) = 0 J where r < 8 um",
    ],
)
def test_more_known_levels_change_less_than_the_error(place):
    kT, spectrum = 30 * QUANTUM, Radial(field(place), MASS)
    beta, stated = np.array([1 / kT]), spectrum.error_at(kT)
    first = 1 + spectrum.sums(beta, kT).z0[0]
    assert spectrum.refined(45 * kT)
    atoms = spectrum.made(45 * kT, coarse=False)
    assert abs(first / (1 + np.exp(-atoms.e / kT) @ atoms.w) - 1) < stated < 1e-6


@pytest.mark.parametrize("where", ["", " where abs(x) < 8 um"])
def test_walls_far_up_a_slope(where):
    """Against finite differences, extrapolated from two steps; the wall is met at 27 quanta, among the known levels."""
    line, kT = Line(field(f"V(x) = m/2*(2*pi*100 Hz)^2*x^2{where}"), MASS), 10 * QUANTUM
    found = 1 + line.sums(np.array([1 / kT]), kT).z0[0]
    half = 8e-6 if where else 16e-6
    sums = [np.exp(-np.subtract(e, e[0]) / kT).sum() for e in (differences(half, n) for n in (800, 1600))]
    assert found == pytest.approx((4 * sums[1] - sums[0]) / 3, rel=1e-5)


def differences(half, points):
    """Levels (J) of the oscillator between -half and half."""
    x, h = np.linspace(-half, half, points + 2, retstep=True)
    t = hbar**2 / (2 * MASS * h**2)
    diagonal = 2 * t + MASS / 2 * (2 * np.pi * 100) ** 2 * x[1:-1] ** 2
    return eigh_tridiagonal(diagonal, np.full(points - 1, -t), eigvals_only=True)


def test_more_angular_momenta_than_are_summed(monkeypatch):
    monkeypatch.setattr("eoscore.state.exact.radial.PANELS", 1)
    with pytest.raises(NoAnswerError, match="where sums over levels end"):
        Radial(field("V(r) = 1e-24 J/m*r"), MASS).sums(np.array([1 / QUANTUM]), 100 * QUANTUM)
