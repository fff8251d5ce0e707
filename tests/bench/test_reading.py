"""Parsing and checking a file of 1,000 lines, as a lab that keeps all its traps in one file has it."""

from __future__ import annotations

import time

from eoscore.gas.registry import Signatures
from eoscore.language import read

GAS = "gas g{k} {{\n    isotope Sr-84\n    a_s = {a} a0\n}}\n"
TRAP = """trap t{k} {{
    P     = 1.50(5) W
    w     = {w}(1) um
    zR    = pi*w^2 / (1064 nm)
    s     = 7.4e-37 J.m2/W
    beam(d2, l) = 2*P/(pi*w^2) / (1 + (l/zR)^2) * exp(-2*d2/(w^2*(1 + (l/zR)^2)))
    V(x, y, z) = -s*beam(y^2 + z^2, x) - s*beam(x^2 + z^2, y) + m*g_n*z
}}
"""
ASK = "find T_c, depth for g{gas} in t{trap} with N = 2e5 over P = geometric(0.6 W, 6 W, 60)\n"


def thousand_lines() -> str:
    gases = [GAS.format(k=k, a=k + 1) for k in range(40)]
    traps = [TRAP.format(k=k, w=k + 50) for k in range(60)]
    asked = [ASK.format(gas=k % 40, trap=k % 60) for k in range(360)]
    return "".join(gases + traps + asked)


def test_a_thousand_lines_are_read(benchmark):
    text = thousand_lines()
    assert text.count("\n") == 1000
    used = []

    def once():
        start = time.process_time()
        program = read(text, dispersions=Signatures())
        used.append(time.process_time() - start)
        return program

    assert len(benchmark.pedantic(once, rounds=5, warmup_rounds=1).questions) == 360
    benchmark.extra_info["processor seconds"] = min(used)
