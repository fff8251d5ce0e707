"""Where cautions look: at the ends of a grid, and at some states there; at all of a single answer."""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING

import numpy as np

from eoscore.answer.cautions import cautions_for
from eoscore.answer.grid import Grid
from eoscore.answer.record import Caution
from eoscore.answer.scene import Scene

if TYPE_CHECKING:
    from collections.abc import Iterable, Iterator, Sequence

    from eoscore.answer.chain import Part
    from eoscore.answer.record import Finding
    from eoscore.language.question import Axis, Question

__all__ = ["cautions_at", "inaccurate", "thinned"]

_STATES = (
    1000  # about as many show the extremes of quantities that bend slowly; the corners are always among them
)


def thinned(question: Question, *, backwards: bool = False) -> Iterator[Question]:
    """The question at stop after stop of its grid, with some of the states there, at one position."""
    grid, positions = Grid(question.over), question.coordinates
    states = [axis for axis in grid.conditions if axis.name not in positions]
    count = max(2, round(_STATES ** (1 / max(1, len(states)))))
    counts = {axis.name: 1 if axis.name in positions else count for axis in question.over}
    for index in np.ndindex(*(axis.points for axis in grid.parameters)):
        stop = {axis.name: -1 - i if backwards else i for axis, i in zip(grid.parameters, index, strict=True)}
        some = (_some(axis, counts[axis.name], stop.get(axis.name, 0)) for axis in question.over)
        yield replace(question, over=tuple(some))


def _some(axis: Axis, count: int, stop: int) -> Axis:
    if axis.thermodynamic:
        which = np.unique(np.linspace(0, axis.points - 1, min(count, axis.points)).astype(int))
    else:
        which = np.array([stop])
    values = tuple(axis.values[which].tolist())
    return replace(axis, kind="list", ends=values, points=len(values))


def cautions_at(parts: Sequence[Part]) -> tuple[Caution, ...]:
    """The cautions of the first and of the last part."""
    ends = [parts[place] for place in dict.fromkeys((0, len(parts) - 1))] if parts else []
    scenes = (Scene(p.binding, p.held, p.given, p.readings) for p in ends if p.held is not None)
    return tuple(caution for scene in scenes for caution in cautions_for(scene))


def inaccurate(findings: Iterable[tuple[str, Finding]], accuracy: float) -> Iterable[Caution]:
    """A caution where a relative error is above the one wanted."""
    missed = [f"{name} ({finding.worst():.0e})" for name, finding in findings if finding.worst() > accuracy]
    if missed:
        text = f"the relative error wanted, {accuracy:g}, was not reached by {', '.join(missed)}."
        yield Caution("accuracy", text)
