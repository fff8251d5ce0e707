"""From a text to numbers, through the command's own JSON document, against closed forms and published values.

COMPUTED: digits worked out from the formula shown with mpmath, independent of eoscore; MEMORY: not looked up.
"""

from __future__ import annotations

import json

import numpy as np
import pytest
from scipy import constants, special

import eoscore
from eoscore.answer.record import Report
from eoscore.show.document import json_text

k, h, hbar, c, u = constants.k, constants.h, constants.hbar, constants.c, constants.m_u
RUBIDIUM = "gas a { m = 86.909180529 u }"  # AME2020
OSCILLATOR = "trap b { V(x, y, z) = m/2*(2*pi*100 Hz)^2*(x^2 + y^2 + z^2) }"
QUADRUPOLE = "trap b { V(x, y, z) = mu_B*(0.1 T/m)*sqrt(x^2 + y^2 + 4*z^2) }"
BOX = "trap b { volume = 1e5 um3 }"
R12 = "trap b { V(r) = 1e-29 J*(r/(10 um))^12 }"
SECTIONS = {"T1": QUADRUPOLE, "T2": OSCILLATOR, "T6": R12, "T7": BOX}


def answers(*lines):
    text = json_text(Report("test.tarn", eoscore.loads("\n".join(lines)).answers()))
    return json.loads(text)["answers"]


def found(*lines):
    return answers(*lines)[-1]["found"]


def value(name, *lines):
    return found(*lines)[name]["value"]


CLOSED_FORMS = [
    # Bagnato, Pritchard, Kleppner, PRA 35, 4354 (1987): kT_c = hbar w (N/zeta(3))^(1/3); COMPUTED
    ("T_c", 209.506613934e-9, 1e-9, RUBIDIUM, OSCILLATOR, "for a in b with N = 1e5"),
    # Einstein 1925: n lambda^3 = zeta(3/2); COMPUTED
    ("T_c", 85.81774598e-9, 1e-9, RUBIDIUM, "", "for a in uniform with n = 1e19 m-3"),
    ("lambda_T", 592.1981924e-9, 1e-9, RUBIDIUM, "", "for a in uniform with n = 1e18 m-3, T = 100 nK"),
    # P_c = zeta(5/2) kT/lambda^3; COMPUTED
    ("pressure", 8.918023289e-12, 1e-9, RUBIDIUM, "", "for a in uniform with mu = 0 J, T = 100 nK"),
    # Two dimensions: N_c = (pi^2/6)(kT/hbar w)^2 per polarisation; COMPUTED
    (
        "N_c",
        76472.941093661,
        1e-9,
        "gas a { m = 7e-36 kg\n degeneracy = 2 }",
        "trap b { V(rho) = m/2*(2*pi*4.1e10 Hz)^2*rho^2 }",
        "for a in b with T = 300 K",
    ),
    # Photons at 300 K: n = 16 pi zeta(3) (kT/hc)^3; COMPUTED
    (
        "n_c",
        5.4774484291549e14,
        1e-10,
        "gas a { degeneracy = 2\n E(p) = c*p }",
        "",
        "for a in uniform with T = 300 K",
    ),
    # A measured power law: T_c = T (N/N_c)^(1/a)
    (
        "T_c",
        80e-9 * 0.5 ** (1 / 1.65),
        1e-12,
        RUBIDIUM,
        "states b { exponent = 1.65\n anchor N_c = 2e5 at T = 80 nK }",
        "for a in b with N = 1e5",
    ),
    # Gaussian beam with gravity, U0/k = 10 uK: COMPUTED by root finding
    (
        "depth",
        3.857965e-6 * k,
        1e-6,
        RUBIDIUM,
        "trap b { V(x) = -k_B*10 uK*exp(-2*x^2/(50 um)^2) + m*g_n*x }",
        "for a in b",
    ),
]


@pytest.mark.parametrize(
    ("name", "expected", "relative", "gas", "place", "asked"),
    CLOSED_FORMS,
    ids=[row[-1] for row in CLOSED_FORMS],
)
def test_closed_forms(name, expected, relative, gas, place, asked):
    reading = found(gas, place, f"find {name} {asked}")[name]
    assert reading["value"] == pytest.approx(expected, rel=relative, abs=0)
    assert reading["why"] is None
    assert reading["error"] < 1e-6 * abs(expected)


