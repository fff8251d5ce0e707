"""Cautions: one file per matter, each a function from a scene to the cautions it deserves.

Every text tells the size of the matter in numbers, so that a reader can judge it; silence means that the matter
is small or that its size is unknown here.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

from eoscore.answer.cautions.collapse import collapse
from eoscore.answer.cautions.dense import dense
from eoscore.answer.cautions.finite_number import finite_number
from eoscore.answer.cautions.hardware import hardware
from eoscore.answer.cautions.interactions import interactions
from eoscore.answer.cautions.level_spacing import level_spacing
from eoscore.answer.cautions.local_picture import local_picture
from eoscore.answer.cautions.shallow import shallow
from eoscore.answer.cautions.zone import zone

if TYPE_CHECKING:
    from collections.abc import Callable, Iterator

    from eoscore.answer.record import Caution
    from eoscore.answer.scene import Scene

__all__ = ["cautions_for"]

_MATTERS: tuple[Callable[[Scene], Iterator[Caution]], ...] = (
    level_spacing,
    local_picture,
    finite_number,
    interactions,
    collapse,
    shallow,
    dense,
    zone,
    hardware,
)


def cautions_for(scene: Scene) -> tuple[Caution, ...]:
    """All cautions that a scene deserves, the physics first, the hardware last."""
    return tuple(caution for matter in _MATTERS for caution in matter(scene))
