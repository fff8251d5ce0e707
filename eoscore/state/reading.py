"""What is read off a gas: a number with its error and its route, or the words why there is none."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import NDArray

from eoscore.errors import NoAnswerError

if TYPE_CHECKING:
    from collections.abc import Iterable

    from numpy.typing import ArrayLike

__all__ = ["FloatArray", "Reading", "Reason", "reading_of", "spread_over"]

FloatArray = NDArray[np.float64]


@dataclass(frozen=True)
class Reason:
    """Why there is no number, in words, and at which points: a boolean array of the shape of the question."""

    words: str
    where: NDArray[np.bool_]


@dataclass(frozen=True)
class Reading:
    """One quantity at every point of a question.

    `value` and `error` (absolute; the true error is below it) in SI units as named by `unit`, of the shape of
    the question, with one axis more for `freq` and `r_min`; nan where `reasons` say that there is no number.
    `scale`, of the shape of `value`, is what the error is judged by where it is larger than the value.
    """

    value: FloatArray
    error: FloatArray
    unit: str
    route: str
    reasons: tuple[Reason, ...] = ()
    scale: FloatArray | None = None

    @property
    def why(self) -> str | None:
        """The words of all points without a number; None where every point has one."""
        return "; ".join(reason.words for reason in self.reasons) or None

    @property
    def missing(self) -> NDArray[np.bool_]:
        """The points without a number."""
        missing = np.zeros(self.value.shape[: self.value.ndim - self._axes], dtype=bool)
        for reason in self.reasons:
            missing |= reason.where
        return missing

    @property
    def _axes(self) -> int:
        shape = self.reasons[0].where.ndim if self.reasons else self.value.ndim
        return self.value.ndim - shape

    def number(self) -> float | FloatArray:
        """The value as a float, or as an array; masked where points have none (NoAnswerError where none has)."""
        missing = self.missing
        if self.reasons and bool(np.all(missing)):
            raise NoAnswerError(str(self.why))
        if self.value.ndim == 0:
            return float(self.value)
        if not self.reasons or not missing.any():
            return self.value
        mask = np.broadcast_to(missing.reshape(missing.shape + (1,) * self._axes), self.value.shape)
        return np.ma.masked_array(self.value, mask)

    def __repr__(self) -> str:
        if self.why is not None and bool(np.all(self.missing)):
            return f"Reading(none: {self.why})"
        return f"Reading({self.value!r} {self.unit}, error {self.error!r}, {self.route})"


def reading_of(
    value: ArrayLike, error: ArrayLike, unit: str, route: str, reasons: Iterable[Reason] = ()
) -> Reading:
    """A reading with its arrays made alike: nan where a reason holds, reasons that hold nowhere dropped."""
    value = np.array(value, dtype=float)
    error = np.array(np.broadcast_to(np.asarray(error, dtype=float), value.shape))
    kept = tuple(reason for reason in reasons if np.any(reason.where))
    for reason in kept:
        value[reason.where] = np.nan
        error[reason.where] = np.nan
    return Reading(value, error, unit, route, kept)


def spread_over(reading: Reading, points: tuple[int, ...], shape: tuple[int, ...]) -> Reading:
    """A reading at `points` repeated over a larger shape that they broadcast to."""
    own = reading.value.shape[len(points) :]
    aligned = (1,) * (len(shape) - len(points)) + points

    def spread(array: FloatArray) -> FloatArray:
        return np.broadcast_to(array.reshape(aligned + own), shape + own)

    return Reading(
        spread(reading.value),
        spread(reading.error),
        reading.unit,
        reading.route,
        tuple(Reason(each.words, np.broadcast_to(each.where, shape)) for each in reading.reasons),
        None if reading.scale is None else spread(reading.scale),
    )
