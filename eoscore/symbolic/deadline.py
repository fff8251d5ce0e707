"""A time limit for symbolic work: SymPy may run away, a question may not."""

from __future__ import annotations

import ctypes
import threading
from contextlib import contextmanager
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Iterator

__all__ = ["OutOfTimeError", "deadline"]


class OutOfTimeError(BaseException):
    """The time allowed is over. Not an `Exception`, so that no library's own `except Exception` swallows it."""


@contextmanager
def deadline(seconds: float) -> Iterator[None]:
    """Raise `OutOfTimeError` in the calling thread once `seconds` have passed within the block.

    Works in any thread and on any system, which signals do not. SymPy is pure Python, so the error arrives
    between two of its steps.
    """
    lock, over = threading.Lock(), False
    thread = ctypes.c_ulong(threading.get_ident())

    def interrupt() -> None:
        with lock:
            if not over:
                ctypes.pythonapi.PyThreadState_SetAsyncExc(thread, ctypes.py_object(OutOfTimeError))

    timer = threading.Timer(seconds, interrupt)
    timer.daemon = True
    timer.start()
    try:
        yield
    finally:
        with lock:
            over = True
        timer.cancel()
