"""A cold `eoscore run`, beside the mere import of the packages that it uses."""

from __future__ import annotations

import subprocess
import sys
import time

import pytest

HARMONIC = """
gas strontium { isotope Sr-84 }
trap bowl { f = 100 Hz
    V(x, y, z) = m/2*(2*pi*f)^2*(x^2 + y^2 + 4*z^2) }
find T_c for strontium in bowl with N = 1e5
find f_0, mu, S for strontium in bowl with N = 1e5, T = 100 nK
"""
IMPORTS = "import click, lark, numpy, scipy.constants, scipy.special, rich.console, rich.table"
ROUNDS = 7


def seconds(*arguments):
    start = time.perf_counter()
    subprocess.run([sys.executable, *arguments], check=True, stdout=subprocess.DEVNULL)
    return time.perf_counter() - start


def test_cold_run_of_a_harmonic_file(benchmark, tmp_path):
    path = tmp_path / "bowl.tarn"
    path.write_text(HARMONIC)
    # Taken in turns, so that a busy machine slows both alike.
    imports = min(seconds("-c", IMPORTS) for _ in range(ROUNDS))
    benchmark.pedantic(seconds, args=("-m", "eoscore", "run", str(path)), rounds=ROUNDS, warmup_rounds=1)
    benchmark.extra_info["imports alone"] = imports
    benchmark.extra_info["ratio"] = ratio = benchmark.stats.stats.min / imports
    assert ratio <= 1.3


def test_import_of_the_front_door(benchmark):
    code = "import eoscore"
    benchmark.pedantic(seconds, args=("-c", code), rounds=ROUNDS, warmup_rounds=1)
    bare = min(seconds("-c", "pass") for _ in range(ROUNDS))
    assert benchmark.stats.stats.min <= bare + 0.05


@pytest.mark.parametrize(
    "package", ["sympy", "pint", "periodictable", "uncertainties", "matplotlib", "xarray"]
)
def test_what_a_harmonic_run_does_not_need_stays_out(tmp_path, package, benchmark):
    path = tmp_path / "bowl.tarn"
    path.write_text(HARMONIC.replace("isotope Sr-84", "m = 84 u"))
    code = (
        "import sys; from eoscore.cli import command;"
        f"command.main(['run', {str(path)!r}], standalone_mode=False);"
        f"sys.exit({package!r} in sys.modules)"
    )
    benchmark.pedantic(seconds, args=("-c", code), rounds=1)
