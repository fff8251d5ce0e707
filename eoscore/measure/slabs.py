"""Volume below an energy in boxes in which V is taken as linear (Gilat and Raubenheimer 1966)."""

from __future__ import annotations

from itertools import pairwise, product
from math import factorial, sqrt
from typing import TYPE_CHECKING

import numpy as np

from eoscore.formula import evaluate_many, gradient
from eoscore.measure.coordinate import weight

if TYPE_CHECKING:
    from eoscore.formula import Formula
    from eoscore.formula.field import Field
    from eoscore.measure.base import FloatArray
    from eoscore.measure.mesh import Boxes

__all__ = ["Slabs"]

FLAT = 1e-3  # of the steepest side: a flatter one is taken as that steep, or digits are lost
CHUNK = 30_000  # boxes whose planes are found at once
BLOCK = 300_000  # pairs of box and energy at once


class Slabs:
    """Boxes with the mean of V in each (from V_min), half its span along each side, and their volume.

    Mean and slopes from V at the 2^d Gauss points of a box: with the mean in place of V at the centre the error
    falls as h^4, and what is left is the scatter of where the planes cut the boxes, which falls as h^3.
    """

    def __init__(self, field: Field, boxes: Boxes, v_min: float) -> None:
        parts = [self._planes(field, boxes.part(i, i + CHUNK)) for i in range(0, len(boxes.centre), CHUNK)]
        v, half, volume = (np.concatenate(column) for column in zip(*parts, strict=True))
        held = (volume > 0) & np.isfinite(v)
        v, half, volume = v[held] - v_min, half[held], volume[held]
        half = np.maximum(half, FLAT * half.max(axis=1, keepdims=True))
        half = np.maximum(half, 1e-12 * np.abs(v)[:, None] + 1e-300)
        order = np.argsort(v - half.sum(axis=1))
        self.v, self.half, self.volume = v[order], half[order], volume[order]

    def _planes(self, field: Field, boxes: Boxes) -> tuple[FloatArray, FloatArray, FloatArray]:
        """Mean of V, half spans (n, d) and volume of boxes."""
        n, d = boxes.centre.shape
        signs = np.array(list(product((-1.0, 1.0), repeat=d)))
        points = boxes.centre[:, None, :] + boxes.edge[:, None, :] * signs / (2 * sqrt(3))
        x = dict(zip(field.coordinates, points.reshape(-1, d).T, strict=True))
        v = np.broadcast_to(field.formula.evaluate(x), n * 2**d).reshape(n, -1)
        worth = np.prod([weight(name, np.abs(x[name])) for name in field.coordinates], axis=0).reshape(n, -1)
        half = np.abs(v @ signs) * (sqrt(3) / 2**d)
        centre = dict(zip(field.coordinates, boxes.centre.T, strict=True))
        within = np.prod([self._within(wall, field, centre, boxes) for wall in field.walls], axis=0)
        volume = np.prod(boxes.edge, axis=1) * worth.mean(axis=1) * within
        return np.asarray((v * worth).sum(axis=1) / worth.sum(axis=1)), half, volume

    def below(self, v: FloatArray) -> FloatArray:
        """Volume where V - V_min < v at ascending energies (n,)."""
        span = self.half.sum(axis=1)
        first = np.searchsorted(v, self.v - span)
        last = np.searchsorted(v, self.v + span)
        total = np.cumsum(np.bincount(last, self.volume, v.size + 1))[: v.size]
        counts = last - first
        ends = np.cumsum(counts)
        whole = int(ends[-1]) if ends.size else 0
        edges = np.searchsorted(ends, np.arange(0, whole + BLOCK, BLOCK)).tolist()
        for lo, hi in pairwise([0, *edges, ends.size]):
            box = np.repeat(np.arange(lo, hi), counts[lo:hi])
            before = np.repeat(ends[lo:hi] - counts[lo:hi], counts[lo:hi])
            energy = first[box] + np.arange(box.size) - (before - (ends[lo] - counts[lo] if lo < hi else 0))
            part = self._share(v[energy] - self.v[box], self.half[box]) * self.volume[box]
            total = total + np.bincount(energy, part, v.size)
        return np.asarray(total)

    def _within(self, wall: Formula, field: Field, x: dict[str, FloatArray], boxes: Boxes) -> FloatArray:
        """Share of each box on the inner side of a wall, taken as plane."""
        values = evaluate_many((wall, *gradient(wall, field.coordinates)), x)
        w, *slopes = (np.broadcast_to(value, len(boxes.centre)) for value in values)
        half = np.abs(np.nan_to_num(np.stack(slopes, axis=1))) * boxes.edge / 2
        half = np.maximum(half, FLAT * half.max(axis=1, keepdims=True)) + 1e-12 * np.abs(w)[:, None] + 1e-300
        return np.clip(self._share(np.clip(w, -half.sum(axis=1), half.sum(axis=1)), half), 0.0, 1.0)

    @staticmethod
    def _share(rise: FloatArray, half: FloatArray) -> FloatArray:
        """Share of a box where a linear function with these half spans is below `rise` from its centre."""
        d = half.shape[1]
        sides = half.T.copy()
        total = np.zeros_like(rise)
        for signs in product((1.0, -1.0), repeat=d):
            above = rise.copy()
            for sign, side in zip(signs, sides, strict=True):
                above += sign * side
            np.maximum(above, 0.0, out=above)
            power = above * above if d == 2 else above * above * above
            total += np.prod(signs) * power
        return np.asarray(total / (factorial(d) * np.prod(2 * sides, axis=0)))
