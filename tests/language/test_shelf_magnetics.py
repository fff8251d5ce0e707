"""The shelf's magnetic fields against the law of Biot and Savart, and against Maxwell's equations."""

from __future__ import annotations

import itertools

import numpy as np
import pytest
from scipy import constants as si
from scipy.integrate import quad

from eoscore.language.include import shelf_files
from eoscore.language.nodes import Definition
from eoscore.language.parse import parse

from .labs import formula_of, near, value_of

CURRENT, RADIUS = 12.0, 0.04
MU_B = si.physical_constants["Bohr magneton"][0]


def biot_savart(rho: float, z: float) -> tuple[float, float]:
    """(B_rho, B_z) of a loop: the periodic integrand makes the trapezoidal rule converge geometrically."""
    angle = np.linspace(0, 2 * np.pi, 4000, endpoint=False)
    distance = np.array([rho - RADIUS * np.cos(angle), -RADIUS * np.sin(angle), np.full_like(angle, z)])
    step = RADIUS * np.array([-np.sin(angle), np.cos(angle), np.zeros_like(angle)])
    field = np.cross(step, distance, axis=0) / np.linalg.norm(distance, axis=0) ** 3
    bx, _, bz = si.mu_0 * CURRENT / 2 * field.mean(axis=1)
    return float(bx), float(bz)


@pytest.mark.parametrize("rho", [0.01, 0.0395, 0.06])
@pytest.mark.parametrize("z", [-0.03, 0.005])
def test_a_loop_obeys_biot_and_savart(rho, z):
    where = f"12 A, 4 cm, {rho!r} m, {z!r} m"
    radial, axial = biot_savart(rho, z)
    assert value_of(f"loop_rho({where})", "magnetics") == near(radial, rel=1e-9)
    assert value_of(f"loop_z({where})", "magnetics") == near(axial, rel=1e-9)
    assert value_of(f"loop({where})", "magnetics") == near(np.hypot(radial, axial), rel=1e-9)


@pytest.mark.parametrize("rho", [0.0, 1e-6, 7.9e-5, 8.1e-5, 4e-4])
def test_the_radial_field_keeps_its_digits_near_the_axis(rho):
    """Over the seam at R/500; the trapezoidal sum itself keeps about 1e-16 of the axial field."""
    radial, axial = biot_savart(rho, 0.02)
    found = value_of(f"loop_rho(12 A, 4 cm, {rho!r} m, 2 cm)", "magnetics")
    assert found == pytest.approx(radial, rel=2e-9, abs=1e-15 * abs(axial))


def test_on_its_axis_a_loop_is_its_short_formula():
    short = value_of("loop_on_axis(12 A, 4 cm, 1 cm)", "magnetics")
    assert value_of("loop(12 A, 4 cm, 0 m, 1 cm)", "magnetics") == near(short, rel=1e-13)


def test_a_wire_obeys_biot_and_savart():
    d = 3e-3
    integral, _ = quad(lambda s: 1 / (1 + s**2) ** 1.5, -np.inf, np.inf, epsabs=0, epsrel=1e-12)
    wanted = si.mu_0 * CURRENT / (4 * np.pi * d) * integral
    assert value_of("wire(12 A, 3 mm)", "magnetics") == near(wanted, rel=1e-11)


def test_a_helmholtz_pair_is_flat_at_its_centre():
    """(4/5)^(3/2) mu_0 I/R, and no second or third derivative: the departure is of fourth order, -144/125 (z/R)^4."""
    centre = value_of("helmholtz(12 A, 4 cm, 0 m, 0 m)", "magnetics")
    beside = value_of("helmholtz(12 A, 4 cm, 0 m, 2 mm)", "magnetics")
    assert centre == near(0.8**1.5 * si.mu_0 * CURRENT / RADIUS, rel=1e-13)
    assert beside / centre - 1 == near(-144 / 125 * (2e-3 / RADIUS) ** 4, rel=1e-2)


@pytest.mark.parametrize("axis", ["0 m, 10 um", "20 um, 0 m"])
def test_an_anti_helmholtz_pair_is_a_quadrupole_at_its_centre(axis):
    """Gradient 48/(25 sqrt 5) mu_0 I/R^2 along the axis (Bergeman, Erez, Metcalf 1987), half of it across."""
    gradient = 48 / (25 * np.sqrt(5)) * si.mu_0 * CURRENT / RADIUS**2
    field = value_of(f"anti_helmholtz(12 A, 4 cm, {axis})", "magnetics")
    assert field == near(gradient * 1e-5, rel=1e-5)


@pytest.fixture(scope="module")
def ioffe():
    names = (
        "ioffe_x(b, k, x, z)",
        "ioffe_y(b, k, y, z)",
        "ioffe_z(B_0, k, x, y, z)",
        "ioffe(B_0, b, k, x, y, z)",
    )
    values = {"B_0": "1.2 G", "b": "150 G/cm", "k": "90 G/cm2"}
    texts = [name.replace(" ", "") for name in names]
    for name, value in values.items():
        texts = [text.replace(f"({name},", f"({value},").replace(f",{name},", f",{value},") for text in texts]
    return [formula_of(f"(1 J/T)*{text}", "magnetics") for text in texts]


def test_the_ioffe_field_has_no_curl_and_no_divergence(ioffe):
    point = {"x": 2e-3, "y": -1e-3, "z": 3e-3}
    slope = [[float(f.derivative(name).evaluate(point)) for name in "xyz"] for f in ioffe[:3]]
    size = np.abs(slope).max()
    assert abs(np.trace(slope)) < 1e-14 * size
    assert np.abs(np.array(slope) - np.transpose(slope)).max() < 1e-14 * size


def test_the_ioffe_modulus_is_that_of_its_components(ioffe):
    point = {"x": 2e-3, "y": -1e-3, "z": 3e-3}
    *parts, modulus = (float(f.evaluate(point)) for f in ioffe)
    assert modulus == near(np.linalg.norm(parts), rel=1e-14)


def test_the_modulus_of_a_quadrupole_is_that_of_a_field_without_divergence():
    """(x, y, -2z)/2 times the gradient; across a straight one (x, -y)."""
    assert value_of("quadrupole(2 T/m, 3 mm, 4 mm, 1 mm)", "magnetics") == near(np.hypot(5e-3, 2e-3))
    assert value_of("quadrupole_2d(2 T/m, 3 mm, 4 mm)", "magnetics") == near(1e-2)


def test_the_zeeman_energy_of_a_stretched_state():
    assert value_of("zeeman_energy(0.5, 2, 3 G)", "magnetics") == near(MU_B * 3e-4, rel=1e-12)


def shelf() -> dict[str, str]:
    return {name: path.read_text(encoding="utf-8") for name, path in shelf_files().items()}


def test_shelf_files_share_no_names():
    names = [
        {d.name.name for d in parse(text).entries if isinstance(d, Definition)} for text in shelf().values()
    ]
    assert all(not a & b for a, b in itertools.combinations(names, 2))


@pytest.mark.parametrize("name", sorted(shelf()))
def test_every_stretch_of_the_shelf_begins_with_its_formula_and_unit(name):
    stretches = shelf()[name].strip().split("\n\n")
    assert all(stretch.startswith("#") for stretch in stretches)
