"""`derive` from the text on, against published forms and against the numerical engine, which shares no code with it."""

import math

import mpmath
import pytest
import sympy as sp

import eoscore
from eoscore import constants

LAB = """
gas strontium { isotope Sr-84 }
gas lithium { isotope Li-6  statistics fermi }
gas light { c_m = 2e8 m/s
  E(p) = c_m*p }
gas heavy { m = 2e-9 u
  dispersion relativistic { antiparticles = 1 } }
gas lattice { J = k_B*1 nK
  a = 500 nm
  E(px, py, pz) = 2*J*(3 - cos(px*a/hbar) - cos(py*a/hbar) - cos(pz*a/hbar))
    where abs(px) < pi*hbar/a, abs(py) < pi*hbar/a, abs(pz) < pi*hbar/a }
gas sheet { isotope Yb-174
  dispersion trapped { omega_z = 2*pi*5 kHz } }
trap bowl { f = 40 Hz
  V(x, y, z) = m/2*(2*pi*f)^2*(x^2 + y^2 + 4*z^2) + m*g_n*z }
trap disc { f = 20 Hz
  V(x, y) = m/2*(2*pi*f)^2*(x^2 + y^2) }
trap cone { q = 1e-25 J/m
  V(x, y, z) = q*sqrt(x^2 + y^2 + 4*z^2) + m*g_n*z/100 }
trap biased { alpha_1 = 1e-21 J/m
  beta_1 = 1e-18 J/m2
  U_0 = 1e-28 J
  V(rho, z) = sqrt(alpha_1^2*rho^2 + (U_0 + beta_1*z^2)^2) - U_0 }
trap walls { q = 1e40 J/m12
  V(r) = q*r^12 }
trap box { volume = 1e-3 mm3 }
states soft { exponent = 1.65
  anchor N_c = 3.0e5 at T = 90 nK }
"""


def formulas(question: str) -> dict:
    (answer,) = eoscore.loads(LAB + question).answers()
    return answer.formulas


def read_back(entry: dict, key: str = "sympy", **more: float) -> float:
    """The value that a reader of the document computes from its text and its `where`."""
    names = {name: sp.Symbol(name) for name in (*entry["where"], *more)}
    expression = sp.sympify(entry[key], locals=names)
    return float(expression.subs({names[k]: v for k, v in {**entry["where"], **more}.items()}).evalf(20))


CLOSED = [
    ("strontium in bowl", "N = 1e5, T = 20 nK"),
    ("strontium in bowl", "N = 1e5, T = 400 nK"),
    ("strontium in disc", "N = 1e4, T = 10 nK"),
    ("strontium in cone", "N = 1e5, T = 30 nK"),
    ("strontium in walls", "N = 1e5, T = 1 uK"),
    ("strontium in box", "N = 1e5, T = 1 nK"),
    ("strontium in soft", "N = 1e5, T = 20 nK"),
    ("light in box", "N = 1e5, T = 1 K"),
]


@pytest.mark.parametrize(("who", "given"), CLOSED)
def test_a_closed_form_equals_the_numerical_engine(who, given):
    for name, entry in formulas(f"derive T_c, N_c, f_0, U, S, C_N for {who} with {given}").items():
        assert entry["closed"], name
        assert entry["difference"] < 1e-10, name
        assert read_back(entry) == pytest.approx(entry["value"], rel=1e-12), name


@pytest.mark.parametrize("who", ["strontium in biased", "lattice in box", "sheet in disc", "heavy in box"])
def test_an_implicit_temperature_solves_its_equation_and_equals_the_engine(who):
    entry = formulas(f"derive T_c for {who} with N = 1e5")["T_c"]
    assert not entry["closed"]
    assert entry["difference"] < max(1e-10, 2e-8 * ("biased" in who))
    assert entry["expansion"]["small"]


def test_the_harmonic_form_is_the_published_one():
    """k_B T_c = hbar omega (N/zeta(3))^{1/3}: Bagnato, Pritchard, Kleppner, Phys. Rev. A 35, 4354 (1987)."""
    entry = formulas("derive T_c for strontium in bowl with N = 1e5")["T_c"]
    omega = 2 * math.pi * 40 * 2 ** (1 / 3)
    want = constants.HBAR * omega * (1e5 / float(mpmath.zeta(3))) ** (1 / 3) / constants.K_B
    assert entry["value"] == pytest.approx(want, rel=1e-13)
    assert entry["sensitivities"] == {"N": "1/3", "f": "1", "hbar": "1"}
    names = {name: sp.Symbol(name) for name in ("N", "k_B")}
    jump = sp.sympify(entry["jump"]["sympy"], locals=names) / names["N"] / names["k_B"]
    assert float(jump.evalf()) == pytest.approx(6.57686672461, rel=1e-11)


def test_the_biased_field_has_the_published_density_of_states():
    """rho = A (E^3 + 2 U_0 E^2): Luiten, Reynolds, Walraven, Phys. Rev. A 53, 381 (1996) (from memory)."""
    entry = formulas("derive rho for strontium in biased")["rho"]
    energy, bias = sp.symbols("E U_0")
    locals_ = {name: sp.Symbol(name) for name in entry["where"]} | {"E": energy, "U_0": bias}
    shape = sp.simplify(sp.sympify(entry["sympy"], locals=locals_) / (energy**3 + 2 * bias * energy**2))
    assert not shape.free_symbols & {energy, bias}


def test_the_light_pair_gas_tends_to_the_published_limit():
    """k_B T_c = (3 rho (hbar c)^3/(m c^2))^{1/2}: Haber, Weldon, Phys. Rev. Lett. 46, 1497 (1981) (from memory)."""
    entry = formulas("derive T_c for heavy in box with N = 1e16")["T_c"]
    (light,) = [e for e in entry["expansions"] if e["limit"] == "high temperature"]
    where = entry["where"]
    density = 1e16 / where["volume"]
    published = (3 * density * (constants.HBAR * constants.C) ** 3 / (where["m"] * constants.C**2)) ** 0.5
    assert light["value"] * constants.K_B == pytest.approx(published, rel=0.02)


@pytest.mark.parametrize(
    ("question", "words"),
    [
        ("derive T_c for lithium in box with N = 1e5", "only bosons condense"),
        ("derive T_c for strontium in uniform with n = 1e10 m-2", "condensation needs a > 1"),
    ],
)
def test_no_condensation_is_told_in_words(question, words):
    entry = formulas(question)["T_c"]
    assert entry["value"] is None
    assert words in entry["why"]


def test_g_starts_as_the_boltzmann_factor():
    entry = formulas("derive g for strontium in bowl with N = 1e5, T = 400 nK")["g"]
    assert entry["where"].keys().isdisjoint({"alpha", "T"})
    assert read_back(entry, alpha=30.0) == pytest.approx(math.exp(-30), rel=1e-9)


def test_fermions_have_an_equation_of_state_too():
    for name, entry in formulas("derive U, S, C_N for lithium in bowl with N = 1e5, T = 300 nK").items():
        assert entry["difference"] < 1e-10, name
