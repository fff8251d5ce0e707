"""First terms beyond the ideal, infinite gas in the answer to `derive T_c`."""

from __future__ import annotations

import math

import pytest
import sympy as sp

import eoscore

HARMONIC = "V(x, y, z) = m/2*(2*pi*100 Hz)^2*(x^2 + y^2 + 4*z^2)"


def derived(place, gas="isotope Rb-87\n a_s = 100 a0"):
    text = f"gas g {{ {gas} }}\ntrap t {{ {place} }}\nderive T_c for g in t with N = 1e5"
    return eoscore.loads(text).answers()[0].formulas["T_c"]


def value(entry):
    symbols = {name: sp.Symbol(name) for name in entry["where"]}
    formula = sp.sympify(entry["sympy"], locals=symbols)
    return float(formula.subs({symbols[name]: number for name, number in entry["where"].items()}).evalf())


def test_harmonic_trap():
    """-0.7275 (mean f/geometric mean f) N^(-1/3): Grossmann and Holthaus, Phys. Lett. A 208, 188 (1995)."""
    terms = derived(HARMONIC)["first_order"]
    size = -0.727503602287948 * (4 / 3) / 2 ** (1 / 3) * 1e5 ** (-1 / 3)
    assert value(terms["shift_size"]) == pytest.approx(size, rel=1e-9)
    assert terms["shift_size"]["value"] == pytest.approx(size, rel=1e-9)
    assert value(terms["shift_int"]) == pytest.approx(terms["shift_int"]["value"], rel=1e-9)
    assert "zeta(3)" in terms["shift_size"]["text"]


def test_linear_trap_has_no_first_order_in_the_spacing():
    """I6 for p = 1: -2.31138638005 a_s/lambda, by the double sum."""
    terms = derived("V(r) = 1e-30 J*r/(1 um)")["first_order"]
    assert set(terms) == {"shift_int"}
    assert terms["shift_int"]["where"]["a_s"] == pytest.approx(100 * 5.29177210544e-11, rel=1e-9, abs=0)
    assert "2.3113863" in terms["shift_int"]["text"]


@pytest.mark.parametrize(
    ("place", "gas"), [(HARMONIC + "\n levels exact", ""), (HARMONIC, "treatment hartree_fock")]
)
def test_the_formula_is_that_of_the_ideal_continuum(place, gas):
    found = derived(place, f"isotope Rb-87\n a_s = 100 a0\n {gas}")
    assert found["difference"] < 1e-10
    assert math.isclose(found["value"], derived(HARMONIC)["value"], rel_tol=1e-14)


@pytest.mark.parametrize(
    ("place", "density"),
    [
        ("volume = 1e-3 mm3", 1e5 / 1e-12),
        ("V(x, y, z) = 0 J where x > 0 m, x < 50 um, y > 0 m, y < 50 um, z > 0 m, z < 20 um", 1e5 / 5e-14),
    ],
)
def test_a_box_lies_beyond_the_mean_field(place, density):
    """1.32(2) a n^(1/3): P. Arnold, G. Moore, Phys. Rev. Lett. 87, 120401 (2001)."""
    entry = derived(place)["first_order"]["shift_int"]
    assert entry["where"]["n"] == pytest.approx(density, rel=1e-9)
    assert value(entry) == pytest.approx(1.32 * 100 * 5.29177210544e-11 * density ** (1 / 3), rel=1e-9)
    assert entry["text"] == "shift_int = 1.32*a_s*n^(1/3)"


def test_a_uniform_gas_has_its_density():
    text = "gas g { isotope Rb-87\n a_s = 100 a0 }\nderive T_c for g in uniform with n = 2e19 m-3"
    entry = eoscore.loads(text).answers()[0].formulas["T_c"]["first_order"]["shift_int"]
    assert entry["where"]["n"] == 2e19
    assert value(entry) == pytest.approx(entry["value"], rel=1e-12)
