"""Route: cells. Several wells, far arms, walls of any shape, energies near a pass: V linear in small boxes."""

from __future__ import annotations

from math import inf
from typing import TYPE_CHECKING

import numpy as np

from eoscore.errors import NoAnswerError
from eoscore.measure.about import NEARING, OPEN, refuse_infinite
from eoscore.measure.bottom import beginning
from eoscore.measure.coordinate import dimension
from eoscore.measure.critical import saddles
from eoscore.measure.mesh import SKETCH, held_boxes, held_lines, typical_level
from eoscore.measure.need import Need
from eoscore.measure.rays import Declined
from eoscore.measure.sampled import Sampled
from eoscore.measure.slabs import Slabs
from eoscore.measure.wells import Wells

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from eoscore.formula.field import Field
    from eoscore.measure.base import FloatArray, Measure
    from eoscore.measure.landscape_record import Landscape

__all__ = ["cells"]

DOUBT = 0.3  # of the difference between boxes and halved boxes, which is eight times the error of the latter
RUNGS = (1.45, 2.0, 4.0)  # ratio of the levels for which boxes of their own are made: few, many, without end
# Shares of the level up to which the wells may be taken along rays.
STARTS = (0.85, 0.5, 0.25, 0.1, 0.03, 0.01, 1e-3)
GOOD = 3e-5  # error at which they are
FADING = 0.2  # of the joint: how far above it boxes are led to the value of the rays
LOWEST = 2e-3  # of the level, where they may not: below it Omega is taken as a power


def cells(field: Field, landscape: Landscape, ceiling: float) -> Measure | None:
    """Omega of any field of two or three coordinates, up to the escape energy or the ceiling.

    Below the energy at which wells join or stop being star-shaped, from rays; above, the volume in boxes
    that join the bottom at the escape energy, with V linear in each; the error from boxes twice as wide.
    """
    if len(field.coordinates) not in (2, 3) or landscape.bottom is None:
        return None
    top = min(landscape.depth, ceiling)
    boxed = _Boxed(field, landscape, top)
    if landscape.escape is not None and landscape.escape.position is None and top > OPEN * landscape.depth:
        refuse_infinite(*(boxed.under(float(share * boxed.level)) for share in NEARING))
    exponent, scale, foot = boxed.beginning()
    rises = tuple(minimum.value - landscape.bottom.value for minimum in landscape.minima[1:])
    return Sampled(
        boxed,
        exponent,
        scale=scale,
        foot=foot,
        top=top,
        error=boxed.error_below,
        route="cells",
        breaks=(*rises, *boxed.saddles(), *((boxed.joint,) if boxed.joint else ())),
    )


class _Boxed:
    """Omega from rays up to `joint` and from boxes above."""

    def __init__(self, field: Field, landscape: Landscape, top: float) -> None:
        bottom = landscape.bottom
        if bottom is None:
            raise NoAnswerError(landscape.why)
        self.field, self.v_min = field, bottom.value
        self.minima = landscape.minima
        self.errors: dict[int, float] = {}
        self.low_error = 0.0  # of the rays
        self.level = top if top < inf else typical_level(field, bottom.value)
        self.slabs: dict[int, tuple[Slabs, Slabs]] = {}
        self.rays, self.joint = self._low(landscape)
        self.rung = RUNGS[2] if top == inf else RUNGS[0] if self.joint > top / 3 else RUNGS[1]

    def _low(self, landscape: Landscape) -> tuple[Wells | None, float]:
        """The wells along rays, as high as that goes."""
        for share in STARTS:
            end = share * self.level
            try:
                wells = Wells(self.field, landscape.minima, end, few=True)
            except Declined:
                continue
            if wells.exponent is None:
                break
            if np.all(wells.with_error(end * np.array([0.5, 1.0]), Need())[1] <= GOOD):
                return wells, end
        return None, 0.0

    def saddles(self) -> tuple[float, ...]:
        """Energies at which wells join or arms open, below the level."""
        lines = held_lines(self.field, self.minima, self.level, SKETCH[len(self.field.coordinates)])
        return tuple(saddles(self.field, lines, self.v_min, self.level)[0].tolist())

    def under(self, v: float) -> float:
        """Omega at one energy, from boxes of its own."""
        boxes = held_boxes(self.field, self.minima, v)
        return float(Slabs(self.field, boxes, self.v_min).below(np.array([v]))[0])

    def beginning(self) -> tuple[float, float, float | None]:
        """Exponent, scale and foot of Omega."""
        if self.rays is not None and self.rays.exponent is not None:
            return self.rays.exponent, self.rays.scale, None
        foot = LOWEST * self.level
        v = foot * np.geomspace(1, 3, 20)
        steady, _ = beginning(v, self(v))
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
            result[low] = self._along(v[low])
        if not low.all():
            joint = np.array([self.joint])
            miss = self._along(joint) - self._boxes(joint * (1 + 1e-7))  # in the boxes that stand above it
            result[~low] = self._boxes(v[~low]) + miss * np.exp(-(((v[~low] / self.joint - 1) / FADING) ** 2))
        return result

    def _along(self, v: FloatArray) -> FloatArray:
        if self.rays is None:
            return np.zeros_like(v)
        volume, error = self.rays.with_error(v, Need())
        self.low_error = max(self.low_error, float(np.max(error)))
        return volume

    def _boxes(self, v: FloatArray) -> FloatArray:
        """Volume in boxes below energies, in any order, each in boxes that are made for its height."""
        result = np.empty_like(v)
        rung = self._rungs(v)
        for k in np.unique(rung):
            chosen = np.flatnonzero(rung == k)
            order = chosen[np.argsort(v[chosen])]
            coarse, fine = (slabs.below(v[order]) for slabs in self._made(int(k)))
            seen = fine > 0
            doubt = np.abs(fine - coarse)[seen] / fine[seen]
            self.errors[int(k)] = max(self.errors.get(int(k), 0.0), DOUBT * float(np.max(doubt, initial=0.0)))
            result[order] = fine
        return result

    def error_below(self, v: FloatArray) -> FloatArray:
        """Relative error up to energies, as far as it is known."""
        low = self.low_error
        known = sorted(self.errors)
        worst = np.maximum.accumulate([low, *(self.errors[k] for k in known)])
        place = np.searchsorted(known, self._rungs(np.maximum(v, 1e-300)), side="right")
        return np.asarray(np.where(v <= self.joint, low, worst[place]))

    def _rungs(self, v: FloatArray) -> NDArray[np.int_]:
        """Number of the rung up to which an energy belongs, 0 the one that ends at the level."""
        return np.asarray(np.ceil(np.log(v / self.level) / np.log(self.rung) - 1e-9).astype(int))

    def _made(self, k: int) -> tuple[Slabs, Slabs]:
        """Boxes, and boxes half as wide, up to a rung of the ladder of levels."""
        if k not in self.slabs:
            boxes = held_boxes(self.field, self.minima, float(self.level * self.rung**k))
            self.slabs[k] = (
                Slabs(self.field, boxes, self.v_min),
                Slabs(self.field, boxes.halved(), self.v_min),
            )
        return self.slabs[k]
