"""Answers as calm aligned tables on a terminal, plain text when it is none."""

from __future__ import annotations

import math
from typing import IO, TYPE_CHECKING

import numpy as np

from eoscore.answer.record import DerivedAnswer
from eoscore.show.formulas import formula_lines
from eoscore.show.grid_table import grid_tables, hidden_rows
from eoscore.show.prefix import fitting, quantity, written
from eoscore.show.table import columns, console_on, paragraph, put

if TYPE_CHECKING:
    from collections.abc import Iterator

    from rich.console import Console
    from rich.table import Table

    from eoscore.answer.record import Answer, Caution, Finding, FoundAnswer, Interval, Reason, Report

__all__ = ["error_text", "interval_text", "print_report"]


def print_report(report: Report, stream: IO[str]) -> None:
    """Write every answer of a report to a text stream."""
    console = console_on(stream)
    told: set[Caution] = set()
    for number, answer in enumerate(report.answers):
        if number:
            console.print()
        _print_answer(answer, console)
        for line in _caution_lines(answer, told):
            paragraph(console, line)


def _print_answer(answer: Answer, console: Console) -> None:
    console.print(f"line {answer.line}: {answer.question}", style="bold")
    if isinstance(answer, DerivedAnswer):
        for line in formula_lines(answer):
            paragraph(console, line)
    elif answer.over:
        for number, table in enumerate(grid_tables(answer, console.width)):
            if number:
                console.print()
            put(console, table)
        if hidden := hidden_rows(answer):
            paragraph(console, f"{hidden} rows more; --out FILE.csv writes them all")
    else:
        put(console, _single_table(answer))
    for line in _notes(answer):
        paragraph(console, line)


def _single_table(answer: FoundAnswer) -> Table:
    table = columns("quantity", "value", "numerical error", "route")
    for name, finding in answer.found.items():
        table.add_row(name, *_cells(finding))
    return table


def _cells(finding: Finding) -> tuple[str, str, str]:
    if finding.reasons and finding.value.ndim == 0:
        return "-", "", finding.route
    values = finding.value.reshape(-1)
    sigmas = [None] * values.size if finding.sigma is None else finding.sigma.reshape(-1).tolist()
    shown = ", ".join(quantity(v, finding.unit, s) for v, s in zip(values.tolist(), sigmas, strict=True))
    return shown, error_text(finding), finding.route


def error_text(finding: Finding) -> str:
    """The largest relative numerical error as a power of ten that is not below it."""
    worst = finding.worst()
    if worst == 0.0:
        return "exact"
    power = math.floor(math.log10(worst))
    digit = math.ceil(worst / 10.0**power - 1e-9)
    return f"1e{power + 1} relative" if digit == 10 else f"{digit}e{power} relative"


def _notes(answer: Answer) -> Iterator[str]:
    """Reasons and shares of the variance, each a line of its own below the table."""
    if isinstance(answer, DerivedAnswer):
        return
    for reason, names in _reasons(answer).items():
        count = len(reason.points)
        at = f" at {count} {'point' if count == 1 else 'points'}" if answer.over else ""
        yield f"{', '.join(names)}{at}: no value, because {reason.text}"
    for name, finding in answer.found.items():
        if finding.note:
            yield f"{name}: {finding.note}"
        if not answer.over and (shares := _budget(finding)):
            yield f"{name}: its uncertainty comes from {shares}"
        if not answer.over and finding.interval is not None and finding.interval.answered.any():
            yield f"{name}: {interval_text(finding.interval, finding.unit)}"


def interval_text(interval: Interval, unit: str) -> str:
    """How many of the samples lie between what, for every entry of a quantity without a grid."""
    share = float(interval.answered.min())
    lost = f" ({100 * (1 - share):.3g} % of them had no answer)" if share < 1 else ""
    if not np.isfinite(interval.low).all():
        return f"no interval: too few of {interval.samples} samples have an answer{lost}"
    ends = zip(interval.low.reshape(-1).tolist(), interval.high.reshape(-1).tolist(), strict=True)
    told = "; ".join(_between(low, high, unit) for low, high in ends)
    return f"{100 * interval.coverage:.0f} % of {interval.samples} samples{lost} lie {told}"


def _between(low: float, high: float, unit: str) -> str:
    factor, shown = fitting(high, unit)
    return (
        f"from {written(low / factor, digits=4)} to {written(high / factor, digits=4)} {shown}".removesuffix(
            " 1"
        )
    )


def _reasons(answer: FoundAnswer) -> dict[Reason, list[str]]:
    """Every reason once, with the quantities that have it."""
    reasons: dict[Reason, list[str]] = {}
    for name, finding in answer.found.items():
        for reason in finding.reasons:
            reasons.setdefault(reason, []).append(name)
    return reasons


def _caution_lines(answer: Answer, told: set[Caution]) -> Iterator[str]:
    """A caution in full where it comes first, by its code where it was told before."""
    again = [caution.code for caution in answer.cautions if caution in told]
    for caution in answer.cautions:
        if caution not in told:
            yield f"Caution ({caution.code}): {caution.text}"
    if again:
        yield f"Cautions as above: {', '.join(again)}"
    told.update(answer.cautions)


def _budget(finding: Finding) -> str:
    shares = {name: float(share.reshape(-1)[0]) for name, share in finding.budget.items()}
    ordered = sorted(shares.items(), key=lambda item: -round(item[1], 3))  # equal shares keep their order
    return ", ".join(f"{name} ({100.0 * share:.0f} %)" for name, share in ordered if share >= 5e-3)
