"""Survey a potential: where its bottom is, what shape it has, where and at what energy it leaks."""

from __future__ import annotations

from functools import lru_cache
from typing import TYPE_CHECKING

import numpy as np

from eoscore.measure.landscape_frame import aligned, expressed, turned_back
from eoscore.measure.landscape_line import survey_line
from eoscore.measure.landscape_record import Escape, Landscape, Minimum
from eoscore.measure.landscape_separable import independent_parts, together

if TYPE_CHECKING:
    from eoscore.formula.field import Field

__all__ = ["Escape", "Landscape", "Minimum", "survey"]


@lru_cache(maxsize=128)
def survey(field: Field) -> Landscape:
    """The landscape of a field of one, two or three coordinates.

    Independent coordinates are surveyed one by one; the last fields surveyed are remembered. Never raises for a
    potential that holds nothing: its `why` tells.
    """
    with np.errstate(all="ignore"):  # searches step over poles and far outside; what they find is checked
        return _surveyed(field)


def _surveyed(field: Field) -> Landscape:
    parts = independent_parts(field)
    if len(parts) > 1:
        return together(field.coordinates, [_surveyed(part) for part in parts])
    if len(field.coordinates) == 1:
        return survey_line(field)
    frame = aligned(field)
    if frame is not None:
        return turned_back(_surveyed(expressed(field, frame)), frame)
    from eoscore.measure.landscape_space import survey_space

    return survey_space(field)
