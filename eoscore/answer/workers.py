"""Worker processes of this machine: replaced where they die, gone when they are no longer wanted."""

from __future__ import annotations

import multiprocessing
import os
import signal
import threading
from concurrent.futures import BrokenExecutor, ProcessPoolExecutor
from contextlib import contextmanager
from multiprocessing import resource_tracker
from typing import TYPE_CHECKING, Self

from eoscore.errors import EoscoreError

if TYPE_CHECKING:
    from collections.abc import Iterator
    from types import TracebackType

__all__ = ["Crew", "WorkersLostError"]

_MOST = 3  # crews that may die, one after the other, without an answer to any chunk


class WorkersLostError(EoscoreError, RuntimeError):
    """Worker processes died, and those that took their place died too."""

    def __init__(self) -> None:
        super().__init__(
            "worker processes died, and so did those that took their place; if memory is short, fewer workers "
            "need less of it"
        )


class Crew:
    """A context in which `executor` shares work among fresh processes, started when first asked for.

    They are spawned, not forked: they share neither locks nor open files with this process. Where the context ends
    by an exception, such as Ctrl-C, the work in hand is given up at once.
    """

    def __init__(self, count: int) -> None:
        self.count = count
        self._others = set(multiprocessing.active_children())
        self._executor: ProcessPoolExecutor | None = None
        self._lost = 0

    @property
    def executor(self) -> ProcessPoolExecutor:
        """The processes at work."""
        if self._executor is None:
            context = multiprocessing.get_context("spawn")
            self._executor = ProcessPoolExecutor(self.count, context, _begin)
            try:
                with _interrupts_held_back():
                    for _ in range(self.count):  # each starts one
                        self._executor.submit(os.getpid)
            except OSError as closed:  # one was killed while the next was begun
                message = "a worker died while the others were begun"
                raise BrokenExecutor(message) from closed
        return self._executor

    def replace(self, *, useful: bool) -> None:
        """New processes for those of which one died; `useful`: whether they gave an answer before.

        Raises
        ------
        WorkersLostError
            Where this has happened several times without an answer in between.
        """
        self._lost = 1 if useful else self._lost + 1
        self._leave()
        if self._lost == _MOST:
            raise WorkersLostError

    def _leave(self) -> None:
        if self._executor is not None:
            self._executor.shutdown(wait=False, cancel_futures=True)
            for child in set(multiprocessing.active_children()) - self._others:
                child.terminate()
        self._executor = None

    def __enter__(self) -> Self:
        return self

    def __exit__(
        self, kind: type[BaseException] | None, fault: BaseException | None, trace: TracebackType | None
    ) -> None:
        if kind is None and self._executor is not None:
            self._executor.shutdown()
        self._leave()


@contextmanager
def _interrupts_held_back() -> Iterator[None]:
    """Processes that are started here leave Ctrl-C to this one from their first moment; it comes through afterwards."""
    if not hasattr(signal, "pthread_sigmask"):  # not on Windows
        yield
        return
    resource_tracker.ensure_running()  # it would let them through again when it starts
    before = signal.pthread_sigmask(signal.SIG_BLOCK, {signal.SIGINT})
    try:
        yield
    finally:
        signal.pthread_sigmask(signal.SIG_SETMASK, before)


def _begin() -> None:
    """Leave Ctrl-C to the parent, and end with it, even if it is killed."""
    signal.signal(signal.SIGINT, signal.SIG_IGN)
    threading.Thread(target=_end_with_parent, daemon=True).start()


def _end_with_parent() -> None:
    parent = multiprocessing.parent_process()
    if parent is not None:
        parent.join()
        os._exit(1)
