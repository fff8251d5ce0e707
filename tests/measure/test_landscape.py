"""Bottoms, kinds and leaks of potentials, against root finding and closed forms of other hands."""

from __future__ import annotations

import math

import numpy as np
import pytest
from scipy.optimize import brentq, minimize_scalar
from scipy.spatial.transform import Rotation

from eoscore.formula import call, choose, constant, less
from eoscore.formula.field import Field
from eoscore.language import read
from eoscore.measure.landscape import survey

from .potentials import K_B, RB87, SR84, E, G, S, U, crossed, exp, r, rho, sagging, single, turned, x, y, z


@pytest.mark.parametrize(
    ("depth", "z_min", "escape", "softening"),
    [
        (10e-6, -6.636421353e-6, 3.857965000e-6, 0.947286683),
        (5e-6, -15.54664632e-6, 0.2514133926e-6, 0.710956672),
    ],
)
def test_a_gaussian_that_sags(depth, z_min, escape, softening):
    """Rows O6 and O7 of the check list: root finding of another hand."""
    found = survey(sagging(depth))
    assert found.bottom.position[0] == pytest.approx(z_min, rel=1e-7, abs=0)
    assert found.depth / K_B == pytest.approx(escape, rel=1e-7, abs=0)
    free = 4 * depth * K_B / 50e-6**2
    assert math.sqrt(found.bottom.curvatures[0] / free) == pytest.approx(softening, rel=1e-7, abs=0)
    assert "towards -z" in found.escape.words


def test_the_sag_of_a_harmonic_trap():
    """Row O4: g/w^2 at 100 Hz; frequencies are exact."""
    omega = 2 * math.pi * 100
    found = survey(Field(("x", "y", "z"), RB87 / 2 * omega**2 * (x**2 + y**2 + 4 * z**2) + RB87 * 4 * G * z))
    assert found.bottom.position[2] == pytest.approx(-24.8405346392e-6, rel=1e-10, abs=0)
    wanted = RB87 * omega**2 * np.array([1, 1, 4])
    np.testing.assert_allclose(found.bottom.curvatures, wanted, rtol=1e-13)
    assert found.escape is None
    assert found.depth == math.inf


def test_too_weak_a_gaussian_holds_nothing():
    """No minimum for xi = m g w sqrt(e) / 2 U_0 > 1."""
    weakest = RB87 * G * 50e-6 * math.sqrt(math.e) / 2 / K_B
    assert survey(sagging(1.001 * weakest)).holds
    assert survey(sagging(0.999 * weakest)).why.endswith("this potential holds nothing")


def _strontium_pass(power=1.5, waist=55e-6):
    """Bottom and pass of the crossed beams on y = 0: the ridge is lowest far out on an arm, not at the crossing."""
    reach, depth = math.pi * waist**2 / 1064e-9, 7.4e-37 * 2 * power / (math.pi * waist**2)

    def v(a, c):
        spread = 1 + (a / reach) ** 2
        arm = math.exp(-2 * c * c / (waist**2 * spread)) / spread
        return -depth * (arm + math.exp(-2 * (a * a + c * c) / waist**2)) + SR84 * G * c

    def sag(c):
        return 8 * c / waist**2 * depth * math.exp(-2 * c * c / waist**2) + SR84 * G

    def ridge(a):
        return -minimize_scalar(
            lambda c: -v(a, c), bounds=(-3 * waist, -0.4 * waist), method="bounded", options=fine
        ).fun

    fine = {"xatol": 1e-13}
    low = v(0, brentq(sag, -0.3 * waist, 0, xtol=1e-22, rtol=1e-14))
    out = minimize_scalar(ridge, bounds=(4e-3, 1.5e-2), method="bounded", options={"xatol": 1e-9})
    return float(out.fun) - low, abs(float(out.x))


def test_crossed_beams_leak_over_an_arm():
    depth, arm = _strontium_pass()
    found = survey(crossed())
    assert found.depth == pytest.approx(depth, rel=1e-10, abs=0)
    assert max(map(abs, found.escape.position[:2])) == pytest.approx(arm, rel=1e-4, abs=0)
    assert found.error <= 1e-8


@pytest.mark.parametrize("field", [crossed(gravity=0), single(0)], ids=["crossed", "single"])
def test_without_gravity_a_beam_leaks_at_infinity(field):
    found = survey(field)
    assert found.depth == pytest.approx(-found.bottom.value, rel=1e-12, abs=0)
    assert found.escape.position is None
    assert "at infinity" in found.escape.words


