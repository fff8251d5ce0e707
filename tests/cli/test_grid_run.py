"""Grids that are interrupted, shared or drawn: nothing is lost, and every way gives the same bits."""

from __future__ import annotations

import resource
import subprocess
import sys
import time
from contextlib import nullcontext

import numpy as np
import pytest

from eoscore.cli import main
from eoscore.show import progress

TEXT = """
gas strontium { m = 84 u }
trap bowl {
    f = 100 Hz
    V(x, y, z) = m/2*(2*pi*f)^2*(x^2 + y^2 + 4*z^2)
}
find f_0, mu, kappa_T for strontium in bowl over N = geometric(1e4, 1e6, 450), T = even(20 nK, 500 nK, 450)
"""
COMMAND = (sys.executable, "-m", "eoscore", "run", "scan.tarn", "--out")


@pytest.fixture(scope="module")
def reference(tmp_path_factory):
    """The output of a run that nobody disturbed, and the seconds it took."""
    folder = tmp_path_factory.mktemp("whole")
    (folder / "scan.tarn").write_text(TEXT)
    begin = time.monotonic()
    subprocess.run([*COMMAND, "scan.nc"], cwd=folder, check=True, capture_output=True)
    return (folder / "scan.nc").read_bytes(), time.monotonic() - begin


@pytest.fixture
def folder(tmp_path):
    (tmp_path / "scan.tarn").write_text(TEXT)
    return tmp_path


def finish(folder, *options):
    shown = subprocess.run(
        [*COMMAND, "scan.nc", *options], cwd=folder, capture_output=True, text=True, check=False
    )
    assert shown.returncode == 0, shown.stderr
    assert [path.name for path in sorted(folder.iterdir())] == ["scan.nc", "scan.tarn"]
    return (folder / "scan.nc").read_bytes(), shown.stderr


def killed(folder, after, *options):
    """Start a run and kill it some seconds later."""
    process = subprocess.Popen([*COMMAND, "scan.nc", *options], cwd=folder, stderr=subprocess.DEVNULL)
    time.sleep(after)
    process.kill()
    process.wait(timeout=60)


@pytest.fixture
def interrupted(folder, monkeypatch, capsys):
    """What a run says that gets Ctrl-C after its third chunk."""
    told = []

    def tell(done, _every):
        told.append(done)
        if len(told) > 3:
            raise KeyboardInterrupt

    with monkeypatch.context() as patch:
        patch.chdir(folder)
        patch.setattr(progress, "progress_on", lambda _stream: nullcontext(tell))
        patch.setattr(sys, "argv", ["eoscore", *COMMAND[3:], "scan.nc"])
        with pytest.raises(SystemExit, match="130"):
            main()
    return capsys.readouterr().err


@pytest.mark.parametrize(("seed", "workers"), [(0, ()), (3, ("--workers", "2"))])
def test_a_run_that_is_killed_goes_on_to_the_same_bits(folder, reference, seed, workers):
    """With processes of its own; `test_killed_runs.py` kills more often, and cheaply."""
    whole, seconds = reference
    killed(folder, np.random.default_rng(seed).uniform(0.3, 1.1) * seconds, *workers)
    assert finish(folder)[0] == whole


def test_ctrl_c_says_what_is_kept_and_the_next_run_says_that_it_goes_on(folder, reference, interrupted):
    assert "3 of 7 chunks are kept in .scan.nc.chunks; the same command goes on from there" in interrupted
    output, said = finish(folder)
    assert "going on from 3 of 7 chunks" in said
    assert output == reference[0]


def test_a_full_disk_is_told_and_room_lets_the_run_go_on(folder, reference):
    def small_disk():
        resource.setrlimit(resource.RLIMIT_FSIZE, (3_000_000, 3_000_000))

    shown = subprocess.run(
        [*COMMAND, "scan.nc"], cwd=folder, capture_output=True, text=True, check=False, preexec_fn=small_disk
    )
    assert shown.returncode == 2
    assert "File too large" in shown.stderr
    assert "are kept in .scan.nc.chunks" in shown.stderr
    assert not (folder / "scan.nc").exists()
    assert finish(folder)[0] == reference[0]


@pytest.mark.usefixtures("interrupted")
def test_chunks_of_another_question_are_not_used(folder):
    (folder / "scan.tarn").write_text(TEXT.replace("450)", "20)"))
    assert "they are not used" in finish(folder)[1]


def test_what_cannot_be_drawn_is_told_before_anything_is_computed(folder, capsys, monkeypatch):
    (folder / "scan.tarn").write_text(TEXT.replace("over N", "over f = [90 Hz, 100 Hz], N"))
    monkeypatch.chdir(folder)
    monkeypatch.setattr(sys, "argv", ["eoscore", *COMMAND[3:], "scan.nc", "--plot", "scan.png"])
    with pytest.raises(SystemExit, match="1"):
        main()
    assert "nothing to draw" in capsys.readouterr().err
    assert [path.name for path in folder.iterdir()] == ["scan.tarn"]
