"""Route: a level potential between walls, whose measure is a floor."""

from __future__ import annotations

from math import isfinite
from typing import TYPE_CHECKING

import numpy as np

from eoscore.errors import NoAnswerError
from eoscore.formula.field import Field
from eoscore.measure.coordinate import content, least
from eoscore.measure.landscape import survey
from eoscore.measure.landscape_pieces import positive_intervals
from eoscore.measure.powers import Powers

if TYPE_CHECKING:
    from collections.abc import Callable

    from eoscore.measure.base import Measure
    from eoscore.measure.landscape_record import Landscape

__all__ = ["flat"]


def flat(field: Field, landscape: Landscape, measure_of: Callable[[Field], Measure]) -> Measure | None:
    """The length, area or volume that the walls leave, all of it at v = 0; None for another field.

    In several coordinates one wall w > 0 is taken as the potential -w, whose measure at 0 is what it leaves.
    Raises NoAnswerError where the walls do not close it.
    """
    if not field.formula.variables.isdisjoint(field.coordinates):
        return None
    if len(field.coordinates) == 1:
        return _stretch(field, landscape)
    if not field.walls:
        raise NoAnswerError(f"no wall closes V along {', '.join(field.coordinates)}: the place has no end")
    wall, *others = field.walls
    within = Field(field.coordinates, -wall, tuple(others))
    bottom = survey(within).bottom
    if bottom is None:
        raise NoAnswerError("the walls do not close the place: it has no end")
    measure = measure_of(within)
    if -bottom.value > measure.top:
        raise NoAnswerError("the walls do not close the place: it has no end")
    return Powers([(float(measure.volume(-bottom.value)), 0.0)], error=measure.error, route=measure.route)


def _stretch(field: Field, landscape: Landscape) -> Measure:
    (name,) = field.coordinates
    place = landscape.bottom.position[0] if landscape.bottom else 0.0
    ends = [ends for ends in positive_intervals(field.walls, name) if ends[0] <= place <= ends[1]]
    lo, hi = ends[0] if ends else (-np.inf, np.inf)
    lo = max(lo, least(name))
    if not (isfinite(lo) and isfinite(hi)):
        raise NoAnswerError(
            f"V does not depend on {name} and no wall closes it: the place has no end along {name}"
        )
    volume = float(content(name, np.array(hi)) - content(name, np.array(lo)))
    return Powers([(volume, 0.0)], route="closed form")