def test_curvatures_of_one_beam():
    """Row O1: 4 U_0/w^2 across, 2 U_0/z_R^2 along, although the lengths differ by a factor 90."""
    waist, reach = 30e-6, math.pi * 30e-6**2 / 1064e-9
    depth = 7.4e-37 * 2 * 1.5 / (math.pi * waist**2)
    wanted = [2 * depth / reach**2, 4 * depth / waist**2, 4 * depth / waist**2]
    np.testing.assert_allclose(survey(single(0)).bottom.curvatures, wanted, rtol=1e-12)


@pytest.mark.parametrize("seed", [1, 2])
@pytest.mark.parametrize("field", [crossed(), single(G)], ids=["crossed", "single"])
def test_turning_the_trap_changes_nothing(field, seed):
    frame = Rotation.random(random_state=seed).as_matrix()
    shift = tuple(2e-6 * np.random.default_rng(seed).standard_normal(3))
    straight, oblique = survey(field), survey(turned(field, frame.tolist(), shift))
    assert oblique.depth == pytest.approx(straight.depth, rel=1e-9, abs=0)
    np.testing.assert_allclose(oblique.bottom.curvatures, straight.bottom.curvatures, rtol=1e-9)
    place = frame.T @ np.array(straight.bottom.position) + shift
    np.testing.assert_allclose(oblique.bottom.position, place, atol=1e-13)


def test_scaling_all_lengths_scales_the_landscape():
    small, large = survey(crossed(waist=55e-6)), survey(crossed(1.5 * 100**2, 55e-4, G / 100))
    assert large.bottom.position[2] == pytest.approx(100 * small.bottom.position[2], rel=0.2, abs=0)
    assert large.holds


@pytest.mark.parametrize(
    ("field", "kind", "curvatures"),
    [
        (Field(("x", "y"), E * (x**2 + x * y + y**2) / S**2), "quadratic", (1, 3)),
        (Field(("rho", "z"), E * (rho**2 + 2 * z**2 + rho**2 * z**2 / S**2) / S**2), "quadratic", (2, 2, 4)),
        (Field(("r",), E * (r / S) ** 2), "quadratic", (2, 2, 2)),
        (Field(("rho",), E * ((rho / S) ** 2 - 1) ** 2), "ring", (0, 8)),
        (Field(("x", "y"), E * ((x**2 + y**2) / S**2 - 1) ** 2), "ring", (0, 8)),
        (Field(("r",), E * (r / S - 1) ** 2), "sphere", (0, 0, 2)),
        (Field(("x", "y", "z"), E * ((x**2 + y**2 + z**2) / S**2 - 1) ** 2), "sphere", (0, 0, 8)),
        (Field(("x",), constant(0), (x, S - x)), "flat", (0,)),
        (Field(("x", "y"), constant(0), (S**2 - x**2 - y**2,)), "flat", (0, 0)),
        (Field(("x",), choose(less(call("abs", x), S), 0.0, E * (call("abs", x) / S - 1) ** 2)), "flat", (0,)),
        (Field(("x", "y"), choose(less(x**2 + y**2, S**2), 0.0, constant(E))), "flat", (0, 0)),
        (Field(("x",), E * x**4 / S**4), "other", None),
        (Field(("x", "y"), E * (x**4 + y**4 + x**2 * y**2) / S**4), "other", None),
        (Field(("r",), E * r / S), "cone", None),
        (Field(("x", "y", "z"), E * call("sqrt", x**2 + y**2 + 4 * z**2) / S + E / 2 * z / S), "cone", None),
        (Field(("z",), E * z / S, (z,)), "wall", None),
    ],
)  # fmt: skip
def test_kinds_of_bottoms(field, kind, curvatures):
    """Curvatures in units of E/S^2, by hand."""
    bottom = survey(field).bottom
    assert bottom.kind == kind
    if curvatures is None:
        assert bottom.curvatures is None
    else:
        np.testing.assert_allclose(np.array(bottom.curvatures) * S**2 / E, curvatures, rtol=1e-10, atol=1e-12)


@pytest.mark.parametrize(
    ("field", "words"),
    [
        (Field(("x",), E * x / S), "V falls along -x without end"),
        (Field(("x", "y"), E * x**2 / S**2), "V is level along y without end"),
        (Field(("x", "y"), -E * (x**2 + x * y + y**2) / S**2), "V has no local minimum"),
        (Field(("x", "y"), E * (x**2 + 3 * x * y + y**2) / S**2), "V has no local minimum"),
        (
            Field(("x", "y", "z"), -E * exp(-2 * (x**2 + (y + z) ** 2) / S**2)),
            "V is level along z without end",
        ),
        (Field(("x",), E * x**2, (x, -x - S)), "no point lies inside all walls"),
    ],
)
def test_what_holds_nothing_says_why(field, words):
    found = survey(field)
    assert not found.holds
    assert words in found.why


