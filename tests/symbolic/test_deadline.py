"""The time limit interrupts pure Python work and leaves no trace behind."""

import time

import pytest

from eoscore.symbolic.deadline import OutOfTimeError, deadline


def _busy(seconds: float) -> None:
    end = time.perf_counter() + seconds
    while time.perf_counter() < end:
        sum(range(100))


def test_work_past_the_limit_is_interrupted():
    started = time.perf_counter()
    with pytest.raises(OutOfTimeError), deadline(0.05):
        _busy(20)
    assert time.perf_counter() - started < 10


def test_work_within_the_limit_goes_on_undisturbed():
    with deadline(0.2):
        value = sum(range(10))
    _busy(0.4)
    assert value == 45


def _swallowing() -> None:
    try:
        _busy(20)
    except Exception:  # noqa: BLE001 - this is what is tested
        pytest.fail("swallowed")


def test_a_library_that_swallows_exceptions_does_not_swallow_the_limit():
    with pytest.raises(OutOfTimeError), deadline(0.05):
        _swallowing()


class _Dying:
    def __del__(self):
        _busy(0.2)


def _outliving() -> None:
    _Dying()
    _busy(20)


@pytest.mark.filterwarnings("ignore::pytest.PytestUnraisableExceptionWarning")
def test_a_limit_that_is_lost_at_the_end_of_an_object_comes_again(monkeypatch):
    """Python prints and drops what is raised in `__del__`."""
    monkeypatch.setattr("eoscore.symbolic.deadline.AGAIN", 0.3)
    started = time.perf_counter()
    with pytest.raises(OutOfTimeError), deadline(0.05):
        _outliving()
    assert time.perf_counter() - started < 10
