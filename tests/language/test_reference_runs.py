"""Every example of the language reference is run: its own questions, or one about what it declares."""

from __future__ import annotations

import re
from importlib.resources import files

import numpy as np
import pytest

import eoscore

REFERENCE = files("eoscore.grammar").joinpath("README.md").read_text(encoding="utf-8")
EXAMPLES = re.findall(r"^```tarn\n(.*?)^```", REFERENCE, re.MULTILINE | re.DOTALL)
SHARED = """
gas potassium { isotope K-39 }
trap bowl { f = 85 Hz
  V(x, y, z) = m/2*(2*pi*f)^2*(x^2 + y^2 + 4*z^2) }
trap tight { V(r) = m/2*(2*pi*400 Hz)^2*r^2 }
trap wide { V(r) = m/2*(2*pi*20 Hz)^2*r^2 }
"""
ABOUT = {
    "gas": "find lambda_T for {} in uniform with n = 1e10 m-2, T = 100 nK",
    "trap": "find V_min for {} in {} ",
    "states": "find N_c for {} in {} with T = 100 nK",
}
IN_WORDS = ("the depth is infinite",)  # an answer, too


def asked(example):
    """The example with what it takes for granted, and with questions where it has none."""
    if re.search(r"^(find|derive) ", example, re.MULTILINE):
        return example if "gas " in example else SHARED + example
    declared = re.findall(r"^(gas|trap|states) (\w+)", example, re.MULTILINE)
    gas = next((name for kind, name in declared if kind == "gas"), "potassium")
    first = dict(reversed(declared))  # the bottom between two coils takes long to find
    questions = [
        ABOUT[kind].format(*((name,) if kind == "gas" else (gas, name))) for kind, name in first.items()
    ]
    own = "" if gas != "potassium" else "gas potassium { isotope K-39 }\n"
    return "\n".join([own + example, *questions])


@pytest.mark.parametrize("example", EXAMPLES, ids=lambda example: example.splitlines()[0])
def test_every_example_is_run(example, tmp_path):
    (tmp_path / "lab").mkdir()
    (tmp_path / "lab" / "beams.tarn").write_text("w = 40 um\n")
    lab = eoscore.loads(asked(example), folder=tmp_path)
    answers = lab.answers(accuracy=1e-4)
    assert len(answers) == len(lab.program.questions)
    for answer in answers:
        for name, found in getattr(answer, "found", {}).items():
            known = np.isfinite(found.value).all()
            assert known or any(words in found.why for words in IN_WORDS), (answer.question, name, found.why)
        for name, formula in getattr(answer, "formulas", {}).items():
            assert formula["sympy"], (answer.question, name, formula["why"])
