"""Column density: the density integrated along a straight line through the trap.

Along the line the gas is one with the momenta of all directions and the positions of one, so that its states are
counted as those of every trap: by the measure of V along the line, combined with that of the momenta.
"""

from __future__ import annotations

from typing import TYPE_CHECKING, NamedTuple

import numpy as np

from eoscore.errors import NoAnswerError
from eoscore.formula import constant
from eoscore.formula.field import Field
from eoscore.measure import convolve, measure_of
from eoscore.measure.landscape import survey
from eoscore.measure.landscape_separable import independent_parts
from eoscore.state.ensembles import ensemble_of
from eoscore.state.positions import height_in, line_along

if TYPE_CHECKING:
    from collections.abc import Iterator, Mapping

    from eoscore.place import TrapPlace
    from eoscore.state.ensemble import Ensemble
    from eoscore.state.held import HeldGas
    from eoscore.state.reading import FloatArray

__all__ = ["Line", "lines_of"]

_MOST = 4096  # lines that are kept for the next state
NEARLY = 1e-9  # of the trap's own energies, by which a line's bottom may lie below that of the trap


class Line(NamedTuple):
    """The ensemble of a line, per m^(d - 1), and the height of the line's bottom above that of the trap in J.

    Of lines that are alike, `height` has the heights; it is infinite where there is none of them.
    """

    ensemble: Ensemble
    height: FloatArray


def lines_of(held: HeldGas, trap: TrapPlace, along: str, others: Mapping[str, FloatArray]) -> Iterator[Line]:
    """The lines along one coordinate at the other positions, arrays of one shape in m.

    Where V is a sum in which that coordinate stands apart, they are one line at many heights.
    """
    shape = np.broadcast_shapes(*(x.shape for x in others.values()))
    rest = _across(trap, along) if np.isinf(held.top) else None
    if rest is not None:
        bottom = dict(zip(trap.field.coordinates, trap.r_min, strict=True))
        line = _kept(held, trap, along, {name: bottom[name] for name in others})
        if line is not None:
            above = height_in(rest, others) - height_in(rest, bottom, walled=False)
            yield Line(line.ensemble, np.broadcast_to(line.height + np.maximum(above, 0.0), shape))
        return
    for index in np.ndindex(shape):
        line = _kept(held, trap, along, {name: float(x[index]) for name, x in others.items()})
        if line is not None:
            height = np.full(shape, np.inf)
            height[index] = line.height
            yield Line(line.ensemble, height)


def _across(trap: TrapPlace, along: str) -> Field | None:
    """V across the lines, where it is that and V along them; None where it is not."""
    parts = independent_parts(trap.field)
    others = [part for part in parts if part.coordinates != (along,)]
    if len(others) == len(parts):
        return None
    return Field(
        tuple(name for part in others for name in part.coordinates),
        sum((part.formula for part in others), constant(0)),
        tuple(wall for part in others for wall in part.walls),
    )


def _kept(held: HeldGas, trap: TrapPlace, along: str, others: Mapping[str, float]) -> Line | None:
    lines, key = held.model.lines, (along, *sorted(others.items()))
    if key not in lines:
        if len(lines) >= _MOST:
            lines.clear()
        lines[key] = line_of(held, trap, along, others)
    return lines[key]


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
    return Line(ensemble_of(held.gas, convolve(held.momentum, measure.cut(top)).cut(top)), np.asarray(height))
