"""Route: cells. Several wells, far arms, walls of any shape, energies near a pass: V linear in small boxes."""

from __future__ import annotations

from math import inf
from typing import TYPE_CHECKING

import numpy as np

from eoscore.errors import NoAnswerError
from eoscore.measure.about import Wells
from eoscore.measure.bottom import beginning
from eoscore.measure.coordinate import dimension
from eoscore.measure.mesh import held_boxes, typical_level
from eoscore.measure.rays import Declined
from eoscore.measure.sampled import Sampled
from eoscore.measure.slabs import Slabs

if TYPE_CHECKING:
    from eoscore.formula.field import Field
    from eoscore.measure.base import FloatArray, Measure
    from eoscore.measure.landscape_record import Landscape

__all__ = ["cells"]

DOUBT = 0.03  # of the difference between boxes and halved boxes: the error that extrapolation leaves, at most
RUNG = 4.0  # ratio of the levels for which boxes of their own are made
STARTS = 0.5 ** np.arange(1, 31)  # of the level: up to there the wells may be taken along rays
LOWEST = 2e-3  # of the level, where they may not: below it Omega is taken as a power


def cells(field: Field, landscape: Landscape) -> Measure | None:
    """Omega of any field of two or three coordinates.

    Below the energy at which wells join or stop being star-shaped, from rays; above, the volume in boxes
    that join the bottom at the escape energy, with V linear in each, extrapolated from two sizes of boxes.
    """
    if len(field.coordinates) not in (2, 3) or landscape.bottom is None:
        return None
    boxed = _Boxed(field, landscape)
    exponent, scale, foot = boxed.beginning()
    rises = tuple(minimum.value - landscape.bottom.value for minimum in landscape.minima[1:])
    return Sampled(
        boxed,
        exponent,
        scale=scale,
        foot=foot,
        top=landscape.depth,
        error=lambda: boxed.error,
        route="cells",
        breaks=(*rises, boxed.joint) if boxed.joint else rises,
    )


class _Boxed:
    """Omega from rays up to `joint` and from boxes above; error: relative, the greatest so far."""

    def __init__(self, field: Field, landscape: Landscape) -> None:
        bottom = landscape.bottom
        if bottom is None:
            raise NoAnswerError(landscape.why)
        self.field, self.v_min, self.depth = field, bottom.value, landscape.depth
        self.wells = tuple(minimum.position for minimum in landscape.minima)
        self.error = 1e-10
        self.level = landscape.depth if landscape.depth < inf else typical_level(field, bottom.value)
        self.slabs: dict[int, tuple[Slabs, Slabs]] = {}
        self.rays, self.joint = self._low(landscape)

    def _low(self, landscape: Landscape) -> tuple[Wells | None, float]:
        """The wells along rays, as high as that goes."""
        for share in STARTS:
            try:
                return Wells(self.field, landscape.minima, float(share * self.level)), float(
                    share * self.level
                )
            except Declined:
                continue
        return None, 0.0

    def beginning(self) -> tuple[float, float, float | None]:
        """Exponent, scale and foot of Omega."""
        if self.rays is not None:
            return self.rays.exponent, self.rays.scale, None
        foot = LOWEST * self.level
        v = foot * np.geomspace(1, 3, 20)
        steady, _ = beginning(v, self._boxes(v))
        d = dimension(self.field)
        likely = [k / p for k in range(1, d + 1) for p in (1, 2, 3, 4, 6)]
        near = min(likely, key=lambda k: abs(k - steady))
        return (near if abs(near - steady) < 0.01 else steady), foot, foot

    def __call__(self, v: FloatArray) -> FloatArray:
        """Omega at energies (n,) above 0, in any order."""
        if self.rays is None:
            return self._boxes(v)
        result = np.empty_like(v)
        low = v <= self.joint
        if low.any():
            result[low] = self.rays(v[low])
        if not low.all():
            start = np.array([self.joint])
            result[~low] = self.rays(start) + self._boxes(v[~low], start)
        return result

    def _boxes(self, v: FloatArray, start: FloatArray | None = None) -> FloatArray:
        """Volume between `start` (0) and energies, in any order, each in boxes that are made for its height."""
        result = np.empty_like(v)
        rung = np.ceil(np.log(v / self.level) / np.log(RUNG) - 1e-9).astype(int)
        for k in np.unique(rung):
            chosen = np.flatnonzero(rung == k)
            order = chosen[np.argsort(v[chosen])]
            energies = v[order] if start is None else np.concatenate([start, v[order]])
            coarse, fine = (slabs.below(energies) for slabs in self._made(int(k)))
            doubt = np.abs(fine - coarse)
            volume = fine + (fine - coarse) / 3
            if start is not None:
                doubt, volume = np.abs(doubt - doubt[0])[1:] + doubt[0], (volume - volume[0])[1:]
                whole = fine[1:]
            else:
                whole = fine
            self.error = max(
                self.error, DOUBT * float(np.max(doubt[whole > 0] / whole[whole > 0], initial=0.0))
            )
            result[order] = volume
        return result

    def _made(self, k: int) -> tuple[Slabs, Slabs]:
        """Boxes, and boxes half as wide, up to a rung of the ladder of levels."""
        if k not in self.slabs:
            boxes = held_boxes(self.field, self.wells, self.v_min, float(self.level * RUNG**k))
            self.slabs[k] = (
                Slabs(self.field, boxes, self.v_min),
                Slabs(self.field, boxes.halved(), self.v_min),
            )
        return self.slabs[k]
