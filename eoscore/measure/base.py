"""The measure: how much space lies below an energy.

An energy function (V of a place, E(p) of a particle, their sum) enters every extensive number of a gas only
through Omega(v), the volume of its space where it lies less than v above its least value.
"""

from __future__ import annotations

from abc import ABC, abstractmethod
from dataclasses import dataclass
from math import inf
from typing import TYPE_CHECKING, Any

import numpy as np
from numpy.typing import NDArray

if TYPE_CHECKING:
    from numpy.typing import ArrayLike

__all__ = ["FloatArray", "Foot", "Measure", "Nodes"]

FloatArray = NDArray[np.float64]


@dataclass(frozen=True)
class Foot:
    """The part of a measure near its bottom that is a pure power: Omega(v) = coefficient v^exponent, v <= edge.

    Its share of an integral is coefficient * int_0^edge g(v) exponent v^(exponent - 1) dv, and
    coefficient * g(0) where the exponent is 0 (a flat floor).
    """

    coefficient: float
    exponent: float
    edge: float

    @property
    def volume(self) -> float:
        """Omega at the edge: the share of a function that is 1 there."""
        return float(self.coefficient * self.edge**self.exponent)


@dataclass(frozen=True)
class Nodes:
    """A rule: int g dOmega = sum w g(v) + the share of the foot. `v` in J, ascending; `w` in units of Omega."""

    v: FloatArray
    w: FloatArray
    foot: Foot


class Measure(ABC):
    """Omega(v) and its derivative, v in J from the bottom.

    Laws: Omega rises with v, Omega(v) / v^exponent has a positive limit for v -> 0, Omega(v) = Omega(top) above
    `top`, the derivative is analytic between neighbouring `breaks`, and the true relative error of Omega is at
    most `error`. `scale` is an energy (J) at which Omega begins to leave its pure power, inf where it never does.
    A measure never changes after it was built, and may be asked from several threads. `bounded` tells that its
    space is known to stay bounded up to the top, so that Omega is finite there.
    """

    bounded = False

    def __init__(
        self,
        exponent: float,
        *,
        top: float = inf,
        error: float,
        route: str,
        breaks: tuple[float, ...] = (),
        scale: float = inf,
    ) -> None:
        self.exponent = exponent
        self.scale = scale
        self.top = top
        self.route = route
        self.breaks = tuple(b for b in sorted(set(breaks)) if 0 < b < top)
        self._error = error

    @property
    def error(self) -> float:
        """Bound of the relative error of Omega, at every energy that was asked so far."""
        return self._error

    def error_below(self, v: ArrayLike) -> FloatArray:
        """Bound of the relative error of Omega at energies up to v (J), which rises with v to `error`.

        The error of int g dOmega with falling g is at most int error_below(v) Omega(v) (-g'(v)) dv, which is far
        less than `error` where only the highest energies are uncertain.
        """
        return np.full(np.shape(v), self.error)

    @property
    def floor(self) -> float:
        """Omega(0): the volume of a flat bottom, in units of Omega; 0 for every other bottom."""
        return float(self.volume(0.0)) if self.exponent == 0 else 0.0

    @abstractmethod
    def volume(self, v: ArrayLike) -> FloatArray:
        """Omega at energies v in J, any shape; 0 below 0, Omega(top) above the top."""

    @abstractmethod
    def density(self, v: ArrayLike) -> FloatArray:
        """dOmega/dv at energies v in J, any shape; 0 outside (0, top). A flat floor at 0 is not in it."""

    def density_beside(self, v: FloatArray, gap: FloatArray | None) -> FloatArray:  # noqa: ARG002
        """The density at energies v whose signed distance from a break is known better than their difference."""
        return self.density(v)

    @abstractmethod
    def nodes(self, upto: float = inf) -> Nodes:
        """A rule for int g dOmega over [0, min(upto, top)].

        Panels are graded towards 0, so 1/(e^{b(v - mu)} - 1), mu <= 0, is integrated to 1e-13 at every b.
        A Fermi step at mu > 0 is not resolved: use int Omega(v) (-df/dv) dv about mu there.
        Raises ValueError when both `upto` and the top are infinite.
        """

    def powers(self) -> tuple[tuple[float, float], ...] | None:
        """The terms (C, k) where Omega(v) = sum C v^k exactly for v < top; None where it is no such sum."""
        return None

    def scaled(self, factor: float) -> Measure:
        """The measure times a positive number."""
        from eoscore.measure.changed import Changed

        return Changed(self, factor, self.top)

    def eased(self, kT: float) -> Measure:  # noqa: ARG002
        """The same measure, perhaps less well known where sums at temperatures up to kT (J) do not need it."""
        return self

    def cut(self, top: float) -> Measure:
        """The measure without the energies above `top` (J)."""
        from eoscore.measure.changed import Changed

        return self if top >= self.top else Changed(self, 1.0, top)

    def end(self, upto: float) -> float:
        """The last energy of a rule that is asked up to `upto`; ValueError when that is infinite."""
        end = min(upto, self.top)
        if not 0 < end < inf:
            message = f"a rule up to {end} J was asked; a measure without top needs a finite energy above 0"
            raise ValueError(message)
        return end

    def __repr__(self) -> str:
        facts: dict[str, Any] = {"exponent": self.exponent, "top": self.top, "route": self.route}
        return f"{type(self).__name__}({', '.join(f'{k}={v!r}' for k, v in facts.items())})"
