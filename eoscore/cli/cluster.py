"""`--cluster ADDRESS`: chunks of grids go to a scheduler of dask.distributed (extra `cluster`)."""

from __future__ import annotations

from contextlib import contextmanager
from typing import TYPE_CHECKING, Any

import click

from eoscore.errors import EoscoreError

if TYPE_CHECKING:
    from collections.abc import Iterator
    from concurrent.futures import Executor

__all__ = ["ClusterError", "cluster_at", "is_of_cluster"]

_PATIENCE = 5.0  # seconds in which a scheduler answers


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
    about = _scheduler_at(address)
    with Client(address, timeout=_PATIENCE, set_as_default=False) as client:
        if not about["workers"]:
            click.echo(f"eoscore: the scheduler at {address} has no workers yet; waiting for one", err=True)
        yield client.get_executor()


def _scheduler_at(address: str) -> dict[str, Any]:
    """What the scheduler tells about itself: a client would go on knocking at a wrong address for long."""
    import asyncio

    from distributed.core import rpc
    from distributed.security import Security

    async def ask() -> dict[str, Any]:
        how = Security().get_connection_args("client")
        async with rpc(address, timeout=_PATIENCE, connection_args=how) as scheduler:
            about: dict[str, Any] = await scheduler.identity()
            return about

    try:
        return asyncio.run(asyncio.wait_for(ask(), _PATIENCE))
    except TimeoutError:
        reason = f"waited for {_PATIENCE:g} s"
    except MemoryError:  # dask takes the first bytes of any answer for a length
        reason = "what answers there is no scheduler"
    except Exception as fault:  # noqa: BLE001  whoever listens there may answer with anything
        reason = str(fault) or type(fault).__name__
    message = (
        f"no scheduler answers at {address!r} ({reason}); `dask scheduler` starts one and tells its address, such "
        "as tcp://10.0.0.7:8786."
    )
    raise click.BadParameter(message, param_hint="--cluster")


def is_of_cluster(fault: Exception) -> bool:
    """Whether a cluster raised this, and not the question."""
    return type(fault).__module__.partition(".")[0] == "distributed"
