"""`--cluster`: a scheduler and its workers in processes of their own, and addresses where there is none."""

from __future__ import annotations

import json
import socket
import subprocess
import sys
import time

import pytest

from eoscore.cli import cluster
from eoscore.cli.cluster import cluster_at

pytest.importorskip("distributed")

TEXT = """
gas strontium { m = 84 u }
trap bowl { V(x, y, z) = m/2*(2*pi*100 Hz)^2*(x^2 + y^2 + 4*z^2) }
find f_0, mu for strontium in bowl over N = geometric(1e4, 1e6, 300), T = even(20 nK, 500 nK, 400)
"""
RUN = (sys.executable, "-m", "eoscore", "run", "scan.tarn", "--out")


@pytest.fixture
def address(tmp_path):
    """The address of a scheduler with two workers."""
    where, dask = tmp_path / "scheduler.json", (sys.executable, "-m", "dask")
    told = ("--scheduler-file", str(where), "--no-dashboard")
    quiet = {"cwd": tmp_path, "stdout": subprocess.DEVNULL, "stderr": subprocess.DEVNULL}
    scheduler = subprocess.Popen([*dask, "scheduler", "--host", "127.0.0.1", "--port", "0", *told], **quiet)
    workers = subprocess.Popen(
        [*dask, "worker", *told, "--nworkers", "2", "--nthreads", "1", "--memory-limit", "0"], **quiet
    )
    try:
        while not where.exists() and scheduler.poll() is None:
            time.sleep(0.05)
        yield json.loads(where.read_text())["address"]
    finally:
        for process in (workers, scheduler):
            process.terminate()
            process.wait(timeout=30)


def test_a_scheduler_with_two_workers_gives_the_same_bits(address, tmp_path):
    (tmp_path / "scan.tarn").write_text(TEXT)
    for name, options in (("alone.csv", ()), ("shared.csv", ("--cluster", address))):
        subprocess.run([*RUN, name, *options], cwd=tmp_path, check=True, capture_output=True, timeout=120)
    assert (tmp_path / "shared.csv").read_bytes() == (tmp_path / "alone.csv").read_bytes()


@pytest.fixture
def silent():
    """The address of somebody who listens and never answers."""
    with socket.create_server(("127.0.0.1", 0)) as server:
        yield f"tcp://127.0.0.1:{server.getsockname()[1]}"


@pytest.mark.parametrize(
    ("wrong", "reason"),
    [("nonsense", "missing port"), ("foo://127.0.0.1:8786", "unknown address scheme")],
)
def test_what_is_no_address_is_told_at_once(wrong, reason):
    with pytest.raises(Exception, match=f"no scheduler answers at '{wrong}' \\({reason}"), cluster_at(wrong):
        pass


def test_an_address_without_a_scheduler_is_told_in_seconds(silent, monkeypatch):
    monkeypatch.setattr(cluster, "_PATIENCE", 0.3)
    with (
        pytest.raises(Exception, match=r"waited for 0.3 s\); `dask scheduler` starts one"),
        cluster_at(silent),
    ):
        pass
