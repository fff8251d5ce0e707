"""Column density: the density integrated along a straight line through the trap.

Along the line the gas is one with the momenta of all directions and the positions of one, so that its states are
counted as those of every trap: by the measure of V along the line, combined with that of the momenta.
"""

from __future__ import annotations

from typing import TYPE_CHECKING, NamedTuple

import numpy as np

from eoscore.errors import NoAnswerError
from eoscore.measure import convolve, measure_of
from eoscore.measure.landscape import survey
from eoscore.state.ensembles import ensemble_of

if TYPE_CHECKING:
    from collections.abc import Mapping

    from eoscore.place import TrapPlace
    from eoscore.state.ensemble import Ensemble
    from eoscore.state.held import HeldGas

from eoscore.state.positions import line_along

__all__ = ["Line", "line_of"]

NEARLY = 1e-9  # of the trap's own energies, by which a line's bottom may lie below that of the trap


class Line(NamedTuple):
    """The ensemble of a line, per m^(d - 1), and the height of the line's bottom above that of the trap in J."""

    ensemble: Ensemble
    height: float


def line_of(held: HeldGas, trap: TrapPlace, along: str, others: Mapping[str, float]) -> Line | None:
    """The gas on a line along one coordinate, the others given in m; None where the trap holds nothing there.

    NoAnswerError where the line meets a deeper well that is none of the trap's.
    """
    field = line_along(trap, along, others)
    landscape = survey(field)
    if not landscape.holds or landscape.bottom is None:
        return None
    height = landscape.bottom.value - trap.v_min
    if height < -NEARLY * (abs(trap.v_min) + abs(landscape.bottom.value)):
        where = f"at {along} = {landscape.bottom.position[0]:.6g} m"
        raise NoAnswerError(
            f"the line along {along} meets a well that is deeper than the trap's own, {where}"
        )
    height = max(height, 0.0)
    top = held.top - height
    if not top > 0:
        return None
    measure = measure_of(field, landscape, top if np.isfinite(top) else np.inf)
    return Line(ensemble_of(held.gas, convolve(held.momentum, measure.cut(top)).cut(top)), height)
