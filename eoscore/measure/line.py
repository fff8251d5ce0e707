"""Route: one coordinate. Roots of V = v on every monotone stretch of the held part of the line."""

from __future__ import annotations

from math import inf
from typing import TYPE_CHECKING

import numpy as np

from eoscore.errors import NoAnswerError
from eoscore.measure.bottom import beginning
from eoscore.measure.coordinate import RADIAL, between
from eoscore.measure.crowd import crowd
from eoscore.measure.powers import Powers
from eoscore.measure.profile import held_line
from eoscore.measure.sampled import Sampled

if TYPE_CHECKING:
    from eoscore.formula.field import Field
    from eoscore.measure.base import FloatArray, Measure
    from eoscore.measure.branch import Branch
    from eoscore.measure.landscape_record import Landscape
    from eoscore.measure.profile import HeldLine

__all__ = ["line"]

ERROR = 2e-13  # of a root, and so of Omega
STEPS = 1200  # of the search for the scale
MOST_BREAKS, FAR_TOO_MANY = 1, 100  # that are taken as ends of panels by choice, and at most
TOO_MANY = (
    "V has more than {1} wells along {0}, of a shape for which eoscore measures fewer only (it knows how V rises "
    "between smooth minima and maxima): put walls (`where`) about those that matter"
)
DEEPEST = 1e-14  # of the first break or the top: where the pure power is looked for


def line(field: Field, landscape: Landscape) -> Measure | None:
    """Omega of a field of one coordinate (`x`, `rho`, `r`), None for more.

    Several wells, hard walls and barriers are taken as they come.
    """
    if len(field.coordinates) != 1:
        return None
    found = held_line(field, landscape)
    if found.gaps.size or len(found.breaks) > MOST_BREAKS:
        many = None if found.jumps else crowd(found, landscape)
        if many is not None:
            return many
        if found.gaps.size or len(found.breaks) > FAR_TOO_MANY:
            raise NoAnswerError(TOO_MANY.format(found.name, len(found.x) // 2))
    return _resolved(found, landscape)


def _resolved(found: HeldLine, landscape: Landscape) -> Measure:
    """With every break at the end of a panel."""
    name, branches = found.name, found.branches()

    def omega(v: FloatArray) -> FloatArray:
        return np.asarray(sum(_swept(name, branch, branch.reach(v)) for branch in branches))

    first = min((*found.breaks, landscape.depth))
    lowest = min(branches, key=lambda branch: branch.base)
    noise = max(branch.noise for branch in branches)
    rises = lowest.rises
    if not rises.size:  # a flat floor between jumps
        floor = float(omega(np.array([first / 2]))[0])
        return Powers([(floor, 0.0)], landscape.depth, error=ERROR, route="line")
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
    """Length, area or volume between the start of a branch and u, which has all its digits."""
    start = np.asarray(branch.start)
    return between(name, start, start + branch.sign * u, u)
