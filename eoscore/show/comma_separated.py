"""CSV: `#` lines that say where it comes from, one header row of `NAME (unit)`, a row per point."""

from __future__ import annotations

import csv
from typing import TYPE_CHECKING

import numpy as np

from eoscore.show.grid_table import Column, grid_columns

if TYPE_CHECKING:
    from collections.abc import Iterator
    from pathlib import Path

    from eoscore.answer.record import FoundAnswer, Report

__all__ = ["write_csv"]


def write_csv(report: Report, answer: FoundAnswer, path: Path) -> None:
    """Write one question's table; SI doubles that round-trip, an empty field where there is no number.

    A quantity with carried uncertainty is followed by a column `sigma NAME (unit)`; where it was sampled, by `low NAME
    (unit)`, `high NAME (unit)` and `answered NAME (1)`, the share of the samples that have an answer.
    """
    columns = list(_with_spread(answer))
    with path.open("w", encoding="utf-8", newline="") as stream:
        for line in _head(report, answer):
            stream.write(f"# {line}\n")
        writer = csv.writer(stream, lineterminator="\n")
        writer.writerow(f"{column.name} ({column.unit})" for column in columns)
        writer.writerows(zip(*(_fields(column) for column in columns), strict=True))


def _head(report: Report, answer: FoundAnswer) -> Iterator[str]:
    from eoscore import __version__

    yield f"file: {report.file}, line {answer.line}"
    yield f"question: {answer.question}"
    yield f"version: eoscore {__version__}"
    for setting in answer.settings:
        yield f"set from outside: {setting}"
    for name, finding in answer.found.items():
        if np.isfinite(finding.value).any():
            yield f"{name} has a relative numerical error of {finding.worst():.1e} at most"
        if (interval := finding.interval) is not None:
            yield f"{name} lies from low to high in {interval.coverage:.2%} of {interval.samples} samples"
        for reason in finding.reasons:
            yield f"{name} has no value at {len(reason.points)} points: {reason.text}"


def _with_spread(answer: FoundAnswer) -> Iterator[Column]:
    for column in grid_columns(answer):
        yield column
        if column.sigma is not None:
            yield Column(f"sigma {column.name}", column.unit, column.sigma)
        if (interval := column.interval) is not None:
            yield Column(f"low {column.name}", column.unit, interval.low)
            yield Column(f"high {column.name}", column.unit, interval.high)
            yield Column(f"answered {column.name}", "1", interval.answered)


def _fields(column: Column) -> list[str]:
    finite = np.isfinite(column.values)
    return [repr(v) if ok else "" for v, ok in zip(column.values.tolist(), finite.tolist(), strict=True)]
