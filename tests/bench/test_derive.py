"""How long formulas take: in a warm interpreter, in a cold one beside the import of SymPy, and for all demos."""

from __future__ import annotations

import re
import subprocess
import sys
import time

import pytest

import eoscore
from eoscore.cli.demo import demo_names, demo_text

HEAD = "gas strontium { isotope Sr-84 }\n"
FILES = {
    "harmonic": "trap bowl { f = 40 Hz\n V(x, y, z) = m/2*(2*pi*f)^2*(x^2 + y^2 + 4*z^2) }\n",
    "tilted cone": "trap bowl { q = 1e-24 J/m\n V(x, y, z) = q*sqrt(x^2 + y^2 + 4*z^2) + m*g_n*z }\n",
    "biased field": "trap bowl { A = 1e-21 J/m\n B = 1e-18 J/m2\n U_0 = 1e-28 J\n"
    " V(rho, z) = sqrt(A^2*rho^2 + (U_0 + B*z^2)^2) - U_0 }\n",
}
QUESTION = "derive T_c for strontium in bowl with N = 1e5\n"
ROUNDS = 5
# The second line is SymPy's too: its first sum of symbols imports tensors and polyhedra.
SYMPY = "import time\nimport sympy\nsympy.Symbol('x') + 1\nprint(time.process_time())"
PARSED = """
import sys, time
import eoscore
lab = eoscore.loads(sys.stdin.read())
start = time.process_time()
lab.answers()
print(time.process_time() - start)
"""


@pytest.mark.parametrize("name", FILES)
def test_critical_temperature_as_a_formula(benchmark, name):
    text = HEAD + FILES[name] + QUESTION

    def parsed():
        return (eoscore.loads(text),), {}

    (answer,) = benchmark.pedantic(lambda lab: lab.answers(), setup=parsed, rounds=3)
    assert answer.formulas["T_c"]["difference"] < 1e-10


def interpreted(code, text=""):
    """Seconds of processor time that a fresh interpreter prints, the least of several."""
    command = [sys.executable, "-c", code]
    runs = (
        subprocess.run(command, input=text, capture_output=True, text=True, check=True) for _ in range(ROUNDS)
    )
    return min(float(run.stdout) for run in runs)


def test_cold_harmonic_formula_from_the_parsed_file(benchmark):
    """A second was promised where SymPy takes 0.7 s; what is ours is told by the ratio."""
    text = HEAD + FILES["harmonic"] + QUESTION
    sympy = interpreted(SYMPY)
    taken = benchmark.pedantic(interpreted, args=(PARSED, text), rounds=1, warmup_rounds=1)
    benchmark.extra_info["ratio to SymPy alone"] = taken / sympy
    assert taken <= 2.0 * sympy


def derived(name):
    """A demo with a `derive` of all that can be derived in place of each `find` without a grid."""
    formulas = {"T_c", "N_c", "f_0", "U", "S", "C_N"}
    lines = []
    for line in demo_text(name).splitlines():
        found = re.match(r"find (.*?) +(for .*)", line)
        if found is None:
            lines.append(line)
            continue
        names = [each for each in re.split(r",\s*", found[1]) if each in formulas]
        if names and " over " not in line and " from " not in line:
            lines.append(f"derive {', '.join(names)} {found[2]}")
    return "\n".join(lines)


def test_formulas_of_all_demos(benchmark):
    """Thirty seconds were promised for all, the engine's own numbers beside the formulas included."""
    texts = [derived(name) for name in demo_names()]

    def every():
        start = time.process_time()
        answers = [answer for text in texts for answer in eoscore.loads(text).answers()]
        return len(answers), time.process_time() - start

    asked, taken = benchmark.pedantic(every, rounds=1)
    assert asked >= len(texts)
    benchmark.extra_info["ratio to SymPy alone"] = taken / interpreted(SYMPY)
    assert taken <= 30.0
