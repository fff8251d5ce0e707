"""SIGKILL at fifty random moments of a run, in forked children that cost little: the next run ends in the same bits."""

from __future__ import annotations

import os
import signal
import sys
import time

import numpy as np
import pytest

from eoscore.answer import chunk
from eoscore.cli import main

TEXT = """
gas strontium { m = 84 u }
trap bowl { V(x, y, z) = m/2*(2*pi*100 Hz)^2*(x^2 + y^2 + 4*z^2) }
find f_0, mu, kappa_T for strontium in bowl over N = geometric(1e4, 1e6, 80), T = even(20 nK, 500 nK, 50)
"""

pytestmark = pytest.mark.skipif(not hasattr(os, "fork"), reason="wants fork")


@pytest.fixture(scope="module", autouse=True)
def _look():
    """Chunks are small, so that a short run has many."""
    with pytest.MonkeyPatch.context() as patch:
        patch.setattr(chunk, "_STATES", 300)
        patch.setattr(sys, "argv", ["eoscore", "run", "scan.tarn", "--out", "scan.csv"])
        yield


@pytest.fixture(scope="module")
def undisturbed(tmp_path_factory):
    """The output of a run in this process, which imports all that the children then have."""
    folder = tmp_path_factory.mktemp("whole")
    (folder / "scan.tarn").write_text(TEXT)
    with pytest.MonkeyPatch.context() as patch:
        patch.chdir(folder)
        with pytest.raises(SystemExit, match="0"):
            main()
    begin = time.perf_counter()
    output(folder)
    return (folder / "scan.csv").read_bytes(), time.perf_counter() - begin


def started(folder):
    """The process id of a run in a forked child, which says nothing."""
    child = os.fork()
    if child:
        return child
    try:
        os.chdir(folder)
        nothing = os.open(os.devnull, os.O_RDWR)
        for stream in (1, 2):
            os.dup2(nothing, stream)
        sys.stdout = sys.stderr = open(nothing, "w", encoding="utf-8")  # noqa: SIM115, PTH123  in place of pytest's
        main()
    except SystemExit as end:
        os._exit(int(end.code or 0))
    finally:
        os._exit(99)


def status(child):
    return os.waitstatus_to_exitcode(os.waitpid(child, 0)[1])


def output(folder):
    """The output of a run to the end, and that it leaves nothing else behind."""
    assert status(started(folder)) == 0
    assert sorted(path.name for path in folder.iterdir()) == ["scan.csv", "scan.tarn"]
    return (folder / "scan.csv").read_bytes()


@pytest.mark.parametrize("seed", range(50))
def test_a_killed_run_goes_on_to_the_same_bits(tmp_path, undisturbed, seed):
    whole, seconds = undisturbed
    (tmp_path / "scan.tarn").write_text(TEXT)
    child = started(tmp_path)
    time.sleep(np.random.default_rng(seed).uniform(0.0, 1.0) * seconds)
    os.kill(child, signal.SIGKILL)
    assert status(child) in {-signal.SIGKILL, 0}
    assert output(tmp_path) == whole
