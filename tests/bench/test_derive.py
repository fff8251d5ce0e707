"""How long `derive T_c` takes from the parsed file on, in a warm interpreter; no time is asserted."""

from __future__ import annotations

import pytest

import eoscore

HEAD = "gas strontium { isotope Sr-84 }\n"
FILES = {
    "harmonic": "trap bowl { f = 40 Hz\n V(x, y, z) = m/2*(2*pi*f)^2*(x^2 + y^2 + 4*z^2) }\n",
    "tilted cone": "trap bowl { q = 1e-24 J/m\n V(x, y, z) = q*sqrt(x^2 + y^2 + 4*z^2) + m*g_n*z }\n",
    "biased field": "trap bowl { A = 1e-21 J/m\n B = 1e-18 J/m2\n U_0 = 1e-28 J\n"
    " V(rho, z) = sqrt(A^2*rho^2 + (U_0 + B*z^2)^2) - U_0 }\n",
}


@pytest.mark.parametrize("name", FILES)
def test_critical_temperature_as_a_formula(benchmark, name):
    text = HEAD + FILES[name] + "derive T_c for strontium in bowl with N = 1e5\n"

    def parsed():
        return (eoscore.loads(text),), {}

    (answer,) = benchmark.pedantic(lambda lab: lab.answers(), setup=parsed, rounds=3)
    assert answer.formulas["T_c"]["difference"] < 1e-10
