"""The measure of c V, from that of V: as much space lies below c v as lay below v."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.measure.base import FloatArray, Foot, Measure, Nodes
from eoscore.measure.powers import Powers

if TYPE_CHECKING:
    from numpy.typing import ArrayLike

__all__ = ["stretched"]


def stretched(origin: Measure, factor: float) -> Measure:
    """The measure whose energies are a positive factor times those of another."""
    if (terms := origin.powers()) is not None:
        scaled = [(c * factor**-k, k) for c, k in terms]
        return Powers(scaled, origin.top * factor, error=origin.error, route=origin.route)
    return _Stretched(origin, factor)


class _Stretched(Measure):
    """Omega(v) = origin.Omega(v / factor)."""

    def __init__(self, origin: Measure, factor: float) -> None:
        super().__init__(
            origin.exponent,
            top=origin.top * factor,
            error=origin.error,
            route=origin.route,
            breaks=tuple(energy * factor for energy in origin.breaks),
            scale=origin.scale * factor,
        )
        self.origin, self.factor = origin, factor

    @property
    def error(self) -> float:
        """As of the measure it was made from."""
        return self.origin.error

    def error_below(self, v: ArrayLike) -> FloatArray:
        """See `Measure.error_below`."""
        return self.origin.error_below(np.asarray(v, dtype=float) / self.factor)

    def eased(self, kT: float) -> Measure:
        """See `Measure.eased`."""
        return _Stretched(self.origin.eased(kT / self.factor), self.factor)

    def volume(self, v: ArrayLike) -> FloatArray:
        """See `Measure.volume`."""
        return self.origin.volume(np.asarray(v, dtype=float) / self.factor)

    def density(self, v: ArrayLike) -> FloatArray:
        """See `Measure.density`."""
        return self.origin.density(np.asarray(v, dtype=float) / self.factor) / self.factor

    def density_beside(self, v: FloatArray, gap: FloatArray | None) -> FloatArray:
        """See `Measure.density_beside`."""
        near = None if gap is None else gap / self.factor
        return self.origin.density_beside(v / self.factor, near) / self.factor

    def nodes(self, upto: float = np.inf) -> Nodes:
        """See `Measure.nodes`."""
        rule = self.origin.nodes(self.end(upto) / self.factor)
        foot = Foot(
            rule.foot.coefficient * self.factor**-rule.foot.exponent,
            rule.foot.exponent,
            rule.foot.edge * self.factor,
        )
        return Nodes(rule.v * self.factor, rule.w, foot)
