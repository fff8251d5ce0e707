"""A time limit for symbolic work: SymPy may run away, a question may not."""

from __future__ import annotations

import ctypes
import threading
from contextlib import contextmanager
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Iterator

__all__ = ["OutOfTimeError", "deadline"]

AGAIN = 1.0  # s from an error that was lost to the next


class OutOfTimeError(BaseException):
    """The time allowed is over. Not an `Exception`, so that no library's own `except Exception` swallows it."""


@contextmanager
def deadline(seconds: float) -> Iterator[None]:
    """Raise `OutOfTimeError` in the calling thread once `seconds` have passed within the block.

    Works in any thread and on any system, which signals do not. SymPy is pure Python, so the error arrives
    between two of its steps; where that is a step in which Python ignores errors, such as the end of an object,
    it comes again.
    """
    lock, done = threading.Lock(), threading.Event()
    thread = ctypes.c_ulong(threading.get_ident())
    raise_in = ctypes.pythonapi.PyThreadState_SetAsyncExc

    def interrupt() -> None:
        wait = seconds
        while not done.wait(wait):
            with lock:
                if not done.is_set():
                    raise_in(thread, ctypes.py_object(OutOfTimeError))
            wait = AGAIN

    threading.Thread(target=interrupt, daemon=True).start()
    try:
        yield
    finally:
        with lock:
            done.set()
            raise_in(thread, None)  # takes back an error that has not arrived yet
