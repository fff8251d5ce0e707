"""The NumPy side and the SymPy side share no code after the parser: they must agree at random points."""

from __future__ import annotations

import numpy as np
import pytest
import sympy as sp
from hypothesis import assume, given, settings
from hypothesis import strategies as st

from eoscore.language.symbolic import symbolic_text

from .labs import GAS, near, program

LEAVES = [
    "2",
    "0.5",
    "1.25",
    "3(1)",
    "1e-1",
    "a",
    "b",
    "x/(1 m)",
    "y/(1 m)",
    "f(x)",
    "90 deg",
    "1 mm/(30 um)",
    "pi",
]
BOUNDED = ["sin", "cos", "tanh", "atan", "erf", "exp", "sinh", "cosh", "abs", "ellipe", "tan", "asin", "acos"]


def grown(inner: st.SearchStrategy[str]) -> st.SearchStrategy[str]:
    """One more level: operators, functions of arguments that are kept small, choices."""
    two = st.tuples(inner, inner)
    return st.one_of(
        st.tuples(inner, st.sampled_from("+-*"), inner).map(lambda t: f"({t[0]} {t[1]} {t[2]})"),
        two.map(lambda t: f"{t[0]}/(2 + tanh({t[1]}))"),
        st.tuples(st.sampled_from(BOUNDED), inner).map(lambda t: f"{t[0]}(tanh({t[1]})/2)"),
        inner.map(lambda t: f"sqrt(1 + ({t})^2)"),
        inner.map(lambda t: f"ln(2 + tanh({t}))"),
        inner.map(lambda t: f"-({t})^3"),
        inner.map(lambda t: f"(2 + cos({t}))^(1/3)"),
        two.map(lambda t: f"max({t[0]}, {t[1]}, 0.3)"),
        two.map(lambda t: f"besselj(1, tanh({t[0]})) + atan2(2 + tanh({t[1]}), 3)"),
        st.tuples(inner, inner, inner).map(
            lambda t: f"if({t[0]} < {t[1]} or not {t[2]} > 1, {t[0]}, {t[2]})"
        ),
    )


expressions = st.recursive(st.sampled_from(LEAVES), grown, max_leaves=7)


@settings(max_examples=60, deadline=None)
@given(expressions, st.floats(0.3, 2), st.floats(-2, -0.3))
def test_numbers_and_symbols_agree(text, x, y):
    trap = f"trap t {{ a = 1.7\n b = -0.4\n d = a*b\n f(u) = u/(1 m) + d\n V(x, y) = (1 J)*({text}) }}"
    binding = program(GAS + trap).bind("sr", "t")
    numeric = float(binding.place.field.formula.evaluate({"x": x, "y": y}))
    assume(np.isfinite(numeric) and abs(numeric) < 1e4)
    symbolic = binding.symbolic()
    exact = {
        symbol: sp.Rational(*value.as_integer_ratio())
        for symbol, value in zip(symbolic.coordinates, (x, y), strict=True)
    }
    values = {
        symbol: sp.Rational(repr(symbolic.values[symbol.name]))
        for symbol in symbolic.potential.free_symbols - set(exact)
    }
    wanted = sp.N(symbolic.potential.subs(values | exact), 25)
    assert numeric == pytest.approx(float(wanted), rel=1e-12, abs=1e-12)


def sides(lines: str):
    """The symbolic side of a trap of strontium."""
    return program(GAS + f"trap t {{ {lines} }}").bind("sr", "t").symbolic()


def test_what_is_made_of_names_is_written_out_and_literals_stay_symbols():
    side = sides("f = 400.0(5) Hz\n w = 2*pi*f\n q = 2*pi/(30 um)\n V(x) = m/2*w^2*x^2*cos(q*x)")
    f, m, q = (sp.Symbol(name, positive=True) for name in "fmq")
    x = sp.Symbol("x", real=True)
    assert sp.simplify(side.potential - 2 * sp.pi**2 * m * f**2 * x**2 * sp.cos(q * x)) == 0
    assert side.values == {"m": near(1.3934151e-25, 1e-7), "f": 400.0, "q": near(2 * np.pi / 30e-6)}


def test_a_negative_value_makes_a_real_symbol():
    side = sides("s = -2 J/m\n V(x) = s*x")
    (s,) = side.potential.free_symbols - set(side.coordinates)
    assert (s.name, s.is_positive, s.is_real) == ("s", None, True)


@pytest.mark.parametrize(
    ("name", "symbol"), [("lambda", "lambda_"), ("T", "T_1"), ("x", "x_1"), ("hbar", "hbar_1")]
)
def test_symbols_are_named_so_that_python_reads_them_back(name, symbol):
    side = sides(f"V(x) = stretch(x)*(1 J)\n stretch(u) = u/(3*{name})\n {name} = 2 m")
    assert side.values == {symbol: 2.0}
    assert {each.name for each in side.potential.free_symbols} == {symbol, "x"}


def test_a_value_given_from_outside_stays_a_symbol():
    lab = program(GAS + "trap t { P = 2 W\n Q = 3*P\n V(x) = Q*x*(1 s/m) }")
    side = lab.bind("sr", "t", {"Q": 7.0}).symbolic()
    assert side.potential == sp.Symbol("Q", positive=True) * sp.Symbol("x", real=True)
    assert side.values == {"Q": 7.0}


def test_literals_are_exact():
    side = sides("V(x) = 1.10 uJ/mm*x + cos(60 deg)*(1 J) + 0e999999*(1 J)")
    assert side.potential == sp.Rational(11, 10000) * side.coordinates[0] + sp.Rational(1, 2)


def test_walls_zone_density_and_anchor():
    side = sides("R = 2 um\n V(r) = 0 where r < R and r > 0 m")
    r, radius = side.coordinates[0], sp.Symbol("R", positive=True)
    assert (side.potential, side.walls, r.is_nonnegative) == (0, (radius - r, r), True)
    formula = "states s { a = 1.5\n A = 2 J-1\n rho(E) = A*(E/(1 J))^a }\n"
    anchored = "states t { exponent = 2.5\n anchor N_c = 1e5 at T = 9 nK }"
    lab = program("gas g { E(p) = c*p where p < h/(1 um) }\n" + formula + anchored)
    density = lab.bind("g", "s").symbolic()
    A, E, a = sp.symbols("A E a", positive=True)
    assert density.rho == A * E**a
    assert density.energy == sp.Symbol("c", positive=True) * sp.Symbol("p", nonnegative=True)
    assert len(density.zone) == 1
    assert lab.bind("g", "t").symbolic().anchor == (100000, sp.Rational(9, 10**9))


def test_the_energy_text_of_a_plugin():
    energy = symbolic_text("sqrt(m^2*c^4 + p^2*c^2) - m*c^2", ["p", "m"])
    m, c = sp.symbols("m c", positive=True)
    p = sp.Symbol("p", nonnegative=True)
    assert sp.simplify(energy - (sp.sqrt(m**2 * c**4 + p**2 * c**2) - m * c**2)) == 0
    assert symbolic_text("2*q", {"q": sp.Integer(3)}) == 6
