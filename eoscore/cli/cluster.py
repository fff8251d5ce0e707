"""`--cluster ADDRESS`: chunks of grids go to a scheduler of dask.distributed (extra `cluster`)."""

from __future__ import annotations

from contextlib import contextmanager
from typing import TYPE_CHECKING

import click

from eoscore.errors import EoscoreError

if TYPE_CHECKING:
    from collections.abc import Iterator
    from concurrent.futures import Executor

__all__ = ["ClusterError", "cluster_at", "is_of_cluster"]

_PATIENCE = 20.0  # seconds in which a scheduler answers


class ClusterError(EoscoreError, RuntimeError):
    """A cluster lost its scheduler, or workers again and again."""

    def __init__(self, address: str, fault: Exception) -> None:
        self.address = address
        super().__init__(f"the cluster at {address} gave up ({type(fault).__name__}: {fault})")


@contextmanager
def cluster_at(address: str | None) -> Iterator[Executor | None]:
    """The scheduler at an address as an executor; None without an address.

    Raises
    ------
    MissingExtraError
        Where dask.distributed is not installed.
    click.BadParameter
        Where no scheduler answers.
    """
    if address is None:
        yield None
        return
    from eoscore.show.dataset import MissingExtraError

    try:
        from distributed import Client
    except ImportError:
        raise MissingExtraError("dask.distributed", "cluster") from None
    try:
        client = Client(address, timeout=_PATIENCE, set_as_default=False)
    except (OSError, ValueError, TypeError) as fault:
        message = f"no scheduler answers at {address!r} ({fault})."
        raise click.BadParameter(message, param_hint="--cluster") from None
    with client:
        yield client.get_executor()


def is_of_cluster(fault: Exception) -> bool:
    """Whether a cluster raised this, and not the question."""
    return type(fault).__module__.partition(".")[0] == "distributed"
