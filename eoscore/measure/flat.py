"""Route: a level potential between walls, in one coordinate."""

from __future__ import annotations

from math import isfinite
from typing import TYPE_CHECKING

import numpy as np

from eoscore.errors import NoAnswerError
from eoscore.measure.coordinate import content, least
from eoscore.measure.landscape_pieces import positive_intervals
from eoscore.measure.powers import Powers

if TYPE_CHECKING:
    from eoscore.formula.field import Field
    from eoscore.measure.base import Measure
    from eoscore.measure.landscape_record import Landscape

__all__ = ["flat"]


def flat(field: Field, landscape: Landscape) -> Measure | None:
    """The length, disc or ball that the walls leave, all of it at v = 0; None for another field.

    Raises NoAnswerError where the walls do not close it.
    """
    if len(field.coordinates) != 1 or not field.formula.variables.isdisjoint(field.coordinates):
        return None
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
