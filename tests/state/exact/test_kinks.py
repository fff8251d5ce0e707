"""Levels and sums of traps with kinks and jumps, against Airy functions, roots of matching conditions and sums."""

from __future__ import annotations

import numpy as np
import pytest
from scipy.constants import hbar, k, physical_constants
from scipy.linalg import eigh_tridiagonal
from scipy.optimize import brentq
from scipy.special import ai_zeros, airy

import eoscore
from eoscore.state.exact.line import Line
from eoscore.state.exact.radial import Radial

MASS = 84 * physical_constants["atomic mass constant"][0]
UNIT = hbar**2 / MASS / 1e-12  # J: hbar = m = 1 with lengths in um
AIRY = (1 / 2) ** (
    1 / 3
)  # the energy of V = |x| in these units: levels are its multiples by zeros of Ai and Ai'


def field(place):
    lab = eoscore.loads(f"gas g {{ m = 84 u }}\ntrap t {{ {place} }}")
    return lab.program.bind("g", "t").place.field


def potential(text):
    return text.replace("U*", f"{UNIT!r} J*").replace("/L", "/(1 um)")


def linear(count):
    """Levels of |x|: zeros of Ai' and of Ai in turn (DLMF 9.9)."""
    odd, even, _, _ = ai_zeros(count)
    return AIRY * np.sort(np.concatenate([-odd, -even]))


@pytest.mark.parametrize("form", ["abs(x/L)", "max(x/L, -x/L)", "if(x < 0, -x/L, x/L)", "sqrt(x^2)/L"])
def test_a_wedge_has_the_levels_of_airy(form):
    line = Line(field(f"V(x) = {potential(f'U*{form}')}"), MASS)
    assert line.energies / UNIT == pytest.approx(linear(20), rel=1e-9)


def test_s_waves_of_a_linear_potential():
    """u(0) = 0: zeros of Ai alone."""
    found = Radial(field(f"V(r) = {potential('U*r/L')}"), MASS).shells[0].energies[0] / UNIT
    assert found == pytest.approx(-AIRY * ai_zeros(16)[0], rel=1e-9)


@pytest.mark.parametrize("kT", [0.7, 3.0, 20.0])
def test_sums_over_a_wedge(kT):
    """Levels stagger about their smooth count: Z by 8000 zeros."""
    line, e = Line(field(f"V(x) = {potential('U*abs(x/L)')}"), MASS), linear(4000)
    expected = np.exp(-(e - e[0]) / kT).sum()
    found = 1 + line.sums(np.array([1 / (kT * UNIT)]), kT * UNIT).z0[0]
    stated = line.error_at(kT * UNIT)
    assert found == pytest.approx(expected, rel=stated)
    assert stated < 1e-8


def test_three_directions_of_wedges():
    """N_ex at mu = E_0 of sum |x_i| from all sums of zeros."""
    e, kT = linear(60), 1.2
    every = np.sort(np.add.outer(np.add.outer(e, e).ravel(), e).ravel())
    expected = np.sum(1 / np.expm1((every[1:] - every[0]) / kT))
    text = potential("U*(abs(x/L) + abs(y/L) + abs(z/L))")
    lab = eoscore.loads(f"gas g {{ m = 84 u }}\ntrap t {{ V(x, y, z) = {text}\n levels exact }}")
    assert lab["g"].held_in(lab["t"]).N_c(T=kT * UNIT / k) == pytest.approx(expected, rel=1e-6)


def test_a_kink_beside_the_bottom():
    """|x| with slope 2 on the right: Ai'(-e)/Ai(-e) = -2^(1/3) Ai'(-e 2^(-2/3))/Ai(-e 2^(-2/3)) for e in AIRY."""
    steep = 2 ** (1 / 3)

    def mismatch(e):
        left, right = airy(-e), airy(-e / steep**2)
        return left[1] * right[0] + steep * right[1] * left[0]

    grid = np.linspace(0.1, 12, 1200)
    values = [mismatch(e) for e in grid]
    roots = [
        brentq(mismatch, *grid[i : i + 2], xtol=1e-14) for i in range(1199) if values[i] * values[i + 1] < 0
    ]
    text = potential("U*if(x < 0, -x/L, 2*x/L)")
    found = Line(field(f"V(x) = {text}"), MASS).energies[: len(roots)] / UNIT
    assert found == pytest.approx(AIRY * np.array(roots), rel=1e-9)


