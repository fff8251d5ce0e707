"""Where a trap leaks: a picture that reaches as far as the escape point, where that of the whole trap does not."""

from __future__ import annotations

from typing import TYPE_CHECKING, NamedTuple

import numpy as np

from eoscore.show.report.view import View

if TYPE_CHECKING:
    from eoscore.measure.landscape_record import Escape
    from eoscore.place import TrapPlace

__all__ = ["WayOut", "leak_of", "way_out"]

_BEFORE, _BEYOND = 0.2, 0.4  # of the way to the escape point, by which the picture goes beyond its ends


class WayOut(NamedTuple):
    """The wider view, and the two coordinates in which the escape point lies farthest out."""

    view: View
    pair: tuple[int, int]


def leak_of(trap: TrapPlace) -> Escape | None:
    """The escape that limits a trap; None where there is none, or `E_max` cuts before it."""
    return None if trap.top < trap.landscape.depth else trap.landscape.escape


def way_out(view: View) -> WayOut | None:
    """None for one coordinate, and where the escape point is in the picture already or has no position."""
    escape = leak_of(view.trap)
    if escape is None or escape.position is None or view.shows(escape.position) or len(view.ranges) < 2:
        return None
    ranges, far = [], []
    for at, end, (low, high) in zip(view.trap.r_min, escape.position, view.ranges, strict=True):
        far.append(abs(end - at) / (high - low))
        edges = (at - _BEFORE * (end - at), end + _BEYOND * (end - at))
        ranges.append((min(low, *edges), max(high, *edges)))
    first, second = sorted(np.argsort(far)[-2:].tolist())
    return WayOut(View(view.trap, view.energy, tuple(ranges)), (first, second))
