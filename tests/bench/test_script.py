"""The script that a lab member would write today, as a ratio to eoscore on the same questions.

Arbitrary-precision polylogarithm, nested quadrature over an anharmonic trap, and a root finder on top.
"""

from __future__ import annotations

import time

import mpmath
import numpy as np
import pytest
from scipy import constants, integrate, optimize

import eoscore

MASS = 83.9134191 * constants.m_u  # AME2020
OMEGA = 2 * np.pi * 100.0
QUARTIC = 1e-30 / (20e-6) ** 4  # J/m^4
NUMBER = 1e5
TEXT = """
gas strontium { m = 83.9134191 u }
trap mug { V(r) = m/2*(2*pi*100 Hz)^2*r^2 + 1e-30 J * (r/(20 um))^4 }
find T_c for strontium in mug with N = 1e5
"""


def script_number(temperature):
    """N_c of V(r) by the local density: int 4 pi r^2 g_{3/2}(e^{-V/kT})/lambda^3 dr."""
    kT = constants.k * temperature
    wavelength = constants.h / np.sqrt(2 * np.pi * MASS * kT)

    def density(r):
        v = 0.5 * MASS * OMEGA**2 * r**2 + QUARTIC * r**4
        return 4 * np.pi * r**2 * float(mpmath.polylog(1.5, mpmath.exp(-v / kT)).real) / wavelength**3

    edge = np.sqrt(60 * kT / (MASS * OMEGA**2))
    return integrate.quad(density, 0, edge, epsrel=1e-6, limit=200)[0]


def script_T_c():
    return optimize.brentq(lambda T: script_number(T) - NUMBER, 50e-9, 1e-6, rtol=1e-6)


def engine_T_c():
    (answer,) = eoscore.loads(TEXT).answers()
    return float(answer.found["T_c"].value)


def test_T_c_of_an_anharmonic_trap_beside_the_script(benchmark):
    start = time.perf_counter()
    expected = script_T_c()
    script = time.perf_counter() - start
    found = benchmark(engine_T_c)
    benchmark.extra_info["script"] = script
    benchmark.extra_info["ratio"] = script / benchmark.stats.stats.median
    assert found == pytest.approx(expected, rel=1e-5)
    assert script > benchmark.stats.stats.median