def test_both_halves_of_a_double_well_count():
    found = survey(Field(("x",), E * ((x / S) ** 4 - 2 * (x / S) ** 2)))
    assert sorted(m.position[0] for m in found.minima) == pytest.approx([-S, S], rel=1e-14, abs=0)
    assert [m.value for m in found.minima] == pytest.approx([-E, -E], rel=1e-14, abs=0)


def test_a_well_beyond_the_escape_does_not_count():
    """A cubic-like slope with a shallow well upstream: only the lowest well and those that join it."""
    v = E * (-exp(-2 * (x / S) ** 2) - 0.5 * exp(-2 * (x / S - 6) ** 2)) + 0.05 * E * x / S
    found = survey(Field(("x",), v))
    assert [round(m.position[0] / S) for m in found.minima] == [0]
    assert found.depth < survey(Field(("x",), v - 0.05 * E * x / S)).depth


def test_the_energy_surface_of_mueller_and_brown():
    """Theor. Chim. Acta 53, 75 (1979): minima -146.700, -108.167, -80.768 (from memory), all joined."""
    terms = [
        (-200, -1, 0, -10, 1, 0),
        (-100, -1, 0, -10, 0, 0.5),
        (-170, -6.5, 11, -6.5, -0.5, 1.5),
        (15, 0.7, 0.6, 0.7, -1, 1),
    ]
    v = constant(0)
    for a, p, q, s, x0, y0 in terms:
        u, w = x / S - x0, y / S - y0
        v = v + a * E * exp(p * u**2 + q * u * w + s * w**2)
    found = survey(Field(("x", "y"), v))
    assert [m.value / E for m in found.minima] == pytest.approx([-146.700, -108.167, -80.768], abs=1e-3)


def test_a_side_guide_of_a_wire():
    """Field of a straight wire with a bias: the zero at mu_0 I/(2 pi B), depth mu (sqrt(B^2 + B_0^2) - B_0)."""
    moment, bias, ioffe, current = 9.274e-24, 2e-3, 1e-4, 1.0
    strength = 2e-7 * current
    bx, by = bias - strength * y / (x**2 + y**2), strength * x / (x**2 + y**2)
    found = survey(Field(("x", "y"), moment * call("sqrt", bx**2 + by**2 + ioffe**2)))
    assert found.bottom.position == pytest.approx((0, strength / bias), abs=1e-14)
    assert found.depth == pytest.approx(moment * (math.hypot(bias, ioffe) - ioffe), rel=1e-10, abs=0)


_SLOPE = -E * exp(-2 * (x**2 + y**2) / S**2) - 0.05 * E * x / S


@pytest.mark.parametrize("height", [None, 0.3])
@pytest.mark.parametrize("lean", [0.0, 0.1])
def test_passes_on_a_wall(height, lean):
    """Along the wall y = height - lean x the problem has one dimension; SciPy's root finder solves it."""
    wall = () if height is None else (y / S - height + lean * x / S,)

    def line(u):
        return (
            -math.exp(-2 * (u * u + max((height or 0) - lean * u, 0) ** 2)) - 0.05 * u
            if wall
            else (-math.exp(-2 * u * u) - 0.05 * u)
        )

    options = {"xatol": 1e-12}
    low = minimize_scalar(line, bounds=(-0.5, 0.6), method="bounded", options=options).fun
    high = minimize_scalar(lambda u: -line(u), bounds=(0.8, 2.9), method="bounded", options=options).fun
    assert survey(Field(("x", "y"), _SLOPE, wall)).depth / E == pytest.approx(-high - low, rel=1e-9, abs=0)


def test_walls_that_close_the_way_out_leave_no_escape():
    assert survey(Field(("z",), -E * z / S, (z + S, S - z))).depth == math.inf
    assert survey(sagging(10e-6)).depth < math.inf
    assert survey(Field(("z",), sagging(10e-6).formula, (z + 30e-6,))).escape is None


def test_a_can_with_a_tilted_floor():
    found = survey(Field(("x", "y", "z"), SR84 * 0.3 * z, (S**2 - x**2 - y**2, z, 3 * S - z)))
    assert found.bottom.position == pytest.approx((0, 0, 0), abs=1e-12)
    assert found.bottom.kind == "wall"
    assert found.depth == math.inf


def test_a_plugged_field_has_a_ring_of_bottoms_and_a_tip():
    mass = 38.963706485 * U
    field = 4.637e-24 * 0.8 * call("sqrt", (x**2 + y**2) / 4 + z**2)
    plug = 2e-36 * 2 * 0.8 / (math.pi * 20e-6**2) * exp(-2 * (x**2 + y**2) / 20e-6**2)
    found = survey(Field(("x", "y", "z"), field + plug + mass * G * z))
    assert (found.bottom.kind, found.bottom.curvatures[0]) == ("ring", 0)
    assert [m.kind for m in found.minima] == ["ring", "cone"]


