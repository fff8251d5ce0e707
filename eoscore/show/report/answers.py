"""Questions and their answers as tables with error bars, reasons and cautions."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.answer.record import DerivedAnswer
from eoscore.constants import K_B
from eoscore.show.grid_table import grid_rows, hidden_rows
from eoscore.show.page import error_text, interval_text
from eoscore.show.prefix import quantity
from eoscore.show.report.budget import budgets
from eoscore.show.report.formulas import formulas
from eoscore.show.report.markup import Markup, element, listed, table, together
from eoscore.show.report.raised import raised, with_prefixes

if TYPE_CHECKING:
    from collections.abc import Container, Iterator

    from eoscore.answer.record import Answer, Caution, Finding, FoundAnswer, Report
    from eoscore.show.report.picture import Gallery

__all__ = ["HARDWARE", "answer_sections", "hardware_cautions"]

# Codes of cautions about what can hurt people: they stand at the top of the page as well.
HARDWARE = ("laser_class_4", "laser_class_3b", "coil_current", "high_voltage")
_ENERGIES = ("depth", "mu", "V_min")  # of one particle: a temperature says more about them


def hardware_cautions(report: Report) -> Markup:
    """What can hurt, once each, in a box of its own; nothing where nothing can."""
    told = _hardware(report)
    if not told:
        return Markup("")
    heading = element("h2", "Hardware that can hurt", id="hardware")
    return element(
        "section",
        heading,
        listed(caution.text for caution in told.values()),
        class_="hardware",
        aria_labelledby="hardware",
    )


def _hardware(report: Report) -> dict[str, Caution]:
    """The first caution of every code."""
    told: dict[str, Caution] = {}
    for answer in report.answers:
        for caution in answer.cautions:
            if caution.code in HARDWARE:
                told.setdefault(caution.code, caution)
    return told


def answer_sections(report: Report, gallery: Gallery | None, *, linked: bool = True) -> Iterator[Markup]:
    """An article for each answer, in the order asked; without a gallery there are no pictures of grids.

    `linked` where the source stands on the same page.
    """
    told: set[Caution] = set()
    boxed = _hardware(report) if linked else {}
    for number, answer in enumerate(report.answers, 1):
        heading = element("h3", f"{number}. ", element("code", answer.question))
        line = element("a", f"line {answer.line}", href=f"#L{answer.line}")
        origin = element("p", "Asked in ", line, " of the source.", class_="origin") if linked else ""
        body = formulas(answer) if isinstance(answer, DerivedAnswer) else _found(answer, gallery)
        named = {"id": f"answer-{number}"} if linked else {}
        yield element("article", heading, origin, body, _cautions(answer, told, boxed), **named)
        told.update(answer.cautions)


def _found(answer: FoundAnswer, gallery: Gallery | None) -> Markup:
    if answer.over:
        heads, rows = grid_rows(answer)
        hidden = hidden_rows(answer)
        summary = f"The numbers ({hidden} rows in the middle left out)" if hidden else "The numbers"
        points = element("details", element("summary", summary), table(answer.question, heads, rows))
        return together(_picture(answer, gallery), points, _reasons(answer), _notes(answer))
    rows = [(element("code", name), *_cells(name, finding)) for name, finding in answer.found.items()]
    heads = ("quantity", "value", "numerical error", "route")
    return together(table(answer.question, heads, rows), _reasons(answer), _notes(answer), budgets(answer))


def _picture(answer: FoundAnswer, gallery: Gallery | None) -> Markup:
    if gallery is None:
        return Markup("")
    from eoscore.show.report.grids import grid_picture  # draws with matplotlib, an extra

    return grid_picture(answer, gallery)


def _cells(name: str, finding: Finding) -> tuple[str, ...]:
    if finding.reasons and finding.value.ndim == 0:
        return (f"no value: {finding.why}",)
    values = finding.value.reshape(-1).tolist()
    sigmas = [None] * len(values) if finding.sigma is None else finding.sigma.reshape(-1).tolist()
    shown = ", ".join(_with_error_bar(v, finding.unit, s) for v, s in zip(values, sigmas, strict=True))
    if name in _ENERGIES and np.all(np.abs(finding.value) > 0.0):
        spread = None if sigmas[0] is None else sigmas[0] / K_B
        shown += f" (k_B × {_with_error_bar(values[0] / K_B, 'K', spread)})"
    return shown, error_text(finding), finding.route


def _with_error_bar(value: float, unit: str, sigma: float | None) -> str:
    """`703(14) nK`, in the concise notation of the SI Brochure that the file itself uses."""
    return raised(quantity(value, unit, sigma)).replace("-", "\N{MINUS SIGN}", value < 0.0)


def _reasons(answer: FoundAnswer) -> Markup:
    told: dict[str, list[str]] = {}
    for name, finding in answer.found.items():
        for reason in finding.reasons if answer.over or finding.value.ndim else ():
            points = f"{name} at {len(reason.points)} points" if answer.over else name
            told.setdefault(reason.text, []).append(points)
    return listed(f"{', '.join(names)}: no value, because {why}" for why, names in told.items())


def _notes(answer: FoundAnswer) -> Markup:
    notes = []
    for name, finding in answer.found.items():
        if finding.note:
            notes.append(f"{name}: {with_prefixes(finding.note)}")
        if not answer.over and finding.interval is not None and finding.interval.answered.any():
            notes.append(together(f"{name}: ", raised(interval_text(finding.interval, finding.unit))))
    return listed(notes)


def _cautions(answer: Answer, told: set[Caution], boxed: Container[str]) -> Markup:
    """Cautions in full where they come first, by their codes where they, or those on hardware, were told before."""
    again = [each.code for each in answer.cautions if each in told or each.code in boxed]
    items = [
        together(element("b", f"Caution ({caution.code}): "), raised(caution.text))
        for caution in answer.cautions
        if caution.code not in again
    ]
    if again:
        items.append(together(f"Cautions as above: {', '.join(again)}"))
    return listed(items, class_="cautions")
