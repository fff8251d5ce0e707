"""Workers that die, and a cluster."""

from __future__ import annotations

import multiprocessing
import os
import signal
import threading
import time
from concurrent.futures import ProcessPoolExecutor

import numpy as np
import pytest

import eoscore
from eoscore.answer.workers import Crew, WorkersLostError

TEXT = """
gas strontium { m = 84 u }
trap bowl {
    f = 100 Hz
    V(x, y, z) = m/2*(2*pi*f)^2*(x^2 + y^2 + 4*z^2)
}
find f_0, mu for strontium in bowl over N = geometric(1e4, 1e6, 300), T = even(20 nK, 500 nK, 400)
"""


@pytest.fixture(scope="module")
def whole():
    (answer,) = eoscore.loads(TEXT).answers()
    return answer


def same(one, other):
    for name, finding in one.found.items():
        assert finding.value.tobytes() == other.found[name].value.tobytes()
        assert finding.error.tobytes() == other.found[name].error.tobytes()
    assert one.cautions == other.cautions


def test_a_worker_that_is_killed_is_replaced(whole):
    def kill_one():
        while not (children := multiprocessing.active_children()):
            time.sleep(0.01)
        os.kill(children[0].pid, signal.SIGKILL)

    killer = threading.Thread(target=kill_one)
    killer.start()
    (answer,) = eoscore.loads(TEXT).answers(workers=2)
    killer.join()
    same(whole, answer)


def test_workers_are_replaced_when_a_pipe_closes_while_they_begin(whole, monkeypatch):
    """As it does where one is killed just before the next is started."""
    submit, calls = ProcessPoolExecutor.submit, []

    def closed_once(self, *args):
        calls.append(args)
        if len(calls) == 2:
            message = "handle is closed"
            raise OSError(message)
        return submit(self, *args)

    monkeypatch.setattr(ProcessPoolExecutor, "submit", closed_once)
    (answer,) = eoscore.loads(TEXT).answers(workers=2)
    same(whole, answer)


def test_a_worker_leaves_ctrl_c_to_its_parent_from_its_first_moment():
    with Crew(2) as crew:
        executor, children = crew.executor, multiprocessing.active_children()
        for child in children:
            os.kill(child.pid, signal.SIGINT)
        assert executor.submit(os.getpid).result(timeout=60) in {child.pid for child in children}


def test_workers_that_always_die_are_told():
    crew = Crew(2)
    crew.replace(useful=True)
    crew.replace(useful=False)
    with pytest.raises(WorkersLostError, match="fewer workers need less"):
        crew.replace(useful=False)


@pytest.mark.filterwarnings("ignore")
def test_a_dask_scheduler_with_two_workers_gives_the_same_bits(whole):
    distributed = pytest.importorskip("distributed")
    cluster = distributed.LocalCluster(
        n_workers=2, threads_per_worker=1, processes=False, dashboard_address=None, silence_logs=50
    )
    with cluster, distributed.Client(cluster) as client:
        (answer,) = eoscore.loads(TEXT).answers(executor=client.get_executor())
    same(whole, answer)
    np.testing.assert_array_equal(answer.over["N"], whole.over["N"])