def test_a_lattice_in_an_envelope_counts_its_wells():
    """x^2/2 + depth sin^2: wells where m w^2 x = -V_0 q/2 sin(q x) still has roots with rising slope."""
    q, barrier = 2 * math.pi / (0.2 * S), 3 * E
    v = E / 2 * (x / S) ** 2 + barrier * call("sin", q * x / 2) ** 2
    found = survey(Field(("x",), v))
    grid = np.linspace(-60 * S, 60 * S, 2_000_001)
    slope = E * grid / S**2 + barrier * q / 2 * np.sin(q * grid)
    assert len(found.minima) == np.sum((slope[:-1] < 0) & (slope[1:] >= 0))


def test_a_lattice_inside_a_gaussian_leaks_over_its_first_barrier():
    """Where the standing wave vanishes V is the tilt alone: the pass lies a little below z = -period/4."""
    wave = call("cos", 2 * math.pi * z / (0.5 * S)) ** 2
    found = survey(
        Field(("x", "y", "z"), -E * exp(-2 * (x**2 + y**2 + z**2 / 16) / S**2) * wave + 0.01 * E * z / S)
    )

    def line(u):
        return -math.exp(-u * u / 8) * math.cos(4 * math.pi * u) ** 2 + 0.01 * u

    options = {"xatol": 1e-13}
    high = -minimize_scalar(lambda u: -line(u), bounds=(-0.14, -0.11), method="bounded", options=options).fun
    low = minimize_scalar(line, bounds=(-0.05, 0.05), method="bounded", options=options).fun
    assert found.depth / E == pytest.approx(high - low, rel=1e-10, abs=0)
    assert len(found.minima) == 1


def test_between_opposed_coils_the_tip_holds_until_a_coil_lets_it_fall():
    """On the axis the field is the difference of two loops' (Jackson, section 5.5); gravity opens the lower coil."""
    text = """
        use magnetics
        gas rubidium { isotope Rb-87 }
        trap coils {
            V(rho, z) = zeeman_energy(0.5, 1, anti_helmholtz(400 A, 2 cm, rho, z)) + m*g_n*z
        }
    """
    program = read(text, "coils.tarn", dispersions={})
    found = survey(program.bind("rubidium", "coils").place.field)
    one = 0.5 * 9.2740100657e-24 * 2e-7 * math.pi * 400 * 2e-2**2  # moment and mu_0 I R^2/2 (CODATA 2022)

    def minus_v(u):
        near, far = (1 / (2e-2**2 + (u + side * 1e-2) ** 2) ** 1.5 for side in (1, -1))
        return -one * abs(near - far) - RB87 * G * u

    options = {"xatol": 1e-13}
    top = minimize_scalar(minus_v, bounds=(-1.2e-2, -0.8e-2), method="bounded", options=options)
    assert found.bottom.position == (0, 0)
    assert found.depth == pytest.approx(-top.fun, rel=1e-9, abs=0)
    assert found.escape.position[1] == pytest.approx(top.x, rel=1e-6, abs=0)


def test_the_deepest_of_nine_tweezers_that_sag():
    """Wells hardly touch: the bottom is that of the deepest, one part in a hundred deeper than the next."""
    depths = {
        (i, j): 1 - 0.01 * k for k, (i, j) in enumerate([(-3, 3), (0, 0), (3, -3), (0, 3), (3, 3), (-3, -3)])
    }
    spread = 1 + (z / 5e-6) ** 2
    v = SR84 * G * z
    for (i, j), depth in depths.items():
        across = (x - i * 1e-6) ** 2 + (y - j * 1e-6) ** 2
        v = v - depth * E / spread * exp(-2 * across / (1.44e-12 * spread))
    found = survey(Field(("x", "y", "z"), v)).bottom
    assert found.position[:2] == pytest.approx((-3e-6, 3e-6), rel=1e-3)
    low = minimize_scalar(
        lambda h: -1e12 * E / (1 + (h / 5e-6) ** 2) + 1e12 * SR84 * G * h, bounds=(-1e-6, 0)
    )
    assert found.value == pytest.approx(1e-12 * low.fun, rel=1e-6)


def test_a_wall_far_from_the_bottom_changes_no_frequency():
    """By the same field without the wall, whose curvatures are exact."""
    field = Field(("x", "y", "z"), crossed().formula + SR84 * G * (0.1 * x + 0.05 * y))
    walled = survey(Field(field.coordinates, field.formula, (x + 2e-5,)))
    np.testing.assert_allclose(walled.bottom.curvatures, survey(field).bottom.curvatures, rtol=1e-12)