def test_a_step_in_a_box():
    """V = 0 and 5 on the two halves of a box of length 2: k cot k = -q cot q, k^2 = 2 E, q^2 = 2(E - 5)."""

    def mismatch(energy):
        one, two = (np.sqrt(complex(2 * (energy - v))) for v in (0, 5))
        return float((one * np.cos(one) * np.sin(two) / two + np.cos(two) * np.sin(one)).real)

    grid = np.linspace(0.05, 300, 6000)
    values = [mismatch(e) for e in grid]
    roots = [
        brentq(mismatch, *grid[i : i + 2], xtol=1e-13) for i in range(5999) if values[i] * values[i + 1] < 0
    ]
    text = potential("U*if(x < 1 um, 0, 5)")
    line = Line(field(f"V(x) = {text} where x > 0 um, x < 2 um"), MASS)
    found = line.energies[: len(roots)] / UNIT
    assert found == pytest.approx(roots, rel=1e-9)


@pytest.mark.parametrize("at", [4, 14])
def test_a_kink_among_the_levels_or_above_is_within_the_error(at):
    """x^2/2 that becomes steeper far out, against finite differences extrapolated from two steps."""
    text = potential(f"U*((x/L)^2/2 + 3*max(abs(x/L) - {at}, 0))")
    line, kT = Line(field(f"V(x) = {text}"), MASS), 12 * UNIT
    sums = []
    for points in (4000, 8000):
        x, h = np.linspace(-24, 24, points + 1, retstep=True)
        v = x**2 / 2 + 3 * np.maximum(np.abs(x) - at, 0)
        e = eigh_tridiagonal(v + 1 / h**2, np.full(points, -0.5 / h**2), select="i", select_range=(0, 260))[0]
        sums.append(np.exp(-(e - e[0]) * UNIT / kT).sum())
    found = 1 + line.sums(np.array([1 / kT]), kT).z0[0]
    expected = (4 * sums[1] - sums[0]) / 3
    assert found == pytest.approx(expected, rel=line.error_at(kT) + 1e-7)
    assert line.error_at(kT) < (1e-5 if at == 4 else 1e-3)


@pytest.mark.parametrize("place", ["V(r) = U*abs(r/L - 4)", "V(rho) = U*max(rho/L, 4)"])
def test_more_known_levels_change_less_than_the_error(place):
    spectrum = Radial(field(potential(place)), MASS)
    kT = 10 * spectrum.gap
    beta, stated = np.array([1 / kT]), spectrum.error_at(kT)
    first = 1 + spectrum.sums(beta, kT).z0[0]
    spectrum.refined(45 * kT)
    atoms = spectrum.made(45 * kT, coarse=False)
    assert abs(first / (1 + np.exp(-atoms.e / kT) @ atoms.w) - 1) < stated < 1e-6


def test_a_shell_with_a_kink_by_finite_differences():
    """Angular momenta 0 and 3 of V = |r - 4|, extrapolated from two steps that have the kink on a point."""
    shell = Radial(field(potential("V(r) = U*abs(r/L - 4)")), MASS).shells[0].energies
    for angular in (0, 3):
        levels = []
        for points in (2400, 4800):
            r = np.linspace(0, 24, points + 1)[1:-1]
            h = 24 / points
            v = np.abs(r - 4) + angular * (angular + 1) / (2 * r**2)
            off = np.full(points - 2, -0.5 / h**2)
            levels.append(eigh_tridiagonal(v + 1 / h**2, off, select="i", select_range=(0, 9))[0])
        assert shell[angular, :10] / UNIT == pytest.approx((4 * levels[1] - levels[0]) / 3, rel=1e-6)
