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
