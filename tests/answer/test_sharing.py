"""Pieces of a grid become the whole again."""

from __future__ import annotations

from concurrent.futures import ThreadPoolExecutor

import numpy as np
import pytest

import eoscore

TEXT = """
gas strontium { m = 84 u }
trap bowl {
    f = 100(2) Hz
    V(x, y, z) = m/2*(2*pi*f)^2*(x^2 + y^2 + 4*z^2)
}
find T_c, freq for strontium in bowl over f = even(50 Hz, 90 Hz, 9), N = [1e4, 1e5, 1e6]
find mu, kappa_T, f_0 for strontium in bowl with N = 1e5 over T = even(50 nK, 800 nK, 16)
find T_c for strontium in bowl with N = 1.0(1)e5
"""


@pytest.fixture(scope="module")
def lab():
    return eoscore.loads(TEXT)


def test_shared_grids_are_the_same_to_the_last_bit(lab):
    with ThreadPoolExecutor(2) as executor:
        shared = lab.answers(executor=executor)
    for one, other in zip(lab.answers(), shared, strict=True):
        assert list(one.over) == list(other.over)
        for name, finding in one.found.items():
            again = other.found[name]
            np.testing.assert_array_equal(finding.value, again.value)
            assert finding.reasons == again.reasons
            assert finding.budget.keys() == again.budget.keys()


def test_reasons_keep_their_points(lab):
    with ThreadPoolExecutor(2) as executor:
        shared = lab.answers(executor=executor)[1]
    (reason,) = shared.found["kappa_T"].reasons
    missing = np.argwhere(np.isnan(shared.found["kappa_T"].value))
    assert [tuple(point) for point in missing.tolist()] == list(reason.points)


def test_worker_processes_read_the_text_again(lab):
    (first, *_) = lab.answers(workers=2)
    np.testing.assert_array_equal(first.found["T_c"].value, lab.answers()[0].found["T_c"].value)
