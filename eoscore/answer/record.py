"""What an answer is: frozen records that mirror the JSON document; SI numbers in arrays shaped like the grid."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field
from typing import TYPE_CHECKING, Any

import numpy as np

if TYPE_CHECKING:
    from collections.abc import Iterator, Mapping

    from numpy.typing import ArrayLike, NDArray

    from eoscore.errors import Complaint

__all__ = [
    "Answer",
    "Caution",
    "DerivedAnswer",
    "Finding",
    "FoundAnswer",
    "Given",
    "Interval",
    "Points",
    "Reason",
    "Report",
]


@dataclass(frozen=True)
class Given:
    """A condition of the question: its SI value and unit."""

    value: float
    unit: str


class Points(Sequence[tuple[int, ...]]):
    """Points of a grid as index tuples, kept in one array of shape (points, axes): there may be a million."""

    def __init__(self, points: ArrayLike) -> None:
        self.array: NDArray[np.int64] = np.asarray(points, dtype=np.int64)

    def __len__(self) -> int:
        return len(self.array)

    def __getitem__(self, index: Any) -> Any:
        part = self.array[index].tolist()
        return tuple(map(tuple, part)) if isinstance(index, slice) else tuple(part)

    def __iter__(self) -> Iterator[tuple[int, ...]]:
        return iter(map(tuple, self.array.tolist()))

    def __eq__(self, other: object) -> bool:
        return isinstance(other, Points) and np.array_equal(self.array, other.array)

    def __hash__(self) -> int:
        return hash((self.array.shape, self.array.tobytes()))

    def __repr__(self) -> str:
        return f"Points({self.array.tolist()})"


@dataclass(frozen=True)
class Reason:
    """Why there is no value, and at which points of the grid (index tuples; `()` without a grid)."""

    text: str
    points: Points = field(default_factory=lambda: Points([()]))


@dataclass(frozen=True)
class Caution:
    """Something a practitioner would want to know before trusting a number, with its size in the text."""

    code: str
    text: str


@dataclass(frozen=True)
class Interval:
    """The middle of a sample: `coverage` of the answers lie between `low` and `high`, arrays like the value's.

    `answered` is the share of the `samples` that have an answer; low and high are nan where they are too few.
    """

    low: NDArray[np.float64]
    high: NDArray[np.float64]
    answered: NDArray[np.float64]
    samples: int
    coverage: float


@dataclass(frozen=True)
class Finding:
    """One quantity of a `find`: SI numbers shaped like the grid; `freq` and `r_min` have a last axis of their own.

    `value` is nan where there is no answer, and `reasons` say why. `error` is the absolute numerical error,
    `sigma` one standard deviation carried from the input (None where no input had one), `budget` the share of
    the variance of each uncertain literal, named as in the file. `note` says more in words: for the depth, where
    and which way the trap leaks. `scale` is what the error is judged by where it is larger than the value: 1 for
    f_0, N for N_0, kT for mu. `interval` is that of a sample, where one was asked for.
    """

    value: NDArray[np.float64]
    unit: str
    error: NDArray[np.float64]
    route: str
    sigma: NDArray[np.float64] | None = None
    reasons: tuple[Reason, ...] = ()
    budget: Mapping[str, NDArray[np.float64]] = field(default_factory=dict)
    note: str | None = None
    scale: NDArray[np.float64] | None = None
    interval: Interval | None = None

    @property
    def why(self) -> str | None:
        """The words where there is no value, None where there is one."""
        return "; ".join(reason.text for reason in self.reasons) or None

    def worst(self) -> float:
        """The largest numerical error among the points that have a value, relative to it or to `scale`."""
        value, error = np.abs(self.value), self.error
        scale = value if self.scale is None else np.fmax(value, self.scale)
        known = np.isfinite(value)
        if not known.all():
            value, error, scale = value[known], error[known], scale[known]
        if not value.size or not error.any():
            return 0.0
        if not scale.all():  # zero without a scale of its own is judged by the largest value
            scale = np.where(scale > 0.0, scale, value.max())
        with np.errstate(divide="ignore", invalid="ignore"):
            return float(np.fmax.reduce((error / scale).reshape(-1), initial=0.0))


@dataclass(frozen=True)
class Piece:
    """What was found over a part of a grid, or over all of it, and the cautions that its points deserve."""

    found: Mapping[str, Finding]
    cautions: tuple[Caution, ...] = ()


@dataclass(frozen=True)
class FoundAnswer:
    """The answer to a `find`; `file` and `text` are where it was asked, `settings` what took the place of values."""

    line: int
    question: str
    gas: str
    place: str | None
    origins: tuple[str, ...]
    given: Mapping[str, Given]
    over: Mapping[str, NDArray[np.float64]]
    over_units: Mapping[str, str]
    found: Mapping[str, Finding]
    cautions: tuple[Caution, ...] = ()
    verb: str = "find"
    file: str = "<text>"
    text: str = field(default="", repr=False)
    settings: tuple[str, ...] = ()


@dataclass(frozen=True)
class DerivedAnswer:
    """The answer to a `derive`: for each quantity a mapping as the JSON document wants it."""

    line: int
    question: str
    gas: str
    place: str | None
    given: Mapping[str, Given]
    formulas: Mapping[str, Mapping[str, Any]]
    cautions: tuple[Caution, ...] = ()
    verb: str = "derive"


Answer = FoundAnswer | DerivedAnswer


@dataclass(frozen=True)
class Report:
    """All answers to a file, in the order asked, and the complaints where it is at fault."""

    file: str
    answers: tuple[Answer, ...] = ()
    complaints: tuple[Complaint, ...] = ()
