"""The shelf's light: beams against the complex beam parameter, the light shift against the classical oscillator."""

from __future__ import annotations

import numpy as np
import pytest
from scipy import constants as si

from .labs import formula_of, near, value_of

W, ZETA, LIGHT = 40e-6, 25e-6, 1064e-9
POWER = 1.5
PER_INTENSITY = "(1 J.m2/W)*"


def gaussian(q_waist: float, along: float, across: np.ndarray) -> np.ndarray:
    """|u|^2 of one transverse direction with the complex beam parameter q = l + i z_R (Siegman, Lasers, 16.2).

    Normalised to the unit integral: sqrt(2/pi)/w at the waist, then |q(0)/q(l)| |exp(-i k a^2/(2 q))|^2.
    """
    k, z_r = 2 * np.pi / LIGHT, np.pi * q_waist**2 / LIGHT
    q = along + 1j * z_r
    front = np.sqrt(2 / np.pi) / q_waist * abs(1j * z_r / q)
    return front * np.abs(np.exp(-1j * k * across**2 / (2 * q))) ** 2


@pytest.fixture
def points() -> dict[str, np.ndarray]:
    rng = np.random.default_rng(7)
    return {name: rng.uniform(-1, 1, 50) * size for name, size in (("x", 5e-5), ("y", 5e-5), ("z", 5e-3))}


def test_a_round_beam_is_the_square_of_the_paraxial_wave(points):
    beam = formula_of(PER_INTENSITY + "gaussian_beam(1.5 W, 40 um, 1064 nm, x^2 + y^2, z)", "optics")
    wanted = POWER * gaussian(W, points["z"], points["x"]) * gaussian(W, points["z"], points["y"])
    np.testing.assert_allclose(beam.evaluate(points), wanted, rtol=1e-10)


def test_an_elliptic_beam_is_a_product_of_two_directions(points):
    beam = formula_of(PER_INTENSITY + "elliptic_beam(1.5 W, 40 um, 25 um, 1064 nm, x, y, z)", "optics")
    wanted = POWER * gaussian(W, points["z"], points["x"]) * gaussian(ZETA, points["z"], points["y"])
    np.testing.assert_allclose(beam.evaluate(points), wanted, rtol=1e-10)


def test_an_astigmatic_beam_has_a_focus_for_each_direction(points):
    text = "astigmatic_beam(1.5 W, 40 um, 25 um, 1 mm, -2 mm, 1064 nm, x, y, z)"
    beam = formula_of(PER_INTENSITY + text, "optics")
    first = gaussian(W, points["z"] - 1e-3, points["x"])
    second = gaussian(ZETA, points["z"] + 2e-3, points["y"])
    np.testing.assert_allclose(beam.evaluate(points), POWER * first * second, rtol=1e-10)


def test_a_light_sheet_spreads_in_its_thin_direction_only(points):
    sheet = formula_of(PER_INTENSITY + "light_sheet(1.5 W, 25 um, 40 um, 1064 nm, x, y, z)", "optics")
    wide = gaussian(W, 0.0, points["y"])
    np.testing.assert_allclose(
        sheet.evaluate(points), POWER * gaussian(ZETA, points["z"], points["x"]) * wide, rtol=1e-10
    )


@pytest.mark.parametrize("angle", [0.3, 1.2, np.pi])
def test_crossed_plane_waves_interfere(points, angle):
    wave = formula_of(PER_INTENSITY + f"crossed_wave(2 W/m2, 1064 nm, {angle!r}, x)", "optics")
    phase = 2 * np.pi / LIGHT * np.sin(angle / 2) * points["x"]
    np.testing.assert_allclose(
        wave.evaluate(points), 2 * np.abs(np.exp(1j * phase) + np.exp(-1j * phase)) ** 2, atol=1e-9
    )


def test_a_beam_sent_back_is_the_head_on_case(points):
    back = formula_of(PER_INTENSITY + "standing_wave(2 W/m2, 1064 nm, x)", "optics")
    head_on = formula_of(PER_INTENSITY + "crossed_wave(2 W/m2, 1064 nm, pi, x)", "optics")
    np.testing.assert_allclose(back.evaluate(points), head_on.evaluate(points), atol=1e-9)


def polarisability(omega_0: float, gamma: float, omega: float) -> complex:
    """The classical damped oscillator, Grimm, Weidemueller, Ovchinnikov (2000), eq. 8 (from memory), in C m2/V."""
    front = 6 * np.pi * si.epsilon_0 * si.c**3 * gamma / omega_0**2
    return front / (omega_0**2 - omega**2 - 1j * omega**3 / omega_0**2 * gamma)


@pytest.mark.parametrize("nanometres", [1064.0, 850.0, 380.0])
def test_light_shift_and_scattering_follow_from_the_oscillator(nanometres):
    """U = -Re(alpha) I/(2 epsilon_0 c), rate = Im(alpha) I/(hbar epsilon_0 c): Grimm et al. (2000), eqs. 2 and 3."""
    omega_0, omega, gamma, intensity = (
        2 * np.pi * si.c / 461e-9,
        2 * np.pi * si.c / (nanometres * 1e-9),
        2e8,
        3e7,
    )
    alpha = polarisability(omega_0, gamma, omega)
    atom = f"light_frequency(461 nm), 2e8 Hz, light_frequency({nanometres!r} nm)"
    shift, rate = (value_of(f"{f}(3e7 W/m2, {atom})", "optics") for f in ("light_shift", "scattering_rate"))
    assert shift == near(-alpha.real * intensity / (2 * si.epsilon_0 * si.c), rel=1e-9)
    assert rate == near(alpha.imag * intensity / (si.hbar * si.epsilon_0 * si.c), rel=1e-9)


@pytest.mark.parametrize("name", ["light_shift", "scattering_rate"])
def test_near_resonance_the_rotating_wave_is_enough(name):
    """The counter-rotating term is of the order of the detuning over twice the resonance frequency."""
    atom = "3e7 W/m2, 4e15 Hz, 2e6 Hz, 4.0001e15 Hz"
    whole, short = value_of(f"{name}({atom})", "optics"), value_of(f"{name}_near({atom})", "optics")
    assert whole == near(short, rel=2e-4)
    assert whole != near(short, rel=1e-6)


def test_a_levitated_atom_feels_no_weight():
    mass = 173.93886 * si.physical_constants["atomic mass constant"][0]
    moment = 3 * si.physical_constants["Bohr magneton"][0]
    gradient = value_of("levitation_gradient(173.93886 u, 3*mu_B)", "optics")
    assert moment * gradient == near(mass * si.g, rel=1e-12)


def test_the_radius_grows_by_root_two_over_a_rayleigh_range():
    ratio = value_of("beam_radius(40 um, 1064 nm, rayleigh_range(40 um, 1064 nm))/(40 um)", "optics")
    assert ratio == near(np.sqrt(2), rel=1e-14)
