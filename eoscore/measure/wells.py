"""Omega of one or several wells along rays from their bottoms, with smooth shares of space for each."""

from __future__ import annotations

from collections.abc import Callable
from functools import partial
from typing import TYPE_CHECKING, Literal

import numpy as np

from eoscore.measure.angular import Angular
from eoscore.measure.base import FloatArray
from eoscore.measure.moments import TERMS
from eoscore.measure.need import Need
from eoscore.measure.partition import Partition
from eoscore.measure.rays import Declined
from eoscore.measure.region import Region

if TYPE_CHECKING:
    from collections.abc import Sequence

    from eoscore.formula.field import Field
    from eoscore.measure.landscape_record import Minimum
    from eoscore.measure.need import Wanted
    from eoscore.measure.panel import Panel

How = Literal["apart", "shared", "joined"]
Share = Callable[[FloatArray], FloatArray]

__all__ = ["MOST_WELLS", "How", "Wells"]

MOST_WELLS = 12
SERIES = (
    0.1  # of the energy where V leaves its form: below, Omega / v^{d/2} is a series from its exact beginning
)


class Wells:
    """Omega of wells together below `end` (J from the lowest). Raises Declined where they are too many.

    How the region is shared among rays: each of the wells has its own, "apart", below the lowest pass between them;
    "shared" smoothly, also with rays from the passes; or all from the lowest well, "joined", far above what parts them.
    Declined, too, where wells apart are not, or joined ones are not seen from the lowest. few: take no more rays
    than a try is worth.
    """

    def __init__(
        self,
        field: Field,
        minima: Sequence[Minimum],
        end: float,
        how: How = "shared",
        passes: Sequence[Minimum] = (),
        *,
        few: bool = False,
    ) -> None:
        base = minima[0].value
        kept = [minimum for minimum in minima if minimum.value - base < end]
        if len(kept) > MOST_WELLS:
            raise Declined
        if how == "apart":
            regions = [_alone(field, minimum, kept, end + base - minimum.value) for minimum in kept]
            shares: Sequence[Share | None] = [None] * len(kept)
        else:
            region = Region(field, kept, end)
            centres = [*kept, *(p for p in passes if p.value - base < end)]
            kept = kept[:1] if how == "joined" else centres if len(centres) <= MOST_WELLS else kept
            regions, shares = [region] * len(kept), _shares(kept, region)
        self.rises = [minimum.value - base for minimum in kept]
        self.wells = [
            _Well(Angular(field, minimum, end - rise, region, share, few=few))
            for minimum, rise, region, share in zip(kept, self.rises, regions, shares, strict=True)
        ]
        if how == "joined" and not self.wells[0].angular.line.clear:
            raise Declined
        self.exponent, self.scale = self.wells[0].exponent, self.wells[0].scale

    def moments(self, stretch: Panel, parts: int, base: float, need: Need) -> tuple[FloatArray, FloatArray]:
        """Moments of Omega on the parts of a stretch (parts, TERMS), and the error that they leave (parts,)."""
        total, miss = np.zeros((parts, TERMS)), np.zeros(parts)
        for well, rise in zip(self.wells, self.rises, strict=True):
            if stretch.hi > rise:
                more, error = well.angular.moments(stretch, parts, rise, base, need.allowed)
                total += more
                miss += error
        return total, miss

    def release(self) -> None:
        """Let go of the rays walked so far."""
        for well in self.wells:
            well.angular.patches.release()

    @property
    def plain(self) -> bool:
        """Whether it is one smooth well that every ray leaves once: nothing does better than rays there."""
        one = self.wells[0].angular
        return len(self.wells) == 1 and one.degree == 2 and one.line.clear and not one.field.walls

    def with_error(self, v: FloatArray, need: Need) -> tuple[FloatArray, FloatArray]:
        """Omega at energies (n,) above 0, and its relative error, as good as needed or as may be."""
        total, miss = np.zeros_like(v), np.zeros_like(v)
        for well, rise in zip(self.wells, self.rises, strict=True):
            above = v > rise
            if above.any():
                volume, error = well.with_error(v[above] - rise, partial(need.allowed, rise=rise))
                total[above] += volume
                miss[above] += volume * error
        return total, miss / total


class _Well:
    """One well; near its bottom Omega / v^k is a polynomial through five values, its exact limit among them.

    Where the power k is not known, Omega is solved along the rays all the way down.
    """

    def __init__(self, angular: Angular) -> None:
        self.angular = angular
        self.exponent = angular.exponent
        self.scale, self.edge = angular.end, 0.0
        if self.exponent is not None:
            self.scale = angular.scale
            self.edge = SERIES * self.scale
            self._series(self.exponent)

    def with_error(self, v: FloatArray, wanted: Wanted) -> tuple[FloatArray, FloatArray]:
        """Omega at energies (n,) above the bottom of the well, and its relative error, of which `wanted` may stay."""
        if self.exponent is None:
            return self.angular.with_error(v, wanted)
        result = np.asarray(np.polyval(self.series, np.minimum(v / self.edge, 1.0)) * v**self.exponent)
        error = np.full(v.shape, self.error)
        above = v > self.edge
        if above.any():
            result[above], error[above] = self.angular.with_error(v[above], wanted)
        return result, error

    def _series(self, exponent: float) -> None:
        exact = self.angular.degree == 2
        share = np.array([0.25, 0.5, 0.75, 1.0] if exact else [0.2, 0.4, 0.6, 0.8, 1.0])
        volume, error = self.angular.with_error(self.edge * share, Need().allowed)
        ratio, self.error = volume / (self.edge * share) ** exponent, float(error.max())
        if exact:
            share, ratio = np.append(share, 0.0), np.append(ratio, self.angular.limit)
        self.series = np.linalg.solve(np.vander(share), ratio)


def _alone(field: Field, minimum: Minimum, minima: Sequence[Minimum], end: float) -> Region:
    """The region of one well; Declined where it holds the bottom of another."""
    region = Region(field, [minimum], end)
    others = np.array([other.position for other in minima if other is not minimum])
    if len(others) and region.holds(others).any():
        raise Declined
    return region


def _shares(minima: Sequence[Minimum], region: Region) -> list[Share | None]:
    """The share of space of each well; None for one alone."""
    if len(minima) == 1:
        return [None]
    partition = Partition(np.array([m.position for m in minima]), region.size)
    return [partial(partition.share, k) for k in range(len(minima))]
