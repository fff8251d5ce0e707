"""Route: one coordinate. Roots of V = v on every monotone stretch of the held part of the line."""

from __future__ import annotations

from math import inf
from typing import TYPE_CHECKING

import numpy as np

from eoscore.measure.bottom import beginning
from eoscore.measure.coordinate import RADIAL
from eoscore.measure.powers import Powers
from eoscore.measure.profile import profile
from eoscore.measure.sampled import Sampled

if TYPE_CHECKING:
    from eoscore.formula.field import Field
    from eoscore.measure.base import FloatArray, Measure
    from eoscore.measure.branch import Branch
    from eoscore.measure.landscape_record import Landscape

__all__ = ["line"]

ERROR = 2e-13  # of a root, and so of Omega
STEPS = 1200  # of the search for the scale
DEEPEST = 1e-14  # of the first break or the top: where the pure power is looked for


def line(field: Field, landscape: Landscape) -> Measure | None:
    """Omega of a field of one coordinate (`x`, `rho`, `r`), None for more.

    Several wells, hard walls and barriers are taken as they come.
    """
    if len(field.coordinates) != 1:
        return None
    (name,) = field.coordinates
    found = profile(field, landscape)

    def omega(v: FloatArray) -> FloatArray:
        return np.asarray(sum(_swept(name, branch, branch.reach(v)) for branch in found.branches))

    first = min((*found.breaks, landscape.depth))
    lowest = min(found.branches, key=lambda branch: branch.base)
    noise = max(branch.noise for branch in found.branches)
    rises = lowest.rises
    start = max(DEEPEST * first if first < inf else rises[0], noise)
    v = np.geomspace(start, min(first / 2, rises[-1] / 2), STEPS)
    exponent, bent = beginning(v, omega(v))
    scale = min(bent, first)
    route = "line" if name not in RADIAL else "radial"
    if scale == inf:
        middle = v[STEPS // 2 :][:1]
        return Powers([(float(omega(middle)[0] / middle[0] ** exponent), exponent)], error=ERROR, route=route)
    return Sampled(
        omega,
        exponent,
        scale=scale,
        foot=noise or None,
        top=landscape.depth,
        error=ERROR,
        route=route,
        breaks=found.breaks,
    )


def _swept(name: str, branch: Branch, u: FloatArray) -> FloatArray:
    """Length, area or volume between the start of a branch and u."""
    if name not in RADIAL:
        return u
    factor, power = RADIAL[name]
    start, end = branch.start, branch.start + branch.sign * u
    if power == 2:
        return np.asarray(factor * u * (start + end))
    return np.asarray(factor * u * (start**2 + start * end + end**2))
