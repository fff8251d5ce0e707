"""Grids: a million states, a trap over its power, what sharing and asking cost beside the engine itself."""

from __future__ import annotations

import time

import eoscore
from eoscore.show.dataset import write_netcdf

BOWL = """
gas strontium { m = 84 u }
trap bowl {
    f = 100 Hz
    V(x, y, z) = m/2*(2*pi*f)^2*(x^2 + y^2 + 4*z^2)
}
"""
STATES = (
    "find f_0, mu for strontium in bowl over N = geometric(1e4, 1e6, {n}), T = even(20 nK, 500 nK, {n})\n"
)
POWERS = "find T_c for strontium in bowl with N = 1e5 over f = even(50 Hz, 90 Hz, 1000)\n"


def seconds(work):
    begin = time.perf_counter()
    work()
    return time.perf_counter() - begin


def test_a_million_states_written_to_netcdf(benchmark, tmp_path):
    def run():
        (answer,) = eoscore.loads(BOWL + STATES.format(n=1000)).answers()
        write_netcdf(answer, tmp_path / "scan.nc")

    benchmark.pedantic(run, rounds=1)


def test_a_thousand_traps(benchmark):
    benchmark.pedantic(lambda: eoscore.loads(BOWL + POWERS).answers(), rounds=1)


def test_a_grid_beside_the_engine(benchmark):
    text = BOWL + STATES.format(n=500)
    (answer,) = benchmark.pedantic(lambda: eoscore.loads(text).answers(), rounds=3)
    lab = eoscore.loads(text)
    held = lab["strontium"].held_in(lab["bowl"])
    given = {"N": answer.over["N"][:, None], "T": answer.over["T"]}
    engine = min(seconds(lambda: held.find(("f_0", "mu"), given)) for _ in range(3))
    benchmark.extra_info["times the engine alone"] = benchmark.stats.stats.min / engine


def test_two_workers_beside_one(benchmark):
    text = BOWL + STATES.format(n=2000)
    one = seconds(lambda: eoscore.loads(text).answers())
    benchmark.pedantic(lambda: eoscore.loads(text).answers(workers=2), rounds=1)
    benchmark.extra_info["times faster than one"] = one / benchmark.stats.stats.min
