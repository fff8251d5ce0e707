"""Route: about the bottoms. Omega of every well solved along rays, for as high as the wells are star-shaped."""

from __future__ import annotations

from math import inf
from typing import TYPE_CHECKING

import numpy as np

from eoscore.measure.angular import Angular
from eoscore.measure.rays import Declined
from eoscore.measure.sampled import Sampled

if TYPE_CHECKING:
    from collections.abc import Sequence

    from eoscore.formula.field import Field
    from eoscore.measure.base import FloatArray, Measure
    from eoscore.measure.landscape_record import Landscape, Minimum

__all__ = ["Wells", "about"]

BENT = 1e-2  # change of V against its quadratic form at which the form ends
SERIES = 0.1  # of that energy: below, Omega / v^{d/2} is a series from its exact beginning


class Wells:
    """Omega of quadratic wells together, each star-shaped below `end` (J from the lowest) and apart from the others.

    Raises Declined where they are not.
    """

    def __init__(self, field: Field, minima: Sequence[Minimum], end: float) -> None:
        self.rises = [minimum.value - minima[0].value for minimum in minima]
        self.wells = [
            _Well(field, minimum, end - rise)
            for minimum, rise in zip(minima, self.rises, strict=True)
            if rise < end
        ]
        self.exponent, self.scale = self.wells[0].exponent, self.wells[0].scale
        self(end * np.array([0.5, 1.0]))

    @property
    def error(self) -> float:
        """Relative, the greatest so far."""
        return max(well.angular.error for well in self.wells)

    def __call__(self, v: FloatArray) -> FloatArray:
        """Omega at energies (n,) above 0."""
        total = np.zeros_like(v)
        for well, rise in zip(self.wells, self.rises, strict=False):
            above = v > rise
            if above.any():
                total[above] += well(v[above] - rise)
        return total


class _Well:
    """One well; near its bottom Omega / v^k is a polynomial through five values, its exact limit among them."""

    def __init__(self, field: Field, minimum: Minimum, end: float) -> None:
        self.angular = Angular(field, minimum, end)
        self.exponent = self.angular.exponent
        self.scale = _scale(self.angular, end)
        self.edge = SERIES * self.scale
        exact = self.angular.degree == 2
        share = np.array([0.25, 0.5, 0.75, 1.0] if exact else [0.2, 0.4, 0.6, 0.8, 1.0])
        ratio = self.angular(self.edge * share) / (self.edge * share) ** self.exponent
        if exact:
            share, ratio = np.append(share, 0.0), np.append(ratio, self.angular.limit)
        self.series = np.linalg.solve(np.vander(share), ratio)

    def __call__(self, v: FloatArray) -> FloatArray:
        result = np.asarray(np.polyval(self.series, np.minimum(v / self.edge, 1.0)) * v**self.exponent)
        above = v > self.edge
        if above.any():
            result[above] = self.angular(v[above])
        return result


def about(field: Field, landscape: Landscape, ceiling: float) -> Measure | None:
    """Omega of a single well that is star-shaped about its bottom up to the escape energy or the ceiling, else None."""
    bottom, depth = landscape.bottom, min(landscape.depth, ceiling)
    if bottom is None or len(landscape.minima) > 1 or depth == inf:
        return None
    try:
        wells = Wells(field, landscape.minima, depth)
    except Declined:
        return None
    return Sampled(
        wells,
        wells.exponent,
        scale=wells.scale,
        top=depth,
        error=lambda v: np.full(v.shape, wells.error),
        route="about the bottom",
    )


def _scale(angular: Angular, end: float) -> float:
    """The energy, at most `end`, at which V leaves its quadratic form by a hundredth along a principal axis."""
    found, size = end, abs(angular.v_min)
    q = angular.radius(end) * np.geomspace(1e-9, 1.0, 300)
    form = q**2 / 2 if angular.degree == 2 else q
    names = angular.field.coordinates
    for along in np.concatenate([angular.frame.T, -angular.frame.T]):
        x = angular.start[:, None] + along[:, None] * q
        v = angular.field.formula.evaluate(dict(zip(names, x, strict=True))) - angular.v_min
        ratio = v / form
        clear = form > 1e-10 * size
        bent = np.flatnonzero(clear & ~(np.abs(ratio / ratio[np.argmax(clear)] - 1) <= BENT))
        if bent.size:
            found = min(found, float(form[bent[0]]))
    return found
