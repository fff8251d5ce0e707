"""The shipped examples as formulas, against the numerical engine."""

from importlib.resources import files

import pytest

import eoscore

QUESTIONS = {
    "cone": "derive T_c, f_0, S for ytterbium in cone with N = 5e6, T = 300 nK",
    "photons": "derive N_c, f_0, U, C_N for photons in mirrors with N = 2e5, T = 300 K",
    "soft_box": "derive T_c, f_0, S, C_N for potassium in soft_box with N = 1.20(5)e5, T = 35 nK",
    "between": "derive T_c, f_0, S for strontium in wide with N = 3e4, T = 120 nK",
    "pairs": "derive T_c for charged in uniform with n = 0.50 fm-3",
}


def asked(demo: str, question: str) -> dict:
    text = (files("eoscore.demos") / f"{demo}.tarn").read_text(encoding="utf-8")
    blocks = "\n".join(line for line in text.splitlines() if not line.startswith("find"))
    (answer,) = eoscore.loads(f"{blocks}\n{question}\n").answers()
    return answer.formulas


@pytest.mark.parametrize("demo", QUESTIONS)
def test_a_demo_as_a_formula_equals_the_engine(demo):
    for name, entry in asked(demo, QUESTIONS[demo]).items():
        assert entry["difference"] < 1e-10, name


@pytest.mark.parametrize(
    ("demo", "question", "words"),
    [
        ("can", "derive T_c for strontium in can with N = 1e5", "the integral of exp"),
        ("pancake", "derive T_c for strontium in crossed with N = 2e5", "are not counted"),
    ],
)
def test_a_demo_without_a_formula_has_words_and_a_number(demo, question, words):
    entry = asked(demo, question)["T_c"]
    assert words in entry["why"]
    assert entry["value"] > 0
