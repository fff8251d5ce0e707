"""T_c of two crossed beams that sag, from the text to the number, beside SciPy's adaptive cubature of the density."""

import time

import numpy as np
import pytest
from scipy.constants import hbar, k
from scipy.integrate import cubature

import eoscore

TEXT = """
gas strontium { isotope Sr-84 }
trap crossed {
    P = 1.5 W
    w = 55 um
    zR = pi*w^2 / (1064 nm)
    s = 7.4e-37 J.m2/W
    beam(d2, l) = 2*P/(pi*w^2) / (1 + (l/zR)^2) * exp(-2*d2/(w^2*(1 + (l/zR)^2)))
    V(x, y, z) = -s*beam(y^2 + z^2, x) - s*beam(x^2 + z^2, y) + m*g_n*z
}
trap wells {
    b = 10 um
    U = k_B * 300 nK
    V(x, y, z) = U*((x/b)^2 - 1 + 0.3*y/b)^2 + m/2*(2*pi*100 Hz)^2*(y^2 + 2*z^2) + 0.1*U*y/b
}
"""


def answered(question):
    start = time.process_time()
    held = eoscore.loads(TEXT + question).answers()[0].found
    return held, time.process_time() - start


@pytest.mark.benchmark(group="general trap")
@pytest.mark.parametrize("trap", ["crossed", "wells"])
def test_from_the_text_to_the_critical_temperature(benchmark, trap):
    question = f"find T_c for strontium in {trap} with N = 2e5\n"
    found, seconds = benchmark.pedantic(answered, args=(question,), rounds=1)
    benchmark.extra_info["cpu_seconds"] = seconds
    assert float(found["T_c"].error) < 1e-4 * float(found["T_c"].value)


@pytest.mark.benchmark(group="general trap")
def test_traps_in_a_row(benchmark):
    """Eight of a thousand traps: each has a landscape and a measure of its own."""
    question = "find T_c for strontium in crossed with N = 2e5 over w = even(50 um, 60 um, 8)\n"
    _, seconds = benchmark.pedantic(answered, args=(question,), rounds=1)
    benchmark.extra_info["cpu_seconds for a thousand"] = seconds / 8 * 1000


@pytest.mark.benchmark(group="general trap")
def test_critical_number_beside_cubature(benchmark):
    """The same N_c at 300 nK: the ratio of processor seconds, and the error that cubature has reached by then."""
    T = 300e-9
    found, ours = answered("find N_c, V_min, m for strontium in crossed with T = 300 nK, mu = 0 J\n")
    number, v_min, mass = (float(found[name].value) for name in ("N_c", "V_min", "m"))
    intensity, waist, shift = 2 * 1.5 / (np.pi * 55e-6**2), 55e-6, 7.4e-37
    rayleigh = np.pi * waist**2 / 1064e-9

    def beam(d2, along):
        wide = 1 + (along / rayleigh) ** 2
        return intensity / wide * np.exp(-2 * d2 / (waist**2 * wide))

    def density(points):
        x, y, z = points.T
        v = -shift * beam(y**2 + z**2, x) - shift * beam(x**2 + z**2, y) + mass * 9.80665 * z
        return eoscore.bose(1.5, np.maximum((v - v_min) / (k * T), 0.0))

    def theirs():
        start = time.process_time()
        box = np.full(3, 18e-6)
        result = cubature(density, -box, box, rtol=1e-9, max_subdivisions=4000)
        return result.estimate * (mass * k * T / (2 * np.pi * hbar**2)) ** 1.5, time.process_time() - start

    estimate, seconds = benchmark.pedantic(theirs, rounds=1)
    benchmark.extra_info["times_ours"] = seconds / ours
    benchmark.extra_info["error_of_cubature"] = abs(float(estimate) / number - 1)
    assert float(estimate) == pytest.approx(number, rel=1e-3)
