"""Integrals over directions, adaptive: patches that are halved where the integrand is rough."""

from __future__ import annotations

from collections.abc import Callable, Hashable
from functools import partial
from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import NDArray

from eoscore.measure.base import FloatArray
from eoscore.measure.kronrod import NODES, kronrod
from eoscore.measure.rays import Rays

if TYPE_CHECKING:
    from eoscore.measure.need import Wanted

__all__ = ["Box", "Patches", "eased"]

ENOUGH, EASED = (
    1e-5,
    1e3,
)  # relative error at which halving ends with many rays, or so many times what is wanted
FINEST = 1e-7  # of the first patches: none is halved beyond
WORST = 0.2
PROBES = 4  # energies of many that decide where patches are halved
TRIES = 5  # times that the worst of the others are added to them
SAFE = 10.0  # that a rule gains less than the one before it
LEAST = 1e-3  # and it is not trusted to gain more


Sweep = Callable[[Rays, NDArray[np.intp]], FloatArray]
Allowed = Callable[[FloatArray, bool], FloatArray]
Box = tuple[int, tuple[float, ...], tuple[float, ...]]  # side of the cube or 0, lower and upper ends

Memory = dict[Box, tuple[FloatArray, FloatArray]]  # integrals over boxes and their errors


class Patches:
    """int f(t) dt over boxes of one or two parameters, for many energies at once.

    make: rays for sides (n,) and parameters (n, m). first: the boxes to begin with, as (side, low, high).
    most: rays of all patches together, where halving ends; many: from how many on less accuracy will do. Rays are
    kept from call to call.
    """

    def __init__(
        self,
        make: Callable[[FloatArray, FloatArray], Rays],
        first: list[Box],
        most: int,
        many: int,
    ) -> None:
        self._make, self._first, self._most, self._many = make, first, most, many
        self._axes = len(first[0][1])
        self._size = NODES**self._axes
        self._walked: dict[Box, tuple[Rays, int]] = {}  # and which of them is the first of a box
        self._remembered: dict[Hashable, Memory] = {}

    def integral(self, v: FloatArray, wanted: Wanted) -> tuple[FloatArray, FloatArray]:
        """The integral of what the rays sweep at energies (n,), in any order, and its relative error."""
        order = np.argsort(v)
        back = np.argsort(order)
        total, error = self._integral(v[order], wanted)
        return total[back], error[back]

    def _integral(self, v: FloatArray, wanted: Wanted) -> tuple[FloatArray, FloatArray]:
        leaves = self._first
        few = np.union1d(v[:: max(1, (v.size - 1) // PROBES)], v[-1:])
        for _ in range(TRIES):
            allowed = partial(_allowed, few, wanted)
            leaves = self._refined(leaves, partial(_swept, few), allowed)[0]
            total, miss = _added(*self._evaluated(leaves, partial(_swept, v)))
            excess = miss / self._eased(leaves, partial(_allowed, v, wanted), total)
            if excess.max() <= 2 or len(leaves) * self._size >= self._most:
                break
            few = np.union1d(few, v[np.argsort(excess)[-3:]])
        total = np.maximum(total, 1e-300)
        return total, miss / total

    def settled(self, sweep: Sweep, allowed: Allowed, key: Hashable) -> tuple[FloatArray, FloatArray]:
        """The integral of numbers (n,) that each ray gives, and its error.

        sweep: rays, and which of them (m,), to the numbers (m, n). allowed: integrals, and whether the rays are many,
        to the errors that may stay. key: names the sweep, whose patches are remembered.
        """
        memory = self._remembered.setdefault(key, {})
        _, values, errors = self._refined(self._first, sweep, allowed, memory)
        return _added(values, errors)

    def release(self) -> None:
        """Let go of all rays; they take tens of megabytes."""
        self._walked.clear()

    def _eased(self, leaves: list[Box], allowed: Allowed, total: FloatArray) -> FloatArray:
        """Errors that may stay."""
        return np.maximum(allowed(total, len(leaves) * self._size >= self._many), 1e-300)

    def _refined(
        self, leaves: list[Box], sweep: Sweep, allowed: Allowed, memory: Memory | None = None
    ) -> tuple[list[Box], FloatArray, FloatArray]:
        """Patches in which the integrals are as good as wanted, or as may be; what they hold, and their errors."""
        values, errors = self._evaluated(leaves, sweep, memory)
        while True:
            excess = errors / self._eased(leaves, allowed, values.sum(axis=0))
            if np.all(excess.sum(axis=(0, 1)) <= 1) or len(leaves) * self._size >= self._most:
                return leaves, values, errors
            chosen = self._rough(leaves, excess)
            if not chosen.size:
                return leaves, values, errors
            axes = np.argmax(excess[chosen].max(axis=2), axis=1)
            made = [
                half for k, axis in zip(chosen, axes, strict=True) for half in _halves(leaves[k], int(axis))
            ]
            more = self._evaluated(made, sweep, memory)
            kept = np.delete(np.arange(len(leaves)), chosen)
            leaves = [leaves[k] for k in kept] + made
            values = np.concatenate([values[kept], more[0]])
            errors = np.concatenate([errors[kept], more[1]])

    def _rough(self, leaves: list[Box], excess: FloatArray) -> NDArray[np.intp]:
        """The worst patches, of those that together hold all but half of the error that may stay."""
        share = excess.sum(axis=1).max(axis=1)
        order = np.argsort(share)
        staying = (np.cumsum(share[order]) <= 0.5) | (share[order] < WORST * share.max())
        chosen = order[~staying][::-1]
        wide = [max(np.subtract(leaves[k][2], leaves[k][1])) > FINEST for k in chosen]
        room = self._most // self._size - len(leaves) + 1
        return np.asarray(chosen[np.array(wide, dtype=bool)][:room])

    def _evaluated(
        self, boxes: list[Box], sweep: Sweep, memory: Memory | None = None
    ) -> tuple[FloatArray, FloatArray]:
        """Integrals (boxes, n) and their errors along each axis (boxes, axes, n)."""
        known: Memory = {} if memory is None else memory
        new = [box for box in boxes if box not in known]
        self._walk([box for box in new if box not in self._walked])
        for rays in {id(rays): rays for rays, _ in (self._walked[box] for box in new)}.values():
            mine = [box for box in new if self._walked[box][0] is rays]
            which = np.concatenate([self._walked[box][1] + np.arange(self._size) for box in mine])
            swept = sweep(rays, which).reshape(len(mine), *[NODES] * self._axes, -1)
            area = np.array([np.prod(np.subtract(high, low)) for _, low, high in mine])
            known.update(zip(mine, zip(*_summed(swept, area), strict=True), strict=True))
        values, errors = zip(*[known[box] for box in boxes], strict=True)
        return np.array(values), np.array(errors)

    def _walk(self, boxes: list[Box]) -> None:
        """Walk the rays of new boxes together."""
        if not boxes:
            return
        node = kronrod()[0]
        grid = np.stack(np.meshgrid(*[node] * self._axes, indexing="ij"), axis=-1).reshape(-1, self._axes)
        low, high = (np.array([box[k] for box in boxes]) for k in (1, 2))
        points = (low[:, None, :] + (high - low)[:, None, :] * grid).reshape(-1, self._axes)
        sides = np.repeat([box[0] for box in boxes], self._size)
        rays = self._make(sides, points)
        self._walked.update({box: (rays, k * self._size) for k, box in enumerate(boxes)})


def _halves(box: Box, axis: int) -> list[Box]:
    """The two halves along an axis."""
    side, low, high = box
    middle = (low[axis] + high[axis]) / 2
    upper = (*low[:axis], middle, *low[axis + 1 :])
    lower = (*high[:axis], middle, *high[axis + 1 :])
    return [(side, low, lower), (side, upper, high)]


def _swept(v: FloatArray, rays: Rays, which: NDArray[np.intp]) -> FloatArray:
    return rays.swept(v, which)


def _allowed(v: FloatArray, wanted: Wanted, total: FloatArray, many: bool) -> FloatArray:
    total = np.maximum(total, 1e-300)
    return eased(wanted(v, total), many) * total


def eased(wanted: FloatArray, many: bool) -> FloatArray:
    """The relative error that may stay where so much is wanted."""
    return np.maximum(ENOUGH, EASED * wanted) if many else wanted


def _added(values: FloatArray, errors: FloatArray) -> tuple[FloatArray, FloatArray]:
    return values.sum(axis=0), errors.sum(axis=(0, 1))


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
