"""The JSON document of a run: plain data in SI units, null where there is no number."""

from __future__ import annotations

import json
import math
from dataclasses import asdict
from typing import TYPE_CHECKING, Any

import numpy as np

from eoscore.answer.record import DerivedAnswer

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from eoscore.answer.record import Answer, Finding, FoundAnswer, Report
    from eoscore.errors import Complaint

__all__ = ["document", "json_text"]

TARN_VERSION = 1


def json_text(report: Report) -> str:
    """The document as one line of JSON and a line end; numbers round-trip, nan and infinity become null."""
    return json.dumps(document(report), ensure_ascii=False, allow_nan=False) + "\n"


def document(report: Report) -> dict[str, Any]:
    """The document as dictionaries and lists."""
    from eoscore import __version__

    return {
        "eoscore": __version__,
        "tarn": TARN_VERSION,
        "file": report.file,
        "answers": [_answer(answer) for answer in report.answers],
        "complaints": [_complaint(complaint) for complaint in report.complaints],
    }


def _answer(answer: Answer) -> dict[str, Any]:
    head: dict[str, Any] = {
        "line": answer.line,
        "verb": answer.verb,
        "gas": answer.gas,
        "place": answer.place,
    }
    given = {name: asdict(value) for name, value in answer.given.items()}
    tail = {"cautions": [asdict(caution) for caution in answer.cautions]}
    if isinstance(answer, DerivedAnswer):
        return head | {"given": given, "formulas": _finite(dict(answer.formulas))} | tail
    return (
        head
        | {"from": _origin(answer), "given": given}
        | {"over": {name: values.tolist() for name, values in answer.over.items()}}
        | {"found": {name: _finding(finding, len(answer.over)) for name, finding in answer.found.items()}}
        | tail
    )


def _origin(answer: FoundAnswer) -> str | list[str] | None:
    if len(answer.origins) > 1:
        return list(answer.origins)
    return answer.origins[0] if answer.origins else None


def _finding(finding: Finding, axes: int) -> dict[str, Any]:
    why: Any = finding.why
    if axes:
        why = [
            {"why": reason.text, "points": [list(point) for point in reason.points]}
            for reason in finding.reasons
        ] or None
    error = np.where(np.isfinite(finding.value), finding.error, np.nan)
    record = {
        "value": _plain(finding.value, axes),
        "unit": finding.unit,
        "sigma": None if finding.sigma is None else _plain(finding.sigma, axes),
        "error": _plain(error, axes),
        "why": why,
        "route": finding.route,
    }
    if finding.note:
        record["note"] = finding.note
    if (interval := finding.interval) is not None:
        record["interval"] = {
            "low": _plain(interval.low, axes),
            "high": _plain(interval.high, axes),
            "coverage": interval.coverage,
            "samples": interval.samples,
            "answered": _plain(interval.answered, axes),
        }
    if finding.budget:
        record["budget"] = {name: _plain(share, axes) for name, share in finding.budget.items()}
    return record


def _plain(array: NDArray[np.float64], axes: int) -> Any:
    """Nested lists of doubles as deep as the grid, a list more for `freq`; None where there is no number."""
    array = np.asarray(array)  # a single number may come as a scalar
    finite = np.isfinite(array)
    if finite.all():
        return array.tolist()
    boxed = array.astype(object)
    boxed[~finite] = None
    if array.ndim == axes:
        return boxed.tolist()
    points = np.empty(array.shape[:axes], dtype=object)
    for point in np.ndindex(points.shape):
        points[point] = boxed[point].tolist() if finite[point].any() else None
    return points.tolist()


def _finite(value: Any) -> Any:
    """The same data with None for every number that JSON cannot say."""
    if isinstance(value, dict):
        return {name: _finite(part) for name, part in value.items()}
    if isinstance(value, list | tuple):
        return [_finite(part) for part in value]
    return None if isinstance(value, float) and not math.isfinite(value) else value


def _complaint(complaint: Complaint) -> dict[str, Any]:
    record = asdict(complaint)
    del record["excerpt"]
    return record
