"""Whatever parses is either a program, whose bindings are numbers and formulas, or complaints: nothing else."""

from __future__ import annotations

import contextlib

import numpy as np
from hypothesis import HealthCheck, given, reject, settings
from hypothesis import strategies as st

from eoscore.errors import TarnError

from .labs import program

NAMES = [
    "a",
    "b",
    "m",
    "V",
    "E",
    "N",
    "T",
    "x",
    "r",
    "p",
    "w",
    "rho",
    "volume",
    "exponent",
    "E_max",
    "a_s",
    "hbar",
    "sin",
    "f",
]
UNITS = ["", " m", " J", " kg", " K", " um", " Hz", " m3", " u", " nK", " J-1", " m-3"]
name = st.sampled_from(NAMES)
number = st.tuples(
    st.sampled_from(["0", "1", "2.5", "1e-7", "3.0(2)e5", "1e300"]), st.sampled_from(UNITS)
).map("".join)


def grown(inner: st.SearchStrategy[str]) -> st.SearchStrategy[str]:
    functions = st.sampled_from([*NAMES, "sqrt", "exp", "min", "atan2", "besselj", "ellipk", "abs", "sign"])
    return st.one_of(
        st.tuples(inner, st.sampled_from("+-*/^"), inner).map(lambda t: f"({t[0]} {t[1]} {t[2]})"),
        st.tuples(functions, st.lists(inner, max_size=3)).map(lambda t: f"{t[0]}({', '.join(t[1])})"),
        st.tuples(inner, inner, inner).map(lambda t: f"if({t[0]} < {t[1]}, {t[2]}, {t[0]})"),
        inner.map(lambda text: f"-{text}"),
    )


expression = st.recursive(st.one_of(name, number, name), grown, max_leaves=6)
parameters = st.one_of(
    st.just(""),
    st.lists(name, min_size=1, max_size=3, unique=True).map(lambda names: f"({', '.join(names)})"),
)
definition = st.tuples(name, parameters, expression).map(lambda t: f"{t[0]}{t[1]} = {t[2]}")
walled = st.tuples(definition, expression, expression).map(
    lambda t: f"{t[0]} where {t[1]} < {t[2]}" if "(" in t[0].split("=")[0] else t[0]
)
gas_line = st.one_of(
    walled, st.sampled_from(["isotope K-39", "statistics fermi", "dispersion trapped { omega_z = 1 Hz }"])
)
states_line = st.one_of(
    definition, st.tuples(expression, expression).map(lambda t: f"anchor N_c = {t[0]} at T = {t[1]}")
)


def block(kind: str, title: str, line: st.SearchStrategy[str]) -> st.SearchStrategy[str]:
    return st.lists(line, max_size=4).map(lambda lines: f"{kind} {title} {{\n" + "\n".join(lines) + "\n}")


condition = st.tuples(name, expression).map(lambda t: f"{t[0]} = {t[1]}")
axis = st.tuples(name, st.sampled_from(["even", "geometric"]), expression, expression, expression).map(
    lambda t: f"{t[0]} = {t[1]}({t[2]}, {t[3]}, {t[4]})"
)
question = st.tuples(
    st.sampled_from(["find", "derive"]),
    st.lists(st.sampled_from(["T_c", "mu", "depth", "N_c", "rho", *NAMES]), min_size=1, max_size=3),
    st.sampled_from([" in t", " in s", " in uniform", "", " in t from s"]),
    st.lists(condition, max_size=2),
    st.lists(axis, max_size=1),
).map(
    lambda t: (
        f"{t[0]} {', '.join(t[1])} for g{t[2] if t[0] == 'find' else ' in t'}"
        + (f" with {', '.join(t[3])}" if t[3] else "")
        + (f" over {', '.join(t[4])}" if t[4] and t[0] == "find" else "")
    )
)
texts = st.tuples(
    st.lists(definition, max_size=3).map("\n".join),
    block("gas", "g", gas_line),
    block("trap", "t", walled),
    block("states", "s", states_line),
    st.lists(question, max_size=2).map("\n".join),
).map("\n".join)


@settings(
    max_examples=60, deadline=None, suppress_health_check=[HealthCheck.too_slow, HealthCheck.data_too_large]
)
@given(texts)
def test_nothing_but_complaints_comes_of_a_wrong_text(text):
    with contextlib.suppress(TarnError):
        lab = program(text)
        for asked in lab.questions:
            binding = lab.bind(asked.gas, asked.place, lab.conditions(asked).values)
            _ = binding.gas, binding.place, [binding.value(each) for each in binding.names]


right = st.sampled_from(
    [
        "gas g { m = 2 u }",
        "gas g { isotope K-39\n E(p) = p^2/(2*m) }",
        "gas g { m = 1 u\n dispersion trapped { omega_z = 1 Hz } }",
    ]
)
V = st.tuples(st.sampled_from(["(x)", "(x, y)", "(rho)"]), expression, expression).map(
    lambda t: f"trap t {{ a = {t[1]}\n b = 2\n w = 3 um\n f(u) = 2*u\n V{t[0]} = 0*({t[2]}) }}"
)


@settings(
    max_examples=60, deadline=None, suppress_health_check=[HealthCheck.too_slow, HealthCheck.filter_too_much]
)
@given(right, V)
def test_what_is_checked_can_be_bound(gas, trap):
    try:
        lab = program(f"x = 1 m\nr = 1 m\np = 2\n{gas}\n{trap}\nfind a for g in t")
    except TarnError:
        reject()
    binding = lab.bind("g", "t")
    assert np.isfinite([binding.value(each)[0] for each in binding.names]).all()
    assert set(binding.place.field.formula.variables) <= {"x", "y", "rho"}
