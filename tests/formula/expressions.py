"""Random formulas with their SymPy twins, for the tests of the formula room."""

from __future__ import annotations

from typing import Any

import sympy
from hypothesis import strategies as st

from eoscore.formula import Formula, call, choose, constant, less, variable

X, Y = sympy.symbols("x y", real=True)

Pair = tuple[Formula, Any]

_SMOOTH = {"sin": sympy.sin, "cos": sympy.cos, "atan": sympy.atan, "tanh": sympy.tanh, "erf": sympy.erf}


def leaves() -> st.SearchStrategy[Pair]:
    numbers = st.integers(-3, 3).map(lambda n: (constant(n / 2), sympy.Rational(n, 2)))
    return st.sampled_from([(variable("x"), X), (variable("y"), Y)]) | numbers


def _grown(inner: st.SearchStrategy[Pair]) -> st.SearchStrategy[Pair]:
    two = st.tuples(inner, inner)
    return st.one_of(
        two.map(lambda ab: (ab[0][0] + ab[1][0], ab[0][1] + ab[1][1])),
        two.map(lambda ab: (ab[0][0] - ab[1][0], ab[0][1] - ab[1][1])),
        two.map(lambda ab: (ab[0][0] * ab[1][0], ab[0][1] * ab[1][1])),
        two.map(lambda ab: (ab[0][0] / (1 + ab[1][0] ** 2), ab[0][1] / (1 + ab[1][1] ** 2))),
        st.tuples(inner, st.integers(1, 3)).map(lambda a: (a[0][0] ** a[1], a[0][1] ** a[1])),
        inner.map(lambda a: (call("sqrt", 1 + a[0] ** 2), sympy.sqrt(1 + a[1] ** 2))),
        inner.map(lambda a: (call("exp", -(a[0] ** 2)), sympy.exp(-(a[1] ** 2)))),
        st.tuples(inner, st.sampled_from(sorted(_SMOOTH))).map(
            lambda a: (call(a[1], a[0][0]), _SMOOTH[a[1]](a[0][1]))
        ),
        two.map(
            lambda ab: (
                choose(less(ab[0][0], ab[1][0]), ab[0][0] ** 2, ab[1][0]),
                sympy.Piecewise((ab[0][1] ** 2, ab[0][1] < ab[1][1]), (ab[1][1], True)),
            )
        ),
    )


def pairs() -> st.SearchStrategy[Pair]:
    """A formula in x and y, and the same built by SymPy."""
    return st.recursive(leaves(), _grown, max_leaves=6)
