"""A measure times a number, or cut at an energy."""

from __future__ import annotations

from math import inf
from typing import TYPE_CHECKING

import numpy as np

from eoscore.measure.base import FloatArray, Foot, Measure, Nodes

if TYPE_CHECKING:
    from numpy.typing import ArrayLike

__all__ = ["Changed"]


class Changed(Measure):
    """`factor` times the part of a measure below `top`."""

    def __init__(self, origin: Measure, factor: float, top: float) -> None:
        if isinstance(origin, Changed):
            factor *= origin.factor
            origin = origin.origin
        super().__init__(
            origin.exponent,
            top=top,
            error=origin.error,
            route=origin.route,
            breaks=origin.breaks,
            scale=origin.scale,
        )
        self.origin: Measure = origin
        self.factor: float = factor
        self.bounded = origin.bounded

    @property
    def error(self) -> float:
        """As of the measure it was made from."""
        return self.origin.error

    def error_below(self, v: ArrayLike) -> FloatArray:
        """See `Measure.error_below`."""
        return self.origin.error_below(v)

    def eased(self, kT: float) -> Measure:
        """See `Measure.eased`."""
        return Changed(self.origin.eased(kT), self.factor, self.top)

    def volume(self, v: ArrayLike) -> FloatArray:
        """See `Measure.volume`."""
        return self.factor * self.origin.volume(np.minimum(v, self.top))

    def density(self, v: ArrayLike) -> FloatArray:
        """See `Measure.density`."""
        v = np.asarray(v, dtype=float)
        return np.where(v < self.top, self.factor * self.origin.density(np.minimum(v, self.top)), 0.0)

    def nodes(self, upto: float = inf) -> Nodes:
        """See `Measure.nodes`."""
        rule = self.origin.nodes(self.end(upto))
        foot = Foot(self.factor * rule.foot.coefficient, rule.foot.exponent, rule.foot.edge)
        return Nodes(rule.v, self.factor * rule.w, foot)
