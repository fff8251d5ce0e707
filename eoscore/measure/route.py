"""The way from a field to its measure: routes in order of cost, the first that fits is taken."""

from __future__ import annotations

from functools import reduce
from math import inf
from typing import TYPE_CHECKING

import numpy as np

from eoscore.errors import NoAnswerError
from eoscore.measure.about import about
from eoscore.measure.arms import along_arms
from eoscore.measure.cells import cells
from eoscore.measure.composed import composed
from eoscore.measure.convolve import convolve
from eoscore.measure.crowded import Crowd
from eoscore.measure.flat import flat
from eoscore.measure.homogeneous import homogeneous
from eoscore.measure.landscape import survey
from eoscore.measure.landscape_separable import independent_parts
from eoscore.measure.line import line
from eoscore.measure.quadratic import quadratic

if TYPE_CHECKING:
    from eoscore.formula.field import Field
    from eoscore.measure.base import Measure
    from eoscore.measure.landscape_record import Landscape

__all__ = ["measure_of"]


def measure_of(field: Field, landscape: Landscape | None = None, ceiling: float = inf) -> Measure:
    """The measure of a field: the d-volume of its held region below each energy, J from the bottom.

    `landscape` is surveyed where it is needed and not given. `ceiling`: energies (J) above it will not be asked,
    which may save work, and is needed where the region grows without bound towards the escape. Independent
    coordinates are taken apart and convolved. Raises NoAnswerError where nothing is held, or where the volume
    is infinite.
    """
    with np.errstate(all="ignore"):  # routes look far outside and at poles; what they find is checked
        return _of_parts(field, landscape, ceiling)


def _of_parts(field: Field, landscape: Landscape | None, ceiling: float) -> Measure:
    parts = independent_parts(field)
    if len(parts) > 1 and (whole := quadratic(field)) is None:
        measures = [measure_of(part, ceiling=ceiling) for part in parts]
        return reduce(convolve, sorted(measures, key=_cost)).cut(ceiling)
    if len(parts) > 1 and whole is not None:
        return whole.cut(ceiling)
    return _of_one(field, landscape, ceiling).cut(ceiling)


def _cost(measure: Measure) -> int:
    """Powers first: what combines exactly is combined before anything is sampled; the roughest last."""
    return 0 if measure.powers() else 2 if isinstance(measure, Crowd) else 1


def _of_one(field: Field, landscape: Landscape | None, ceiling: float) -> Measure:
    """The measure of a field whose coordinates do not separate."""
    closed = quadratic(field) or homogeneous(field) or composed(field, measure_of)
    if closed is not None:
        return closed
    landscape = landscape or survey(field)
    if not landscape.holds:
        raise NoAnswerError(landscape.why)
    found = (
        flat(field, landscape, measure_of) or line(field, landscape) or _in_space(field, landscape, ceiling)
    )
    if found is None:
        raise NoAnswerError(
            "this potential is none that eoscore can measure: it takes one, two or three coordinates"
        )
    # A pass at a place of its own keeps the region below it away from everything that lies further out.
    found.bounded = landscape.escape is not None and landscape.escape.position is not None
    return found


def _in_space(field: Field, landscape: Landscape, ceiling: float) -> Measure | None:
    """By rays or cells, in coordinates along the arms where these leave the axes."""
    turned = along_arms(field, landscape, min(landscape.depth, ceiling))
    if turned is None:
        return about(field, landscape, ceiling) or cells(field, landscape, ceiling)
    field, landscape, unit = turned
    found = about(field, landscape, ceiling) or cells(field, landscape, ceiling)
    return found and found.scaled(unit)