# Section 3 of Bagnato et al.: E/NkT_c = eta zeta(eta+1)/zeta(eta), S_c/Nk = (eta+1) zeta(eta+1)/zeta(eta); COMPUTED
@pytest.mark.parametrize(
    ("trap", "energy", "entropy"),
    [
        ("T1", 4.374123216839, 5.346150598359),
        ("T2", 2.701178032919, 3.601570710559),
        ("T6", 1.123843129238, 1.766039203088),
        ("T7", 0.770268670193, 1.283781116988),
    ],
)
def test_energy_and_entropy_at_T_c(trap, energy, entropy):
    place = SECTIONS[trap]
    T_c = value("T_c", RUBIDIUM, place, "find T_c for a in b with N = 1e5")
    state = found(RUBIDIUM, place, f"find U, S, f_0 for a in b with N = 1e5, T = {T_c!r} K")
    assert state["U"]["value"] / (1e5 * k * T_c) == pytest.approx(energy, rel=1e-9, abs=0)
    assert state["S"]["value"] / (1e5 * k) == pytest.approx(entropy, rel=1e-9, abs=0)
    assert state["f_0"]["value"] == pytest.approx(0.0, abs=1e-9)


@pytest.mark.parametrize(
    ("origin", "place", "expected"),
    [("T7", "T2", 0.643549656481), ("T7", "T1", 0.759868134395), ("T2", "T1", 0.326324493802)],
)
def test_slow_changes_of_trap_from_T_c(origin, place, expected):
    """N_0/N = 1 - S_i/S_f for a gas that starts at its T_c: derived from the row above."""
    first = SECTIONS[origin].replace("trap b", "trap a0")
    T_c = value("T_c", RUBIDIUM, SECTIONS[origin], "find T_c for a in b with N = 1e5")
    question = f"find f_0 for a in b from a0 with N = 1e5, T = {T_c!r} K"
    assert value("f_0", RUBIDIUM, first, SECTIONS[place], question) == pytest.approx(
        expected, rel=1e-8, abs=0
    )


@pytest.mark.parametrize(
    ("ratio", "density"),
    [(1, 0.341414688618), (10, 33.3417729115), (100, 3333.34177673), (0.1, 5.76823910849e-3)],
)
def test_relativistic_gas_with_antiparticles(ratio, density):
    """Haber and Weldon, PRL 46, 1497 (1981), MEMORY; densities in units of (mc/hbar)^3 COMPUTED."""
    mass = 2.5e-28
    gas = f"gas a {{ m = {mass!r} kg\n dispersion relativistic {{ antiparticles = 1 }} }}"
    T = ratio * mass * c**2 / k
    n_c = value("n_c", gas, f"find n_c for a in uniform with T = {T!r} K")
    assert n_c / (mass * c / hbar) ** 3 == pytest.approx(density, rel=1e-9, abs=0)


@pytest.mark.parametrize(
    ("ratio", "filling"), [(0.1, 0.001872872955278), (1, 0.06725117068456), (5, 0.8602835772494)]
)
def test_tight_binding_in_a_momentum_zone(ratio, filling):
    """n_c per cell = sum_j [e^{-2jJ/kT} I_0(2jJ/kT)]^3; COMPUTED."""
    gas = """gas a { d = 500 nm
        J = 1e-30 J
        f(q) = 2*J*(1 - cos(q*d/hbar))
        E(px, py, pz) = f(px) + f(py) + f(pz) where abs(px) < pi*hbar/d, abs(py) < pi*hbar/d, abs(pz) < pi*hbar/d }"""
    n_c = value("n_c", gas, f"find n_c for a in uniform with T = {ratio * 1e-30 / k!r} K")
    assert n_c * 500e-9**3 == pytest.approx(filling, rel=1e-6, abs=0)


@pytest.mark.parametrize(
    ("ratio", "mu"), [(0.1, 0.99164123637), (0.5, 0.743112084259), (1, -0.0214607549869)]
)
def test_uniform_fermi_gas(ratio, mu):
    """mu/E_F of the uniform gas; COMPUTED from -Li."""
    n, mass = 1e18, 40 * u
    E_F = hbar**2 / (2 * mass) * (6 * np.pi**2 * n) ** (2 / 3)
    gas = "gas a { m = 40 u\n statistics fermi }"
    state = found(gas, f"find mu, f_0, T_c for a in uniform with n = 1e18 m-3, T = {ratio * E_F / k!r} K")
    assert state["mu"]["value"] / E_F == pytest.approx(mu, rel=1e-9, abs=0)
    assert state["f_0"]["value"] == 0
    assert state["T_c"]["value"] is None
    assert state["T_c"]["why"]


