"""The exit statuses of the command, and what is said when something stops it."""

from __future__ import annotations

import os
import sys
from typing import IO, TYPE_CHECKING

import click

from eoscore.errors import EoscoreError

if TYPE_CHECKING:
    from collections.abc import Callable

__all__ = ["ANSWERED", "FAULTY", "INACCURATE", "MISUSED", "guarded"]

ANSWERED = 0  # every question was answered, be it in words
FAULTY = 1  # the file or its questions are at fault
MISUSED = 2  # wrong use of the command
INACCURATE = 3  # an answer could not reach the accuracy wanted
INTERRUPTED = 130  # 128 + SIGINT, as a shell reports it
READER_LEFT = 141  # 128 + SIGPIPE


def guarded(run: Callable[[], int]) -> int:
    """Run the command and turn whatever stops it into a calm line and an exit status; never a traceback."""
    try:
        status = run()
        sys.stdout.flush()
    except click.ClickException as fault:
        fault.show()
        return fault.exit_code
    except (KeyboardInterrupt, click.Abort):
        return _say("interrupted", INTERRUPTED)
    except BrokenPipeError:
        _silence(sys.stdout)
        return READER_LEFT
    except OSError as fault:
        return _say(str(fault), MISUSED)
    except EoscoreError as fault:
        return _say(str(fault), FAULTY)
    except MemoryError:
        return _say("the question needs more memory than there is; ask for fewer points", FAULTY)
    except Exception as fault:  # noqa: BLE001  the last resort: whatever it is, no traceback reaches a user
        return _say(internal_fault(fault), FAULTY)
    return status


def internal_fault(fault: Exception) -> str:
    """The sentence for a fault of our own."""
    return (
        f"eoscore itself failed ({type(fault).__name__}: {fault}); this is a bug in eoscore, please report it"
    )


def _say(sentence: str, status: int) -> int:
    click.echo(f"eoscore: {sentence}", err=True)
    return status


def _silence(stream: IO[str]) -> None:
    """Point a stream whose reader has gone at nothing, so that the interpreter's last flush is quiet too."""
    nothing = os.open(os.devnull, os.O_WRONLY)
    os.dup2(nothing, stream.fileno())
    os.close(nothing)
