"""Pieces of a grid as bytes and back: a line of JSON that says what stands where, then the plain numbers.

No pickle: bytes that someone else has put there can be wrong, but they are never executed.
"""

from __future__ import annotations

import json
from dataclasses import asdict
from typing import TYPE_CHECKING, Any

import numpy as np

from eoscore.answer.record import Caution, Finding, Interval, Piece, Points, Reason

if TYPE_CHECKING:
    from collections.abc import Mapping

    from numpy.typing import NDArray

__all__ = ["packed", "unpacked"]


class _Numbers:
    """Arrays one after the other; each is told by its kind and its shape."""

    def __init__(self, content: bytes = b"") -> None:
        self.parts: list[bytes] = []
        self._content, self._at = content, 0

    def put(self, array: NDArray[Any]) -> list[Any]:
        plain = np.ascontiguousarray(array, dtype="<i8" if array.dtype.kind == "i" else "<f8")
        self.parts.append(plain.tobytes())
        return [plain.dtype.str, list(array.shape)]

    def take(self, told: list[Any]) -> NDArray[Any]:
        kind, shape = np.dtype(told[0]), tuple(told[1])
        count = int(np.prod(shape, dtype=np.int64))
        array = np.frombuffer(self._content, kind, count, self._at).reshape(shape)
        self._at += array.nbytes
        return array.astype(kind.newbyteorder("="))


def packed(piece: Piece) -> bytes:
    """A piece as bytes."""
    numbers = _Numbers()
    head = {
        "found": {name: _packed(finding, numbers) for name, finding in piece.found.items()},
        "cautions": [asdict(caution) for caution in piece.cautions],
    }
    return json.dumps(head).encode() + b"\n" + b"".join(numbers.parts)


def unpacked(content: bytes) -> Piece:
    """The piece that was packed; its arrays have the same bits."""
    line, _, rest = content.partition(b"\n")
    head, numbers = json.loads(line), _Numbers(rest)
    found = {name: _unpacked(told, numbers) for name, told in head["found"].items()}
    return Piece(found, tuple(Caution(**caution) for caution in head["cautions"]))


def _packed(finding: Finding, numbers: _Numbers) -> dict[str, Any]:
    return {
        "value": numbers.put(finding.value),
        "unit": finding.unit,
        "error": numbers.put(finding.error),
        "route": finding.route,
        "sigma": None if finding.sigma is None else numbers.put(finding.sigma),
        "reasons": [[reason.text, numbers.put(reason.points.array)] for reason in finding.reasons],
        "budget": {label: numbers.put(share) for label, share in finding.budget.items()},
        "note": finding.note,
        "scale": None if finding.scale is None else numbers.put(finding.scale),
        "interval": None if (told := finding.interval) is None else _interval(told, numbers),
    }


def _unpacked(told: Mapping[str, Any], numbers: _Numbers) -> Finding:
    """In the order of packing."""
    return Finding(
        value=numbers.take(told["value"]),
        unit=told["unit"],
        error=numbers.take(told["error"]),
        route=told["route"],
        sigma=None if told["sigma"] is None else numbers.take(told["sigma"]),
        reasons=tuple(Reason(text, Points(numbers.take(points))) for text, points in told["reasons"]),
        budget={label: numbers.take(share) for label, share in told["budget"].items()},
        note=told["note"],
        scale=None if told["scale"] is None else numbers.take(told["scale"]),
        interval=None if (ends := told["interval"]) is None else _taken(ends, numbers),
    )


def _interval(interval: Interval, numbers: _Numbers) -> list[Any]:
    arrays = (interval.low, interval.high, interval.answered)
    return [*(numbers.put(array) for array in arrays), interval.samples, interval.coverage]


def _taken(told: list[Any], numbers: _Numbers) -> Interval:
    low, high, answered = (numbers.take(each) for each in told[:3])
    return Interval(low, high, answered, *told[3:])
