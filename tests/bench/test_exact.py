"""How long exact levels and sums over them take."""

from __future__ import annotations

import eoscore
from eoscore.state.canonical import condensate_statistics

QUARTIC = "V(x, y, z) = 2e-31 J*((x/(1 um))^4 + (y/(1 um))^4 + (z/(2 um))^4)"
HARMONIC = "V(x, y, z) = m/2*(2*pi*100 Hz)^2*(x^2 + y^2 + z^2)"


def held(place):
    lab = eoscore.loads(f"gas g {{ isotope Sr-84 }}\ntrap t {{ {place}\n levels exact }}")
    return lab["g"].held_in(lab["t"])


def test_levels_and_sums(benchmark):
    number = iter(range(100_000, 200_000))  # no result is kept: each round has a trap of its own
    assert benchmark(lambda: held(QUARTIC.replace("2e-31", f"{next(number)}e-36")).T_c(N=1e5)) > 0


def test_fixed_number(benchmark):
    trap = held(HARMONIC)
    assert benchmark(lambda: condensate_statistics(trap, 10_000, 5e-8).mean) > 0
