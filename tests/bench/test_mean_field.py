"""How long a Hartree-Fock state takes."""

from __future__ import annotations

import eoscore

HARMONIC = "V(x, y, z) = m/2*(2*pi*100 Hz)^2*(x^2 + y^2 + z^2)"
CROSSED = """
    P = 1.50 W
    w = 55 um
    zR = pi*w^2/(1064 nm)
    beam(d2, l) = 2*P/(pi*w^2)/(1 + (l/zR)^2)*exp(-2*d2/(w^2*(1 + (l/zR)^2)))
    V(x, y, z) = -7.4e-37 J.m2/W*(beam(y^2 + z^2, x) + beam(x^2 + z^2, y)) + m*g_n*z
"""


def held(place):
    lab = eoscore.loads(
        f"gas g {{ isotope Sr-84\n a_s = 123 a0\n treatment hartree_fock\n}}\ntrap t {{ {place} }}"
    )
    return lab["g"].held_in(lab["t"])


def test_harmonic_trap(benchmark):
    trap, T = held(HARMONIC), iter(range(100, 100_000))
    assert 0 < benchmark(lambda: trap.state(N=1e5, T=next(T) * 1e-11 + 1e-7).f_0) < 1


def test_two_beam_trap(benchmark):
    trap, T = held(CROSSED), iter(range(100, 100_000))
    trap.state(N=2e5, T=1e-7)
    assert 0 < benchmark(lambda: trap.state(N=2e5, T=next(T) * 1e-11 + 1e-7).f_0) < 1
