"""Chunks of a grid put back in their places."""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING

import numpy as np

from eoscore.answer.record import Finding, Interval, Piece, Points, Reason

if TYPE_CHECKING:
    from collections.abc import Iterator, Mapping, Sequence

    from numpy.typing import NDArray

    from eoscore.answer.chunk import Chunk

__all__ = ["joined"]

_Part = tuple["Chunk", Finding]


def joined(shape: tuple[int, ...], parts: Mapping[Chunk, Piece]) -> Piece:
    """The pieces of all chunks of a grid of this shape, in order, as one over the whole grid."""
    first = next(iter(parts.values()))
    if len(parts) == 1:
        return first
    found = {
        name: _whole(shape, [(chunk, piece.found[name]) for chunk, piece in parts.items()])
        for name in first.found
    }
    return Piece(found, tuple(caution for piece in parts.values() for caution in piece.cautions))


def _whole(shape: tuple[int, ...], parts: Sequence[_Part]) -> Finding:
    findings = [finding for _, finding in parts]
    entries = max((finding.value.shape[len(shape) :] for finding in findings), key=len)
    target = (*shape, *entries)
    labels = dict.fromkeys(label for finding in findings for label in finding.budget)
    uncertain = any(finding.sigma is not None for finding in findings)
    scaled = any(finding.scale is not None for finding in findings)
    return replace(
        findings[0],
        value=_placed(target, parts, [f.value for f in findings]),
        error=_placed(target, parts, [f.error for f in findings]),
        sigma=_placed(target, parts, [_or_none(f.sigma, f) for f in findings]) if uncertain else None,
        route="; ".join(dict.fromkeys(finding.route for finding in findings if finding.route)),
        reasons=tuple(_reasons(parts)),
        budget={
            label: _placed(target, parts, [_or_none(f.budget.get(label), f) for f in findings])
            for label in labels
        },
        note=next((finding.note for finding in findings if finding.note), None),
        scale=_placed(target, parts, [_or_value(f.scale, f) for f in findings]) if scaled else None,
        interval=_interval(target, parts),
    )


def _placed(
    target: tuple[int, ...], parts: Sequence[_Part], arrays: Sequence[NDArray[np.float64]]
) -> NDArray[np.float64]:
    whole = np.empty(target)
    for (chunk, _), array in zip(parts, arrays, strict=True):
        # A chunk in which no point has a number does not know of a quantity's own last axis.
        missing = len(target) - array.ndim
        whole[chunk.box] = array.reshape(array.shape + (1,) * missing)
    return whole


def _or_none(array: NDArray[np.float64] | None, finding: Finding) -> NDArray[np.float64]:
    """What a literal adds where it does not bear on a chunk: nothing, where there is a value."""
    return np.where(np.isfinite(finding.value), 0.0, np.nan) if array is None else array


def _interval(target: tuple[int, ...], parts: Sequence[_Part]) -> Interval | None:
    """The intervals side by side; where no literal bears on a chunk, every sample gives its value."""
    first = next((finding.interval for _, finding in parts if finding.interval is not None), None)
    if first is None:
        return None
    told = [
        finding.interval
        or Interval(
            finding.value, finding.value, np.isfinite(finding.value) * 1.0, first.samples, first.coverage
        )
        for _, finding in parts
    ]
    low, high, answered = (
        _placed(target, parts, [getattr(each, part) for each in told]) for part in ("low", "high", "answered")
    )
    return Interval(low, high, answered, first.samples, first.coverage)


def _or_value(scale: NDArray[np.float64] | None, finding: Finding) -> NDArray[np.float64]:
    return np.abs(finding.value) if scale is None else scale


def _reasons(parts: Sequence[_Part]) -> Iterator[Reason]:
    """Every reason once, with its points in order."""
    found: dict[str, list[NDArray[np.int64]]] = {}
    for chunk, finding in parts:
        starts = np.array([start for start, _ in chunk.spans])
        for reason in finding.reasons:
            found.setdefault(reason.text, []).append(reason.points.array + starts)
    for text, where in found.items():
        points = np.concatenate(where)
        yield Reason(text, Points(points[np.lexsort(points.T[::-1])]))
