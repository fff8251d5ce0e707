"""`derive` through the whole chain: a formula, its value, and words where there is none."""

from __future__ import annotations

import json

import pytest
import sympy

import eoscore
from eoscore.answer.record import Report
from eoscore.show.document import json_text

BOWL = "gas a { m = 84 u }\ntrap b {\n f = 100 Hz\n V(x, y, z) = m/2*(2*pi*f)^2*(x^2 + y^2 + 4*z^2) }\n"


def formulas(text):
    document = json.loads(json_text(Report("t.tarn", eoscore.loads(text).answers())))
    return document["answers"][-1]["formulas"]


def test_the_formula_reads_back_and_gives_its_value():
    entry = formulas(BOWL + "derive T_c for a in b with N = 1e5\n")["T_c"]
    symbols = {name: sympy.Symbol(name) for name in entry["where"]}
    read_back = sympy.sympify(entry["sympy"], locals=symbols)
    assert float(read_back.subs(entry["where"])) == pytest.approx(entry["value"], rel=1e-12, abs=0)
    assert (entry["closed"], entry["unit"]) == (True, "K")


def test_the_formula_agrees_with_the_numbers():
    text = BOWL + "find T_c for a in b with N = 1e5\nderive T_c for a in b with N = 1e5\n"
    found, derived = eoscore.loads(text).answers()
    assert derived.formulas["T_c"]["value"] == pytest.approx(
        float(found.found["T_c"].value), rel=1e-12, abs=0
    )


def test_a_place_that_holds_nothing_has_no_formula_but_words():
    entry = formulas("gas a { m = 84 u }\ntrap b { V(x) = m*g_n*x }\nderive T_c for a in b with N = 1e5\n")[
        "T_c"
    ]
    assert (entry["sympy"], entry["value"]) == (None, None)
    assert "holds nothing" in entry["why"]
