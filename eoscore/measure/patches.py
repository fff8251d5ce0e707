"""Integrals over directions, adaptive: patches that are halved where the integrand is rough."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from eoscore.measure.kronrod import NODES, kronrod

if TYPE_CHECKING:
    from collections.abc import Callable

    from numpy.typing import NDArray

    from eoscore.measure.base import FloatArray
    from eoscore.measure.rays import Rays

__all__ = ["Box", "Patches"]

WANTED, ENOUGH = 1e-10, 1e-5  # relative errors at which halving ends, with few rays and with many
FINEST = 1e-7  # of the first patches: none is halved beyond
WORST = 0.02  # of the greatest error: patches above it are halved together
PROBES = 4  # energies of many that decide where patches are halved
TRIES = 3  # times that the worst of the others are added to them
SAFE = 10.0  # that a rule gains less than the one before it
LEAST = 1e-3  # and it is not trusted to gain more


Box = tuple[int, tuple[float, ...], tuple[float, ...]]  # side of the cube or 0, lower and upper ends


@dataclass(frozen=True)
class _Patch:
    """A box of directions, and where its rays are kept."""

    side: int
    low: tuple[float, ...]
    high: tuple[float, ...]
    rays: Rays
    first: int

    def halves(self, axis: int) -> list[Box]:
        """The two halves along an axis."""
        middle = (self.low[axis] + self.high[axis]) / 2
        upper = (*self.low[:axis], middle, *self.low[axis + 1 :])
        lower = (*self.high[:axis], middle, *self.high[axis + 1 :])
        return [(self.side, self.low, lower), (self.side, upper, self.high)]


class Patches:
    """int f(t) dt over boxes of one or two parameters, for many energies at once.

    make: rays for sides (n,) and parameters (n, m). first: the boxes to begin with, as (side, low, high).
    most: rays of all patches together, where halving ends; many: from how many on less accuracy will do. Patches
    stay as fine as the highest energies wanted.
    """

    def __init__(
        self,
        make: Callable[[FloatArray, FloatArray], Rays],
        first: list[Box],
        most: int,
        many: int,
    ) -> None:
        self._make, self._most, self._many = make, most, many
        self._axes = len(first[0][1])
        self._size = NODES**self._axes
        self._known: dict[Box, _Patch] = {}
        self._first = self._patches(first)
        self._leaves, self._highest = list(self._first), 0.0

    def integral(self, v: FloatArray) -> tuple[FloatArray, FloatArray]:
        """The integral of what the rays sweep at energies (n,), in any order, and its relative error."""
        order = np.argsort(v)
        back = np.argsort(order)
        total, error = self._integral(v[order])
        return total[back], error[back]

    def _integral(self, v: FloatArray) -> tuple[FloatArray, FloatArray]:
        leaves = self._leaves if v[-1] >= self._highest else list(self._first)
        few = np.union1d(v[:: max(1, (v.size - 1) // PROBES)], v[-1:])
        for _ in range(TRIES):
            leaves = self._refined(leaves, few)
            values, errors = self._evaluated(leaves, v)
            total = np.maximum(values.sum(axis=0), 1e-300)
            miss = errors.sum(axis=(0, 1)) / total
            rays = len(leaves) * self._size
            wanted = ENOUGH if rays >= self._many else WANTED
            if miss.max() <= 2 * wanted or rays >= self._most:
                break
            few = np.union1d(few, v[np.argsort(miss)[-2:]])
        if v[-1] >= self._highest:
            self._leaves, self._highest = leaves, float(v[-1])
        return total, miss

    def _refined(self, leaves: list[_Patch], v: FloatArray) -> list[_Patch]:
        """Patches in which the integrals at these energies are as good as wanted, or as may be."""
        values, errors = self._evaluated(leaves, v)
        while True:
            total = np.maximum(values.sum(axis=0), 1e-300)
            rays = len(leaves) * self._size
            wanted = WANTED if rays < self._many else ENOUGH
            if np.all(errors.sum(axis=(0, 1)) <= wanted * total) or rays >= self._most:
                return leaves
            chosen = self._rough(leaves, errors, total, wanted)
            if not chosen.size:
                return leaves
            axes = np.argmax((errors[chosen] / total).max(axis=2), axis=1)
            halves = [
                half for k, axis in zip(chosen, axes, strict=True) for half in leaves[k].halves(int(axis))
            ]
            made = self._patches(halves)
            more = self._evaluated(made, v)
            kept = np.delete(np.arange(len(leaves)), chosen)
            leaves = [leaves[k] for k in kept] + made
            values = np.concatenate([values[kept], more[0]])
            errors = np.concatenate([errors[kept], more[1]])

    def _rough(
        self, leaves: list[_Patch], errors: FloatArray, total: FloatArray, wanted: float
    ) -> NDArray[np.intp]:
        """The worst patches, of those that together hold all but half of the error that may stay."""
        share = (errors.sum(axis=1) / total).max(axis=1)
        order = np.argsort(share)
        staying = (np.cumsum(share[order]) <= wanted / 2) | (share[order] < WORST * share.max())
        chosen = order[~staying][::-1]
        wide = [max(np.subtract(leaves[k].high, leaves[k].low)) > FINEST for k in chosen]
        room = self._most // self._size - len(leaves) + 1
        return np.asarray(chosen[np.array(wide, dtype=bool)][:room])

    def _patches(self, boxes: list[Box]) -> list[_Patch]:
        """Patches, whose rays are walked together where they are new."""
        new = [box for box in boxes if box not in self._known]
        if new:
            self._known.update(zip(new, self._walked(new), strict=True))
        return [self._known[box] for box in boxes]

    def _walked(self, boxes: list[Box]) -> list[_Patch]:
        node = kronrod()[0]
        grid = np.stack(np.meshgrid(*[node] * self._axes, indexing="ij"), axis=-1).reshape(-1, self._axes)
        low, high = (np.array([box[k] for box in boxes]) for k in (1, 2))
        points = (low[:, None, :] + (high - low)[:, None, :] * grid).reshape(-1, self._axes)
        sides = np.repeat([box[0] for box in boxes], self._size)
        rays = self._make(sides, points)
        return [_Patch(*box, rays, k * self._size) for k, box in enumerate(boxes)]

    def _evaluated(self, patches: list[_Patch], v: FloatArray) -> tuple[FloatArray, FloatArray]:
        """Integrals (patches, n) and their errors along each axis (patches, axes, n)."""
        order = {id(patch.rays): patch.rays for patch in patches}
        values = np.empty((len(patches), v.size))
        errors = np.empty((len(patches), self._axes, v.size))
        for key, rays in order.items():
            mine = [k for k, patch in enumerate(patches) if id(patch.rays) == key]
            which = np.concatenate([patches[k].first + np.arange(self._size) for k in mine])
            swept = rays.swept(v, which).reshape(len(mine), *[NODES] * self._axes, v.size)
            area = np.array([np.prod(np.subtract(patches[k].high, patches[k].low)) for k in mine])
            values[mine], errors[mine] = _summed(swept, area)
        return values, errors


def _summed(swept: FloatArray, area: FloatArray) -> tuple[FloatArray, FloatArray]:
    """The finest rule along all axes, and its error along each."""
    _, fine, *coarse = kronrod()
    if swept.ndim == 3:
        whole = np.einsum("pin,i->pn", swept, fine)
        rougher = [[np.einsum("pin,i->pn", swept, rule) for rule in coarse]]
    else:
        first = np.einsum("pijn,j->pin", swept, fine)
        second = np.einsum("pijn,i->pjn", swept, fine)
        whole = np.einsum("pin,i->pn", first, fine)
        rougher = [[np.einsum("pin,i->pn", half, rule) for rule in coarse] for half in (first, second)]
    errors = np.stack([_error(whole, *pair) for pair in rougher], axis=1)
    return whole * area[:, None], errors * area[:, None, None]


def _error(fine: FloatArray, coarse: FloatArray, coarsest: FloatArray) -> FloatArray:
    """Of the finest of three rules: as much less than its difference from the second as that is from the third."""
    near, far = np.abs(fine - coarse), np.abs(coarse - coarsest)
    with np.errstate(divide="ignore", invalid="ignore"):
        gain = np.where(far > 0, near / far, 1.0)
    return np.asarray(near * np.clip(SAFE * gain, LEAST, 1.0))