def test_classical_gas():
    """mu = kT ln(n lambda^3), S by Sackur and Tetrode."""
    mass, n, T = 40 * u, 1e20, 1e-6
    lam = h / np.sqrt(2 * np.pi * mass * k * T)
    gas = "gas a { m = 40 u\n statistics classical }"
    state = found(gas, "trap b { volume = 1 mm3 }", "find mu, S for a in b with N = 1e11, T = 1 uK")
    assert state["mu"]["value"] == pytest.approx(k * T * np.log(n * lam**3), rel=1e-11, abs=0)
    assert state["S"]["value"] == pytest.approx(1e11 * k * (2.5 - np.log(n * lam**3)), rel=1e-11, abs=0)


@pytest.mark.parametrize(
    ("x", "dimension", "number"),
    [(0.1, 3, 1469.990194368076), (0.01, 2, 16917.87085079344), (0.01, 1, 518.4885156445064)],
)
def test_exact_levels(x, dimension, number):
    """N_exc = sum_k[(1-e^{-kx})^-D - 1]: Ketterle and van Druten, PRA 54, 656 (1996), MEMORY; COMPUTED."""
    omega = x * k * 1e-7 / hbar
    held = "\n".join(f"omega_{axis} = {omega!r} rad/s" for axis in "xyz"[:dimension])
    gas = f"gas a {{ m = 40 u\n dispersion trapped {{ {held} }} }}"
    assert value("N_c", gas, "find N_c for a with T = 100 nK") == pytest.approx(number, rel=1e-10, abs=0)


@pytest.mark.parametrize(
    ("place", "question", "words"),
    [
        ("trap b { V(x) = m/2*(2*pi*100 Hz)^2*x^2 }", "T_c for a in b with N = 1e5", "condens"),
        ("trap b { volume = 1 mm2 }", "T_c for a in b with N = 1e5", "condens"),
        ("trap b { V(x) = m*g_n*x }", "depth for a in b", "holds nothing"),
        (OSCILLATOR, "depth for a in b", "infinite"),
        (OSCILLATOR, "kappa_T for a in b with N = 1e5, T = 50 nK", "diverge"),
        (QUADRUPOLE, "freq for a in b", "quadratic"),
    ],
)
def test_what_has_no_answer_is_told_in_words(place, question, words):
    ((reading,),) = [found(RUBIDIUM, place, f"find {question}").values()]
    assert (reading["value"], reading["error"], reading["sigma"]) == (None, None, None)
    assert words in reading["why"]


def test_frequencies_ascend_and_the_sag_is_g_over_w_squared():
    trap = "trap b { w = 2*pi*100 Hz\n V(x, y, z) = m/2*w^2*(4*x^2 + y^2 + z^2) + m*g_n*z }"
    state = found(RUBIDIUM, trap, "find freq, r_min, w for a in b")
    assert state["freq"]["value"] == pytest.approx([100, 100, 200], rel=1e-10, abs=0)
    assert state["r_min"]["value"] == pytest.approx([0, 0, -24.8405346392e-6], rel=1e-9, abs=1e-15)
    assert state["w"]["value"] == pytest.approx(2 * np.pi * 100, rel=1e-15, abs=0)


def test_a_grid_over_a_parameter_and_a_condition():
    trap = "trap b { f = 1 Hz\n V(x, y, z) = m/2*(2*pi*f)^2*(x^2 + y^2 + z^2) }"
    (answer,) = answers(
        RUBIDIUM, trap, "find T_c for a in b over N = geometric(1e3, 1e5, 3), f = [50 Hz, 100 Hz]"
    )
    N, f = np.meshgrid([1e3, 1e4, 1e5], [50, 100], indexing="ij")
    expected = hbar * 2 * np.pi * f * (N / special.zeta(3)) ** (1 / 3) / k
    np.testing.assert_allclose(answer["found"]["T_c"]["value"], expected, rtol=1e-12)
    assert answer["over"] == {"N": pytest.approx([1e3, 1e4, 1e5]), "f": [50.0, 100.0]}
