"""What `run` adds for grids: its options, and the help of workers, a cluster, kept chunks and a progress bar."""

from __future__ import annotations

import sys
from contextlib import contextmanager
from pathlib import Path
from typing import TYPE_CHECKING, Any, TypeVar

import click

if TYPE_CHECKING:
    from collections.abc import Callable, Iterator

    from eoscore.answer.lab import Lab
    from eoscore.answer.running import Run
    from eoscore.cli.keeping import Kept
    from eoscore.cli.run import Asked

__all__ = ["grid_options", "grid_run"]

_F = TypeVar("_F", bound="Callable[..., Any]")


def grid_options(function: _F) -> _F:
    """The options that only grids need."""
    workers = click.option(
        "--workers", type=click.IntRange(1), default=1, show_default=True, help="Processes that share a grid."
    )
    cluster = click.option(
        "--cluster", metavar="ADDRESS", help="A dask.distributed scheduler that shares a grid."
    )
    plot = click.option(
        "--plot",
        type=click.Path(path_type=Path),
        callback=_drawable,
        metavar="FILE",
        help="Draw grids over one or two names to FILE.png, FILE.svg or FILE.pdf.",
    )
    return workers(cluster(plot(function)))


@contextmanager
def grid_run(lab: Lab, asked: Asked, kept: Kept) -> Iterator[Run]:
    """The run of a lab's questions with all the help that was asked for."""
    from eoscore.cli.cluster import cluster_at
    from eoscore.show.progress import progress_on

    grids = any(question.over for question in lab.program.questions)
    with (
        cluster_at(asked.cluster if grids else None) as executor,
        progress_on(sys.stderr) as progress,
        lab.answering(
            workers=asked.workers, executor=executor, keep=kept.path if grids else None, progress=progress
        ) as run,
    ):
        kept.begin(run)
        yield run


def _drawable(_context: click.Context, _parameter: click.Parameter, target: Path | None) -> Path | None:
    if target is not None:
        from eoscore.show.plotting import undrawable

        if reason := undrawable(target):
            raise click.BadParameter(reason)
    return target
