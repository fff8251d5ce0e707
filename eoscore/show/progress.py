"""A bar on the terminal for runs that take longer than a second, with the time that remains."""

from __future__ import annotations

import threading
from contextlib import contextmanager
from typing import IO, TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Callable, Iterator

    from rich.progress import Progress

__all__ = ["progress_on"]

_PATIENCE = 1.0  # seconds that nobody minds waiting without a word


@contextmanager
def progress_on(stream: IO[str]) -> Iterator[Callable[[int, int], None] | None]:
    """A function that is told the points done and all of them; None where the stream is no terminal.

    The bar vanishes at the end.
    """
    if not stream.isatty():
        yield None
        return
    bar = _Bar(stream)
    try:
        yield bar.tell
    finally:
        bar.stop()


class _Bar:
    """Hidden until it is due; told by the run, shown by a timer."""

    def __init__(self, stream: IO[str]) -> None:
        self._stream = stream
        self._lock = threading.Lock()
        self._done, self._all = 0, 1
        self._bar: Progress | None = None
        self._timer = threading.Timer(_PATIENCE, self._show)
        self._timer.daemon = True
        self._timer.start()

    def tell(self, done: int, every: int) -> None:
        with self._lock:
            self._done, self._all = done, every
            if self._bar is not None:
                self._bar.update(self._bar.task_ids[0], completed=done, total=every)

    def stop(self) -> None:
        self._timer.cancel()
        with self._lock:
            if self._bar is not None:
                self._bar.stop()
            self._done = self._all  # a timer that is late shows nothing

    def _show(self) -> None:
        from rich.console import Console
        from rich.progress import BarColumn, MofNCompleteColumn, Progress, TextColumn, TimeRemainingColumn

        with self._lock:
            if self._done == self._all:
                return
            look = (
                TextColumn("points"),
                BarColumn(style="bright_black", complete_style="default", finished_style="default"),
                MofNCompleteColumn(),
                TextColumn("remaining"),
                TimeRemainingColumn(),
            )
            self._bar = Progress(*look, console=Console(file=self._stream), transient=True)
            self._bar.add_task("", completed=self._done, total=self._all)
            self._bar.start()
