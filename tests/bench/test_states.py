"""Many states at once, in processor seconds: a harmonic trap in closed form, and a trap known by its nodes."""

import time

import numpy as np
import pytest

import eoscore

TEXT = """
gas probe { isotope Rb-87 }
trap bowl { V(x, y, z) = m/2 * (2*pi*100 Hz)^2 * (x^2 + y^2 + z^2) }
trap bent { V(x, y, z) = m/2 * (2*pi*100 Hz)^2 * (x^2 + y^2 + z^2) + 1e-12 J/m4 * x^4 }
"""


@pytest.mark.benchmark(group="states")
@pytest.mark.parametrize(("trap", "states", "most"), [("bowl", 1_000_000, 2.0), ("bent", 100_000, 2.0)])
def test_states_from_number_and_temperature(benchmark, trap, states, most):
    """f_0 and mu of 10^6 harmonic states in 2 s, of a compiled trap in 20 us each."""
    lab = eoscore.loads(TEXT)
    held = lab["probe"].held_in(lab[trap])
    rng = np.random.default_rng(7)
    number, T = 10 ** rng.uniform(4, 6, states), 210e-9 * rng.uniform(0.1, 3, states)
    held.state(N=number[:100], T=T[:100])  # compile

    def run():
        start = time.process_time()
        state = held.state(N=number, T=T)
        _ = state.f_0
        return time.process_time() - start

    seconds = benchmark.pedantic(run, rounds=1)
    assert seconds < most
