"""A cold `eoscore run`, beside the mere import of the packages that eoscore depends on."""

from __future__ import annotations

import os
import subprocess
import sys
import time

import pytest

HARMONIC = """
gas strontium { m = 83.9134191 u }
trap bowl { f = 100 Hz
    V(x, y, z) = m/2*(2*pi*f)^2*(x^2 + y^2 + 4*z^2) }
find T_c for strontium in bowl with N = 1e5
find f_0, mu, S for strontium in bowl with N = 1e5, T = 100 nK
"""
# The run-time dependencies of pyproject.toml, and those among them that this run cannot do without.
ALL = "import click, lark, numpy, periodictable, pint, rich, scipy.constants, scipy.special, sympy, uncertainties"
NEEDED = "import click, lark, numpy, rich.console, rich.table, scipy.constants, scipy.special"
LAZY = ("sympy", "pint", "periodictable", "uncertainties", "matplotlib", "xarray", "scipy.optimize")
ROUNDS = 7


@pytest.fixture(scope="module")
def seconds(tmp_path_factory):
    """Time of a fresh interpreter; compiled files are kept, as they are after an installation."""
    folder = tmp_path_factory.mktemp("kept")
    kept = {"PYTHONPYCACHEPREFIX": str(folder / "compiled"), "XDG_CACHE_HOME": str(folder / "cache")}
    environment = {key: value for key, value in os.environ.items() if key != "PYTHONDONTWRITEBYTECODE"} | kept

    def run(*arguments):
        start = time.perf_counter()
        subprocess.run([sys.executable, *arguments], check=True, stdout=subprocess.DEVNULL, env=environment)
        return time.perf_counter() - start

    return run


@pytest.fixture
def bowl(tmp_path):
    path = tmp_path / "bowl.tarn"
    path.write_text(HARMONIC)
    return str(path)


def test_cold_run_of_a_harmonic_file(benchmark, seconds, bowl):
    for code in (ALL, NEEDED):
        seconds("-c", code)
    every, needed = (min(seconds("-c", code) for _ in range(ROUNDS)) for code in (ALL, NEEDED))
    benchmark.pedantic(seconds, args=("-m", "eoscore", "run", bowl), rounds=ROUNDS, warmup_rounds=1)
    least = benchmark.stats.stats.min
    benchmark.extra_info["ratio to all dependencies"] = least / every
    benchmark.extra_info["ratio to the needed ones"] = least / needed
    assert least <= 1.3 * every


def test_import_of_the_front_door(benchmark, seconds):
    seconds("-c", "pass")
    bare = min(seconds("-c", "pass") for _ in range(ROUNDS))
    benchmark.pedantic(seconds, args=("-c", "import eoscore"), rounds=ROUNDS, warmup_rounds=1)
    assert benchmark.stats.stats.min <= bare + 0.05


@pytest.mark.parametrize("package", LAZY)
def test_what_a_harmonic_run_does_not_need_stays_out(benchmark, seconds, bowl, package):
    code = (
        "import sys; from eoscore.cli import command;"
        f"command.main(['run', {bowl!r}], standalone_mode=False);"
        f"sys.exit({package!r} in sys.modules)"
    )
    benchmark.pedantic(seconds, args=("-c", code), rounds=1)
