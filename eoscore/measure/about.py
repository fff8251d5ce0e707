"""Route: about the bottoms. Omega of all wells solved along rays, with smooth shares of space for each."""

from __future__ import annotations

from fractions import Fraction
from functools import partial
from math import inf
from typing import TYPE_CHECKING

import numpy as np

from eoscore.errors import NoAnswerError
from eoscore.measure.angular import Angular
from eoscore.measure.critical import saddles
from eoscore.measure.mesh import SKETCH, held_lines, typical_level
from eoscore.measure.partition import Partition
from eoscore.measure.rays import Declined
from eoscore.measure.region import Region
from eoscore.measure.sampled import Sampled

if TYPE_CHECKING:
    from collections.abc import Callable, Sequence

    from numpy.typing import NDArray

    from eoscore.formula.field import Field
    from eoscore.measure.base import FloatArray, Measure
    from eoscore.measure.landscape_record import Landscape, Minimum

__all__ = ["NEARING", "OPEN", "Wells", "about", "refuse_infinite"]

BENT = 1e-2  # change of V against its quadratic form at which the form ends
RUNG = 16.0  # ratio of the energies for which rays are walked anew
LOWEST, DEEPEST = -1, -12  # the rung that serves all lower energies, where the bottom is known and where not
STEP, STEADY = 4.0, 1e-6  # of energies on the way to a bottom, and the change of a power that counts as none
COARSE = 1e-3  # error on the way there at which boxes do better
ROUNDED = 1e-8  # of V at the bottom: nearer to it too few digits are left
GOOD, FAIR = 3e-5, 3e-4  # errors at 0.8 of the level and at the level itself, at which boxes do better
MOST_WELLS = 12
TOGETHER = 20  # energies that share their rays
OPEN = 0.99  # of the depth: a ceiling below this keeps away from an escape at infinity
NEARING = np.array([7 / 8, 31 / 32])
GROWTH = 1.4  # power of 1/(depth - v) in Omega at which, with 3/2 from the momenta, states are without number
SERIES = 0.1  # of that energy: below, Omega / v^{d/2} is a series from its exact beginning


class Wells:
    """Omega of wells together below `end` (J from the lowest). Raises Declined where they are too many.

    few: take no more rays than a try is worth.
    """

    def __init__(self, field: Field, minima: Sequence[Minimum], end: float, *, few: bool = False) -> None:
        kept = [minimum for minimum in minima if minimum.value - minima[0].value < end]
        if len(kept) > MOST_WELLS:
            raise Declined
        self.rises = [minimum.value - minima[0].value for minimum in kept]
        region = Region(field, kept, end)
        shares = _shares(kept, region)
        self.wells = [
            _Well(Angular(field, minimum, end - rise, region, share, few=few))
            for minimum, rise, share in zip(kept, self.rises, shares, strict=True)
        ]
        self.exponent, self.scale = self.wells[0].exponent, self.wells[0].scale

    def with_error(self, v: FloatArray) -> tuple[FloatArray, FloatArray]:
        """Omega at energies (n,) above 0, and its relative error."""
        total, miss = np.zeros_like(v), np.zeros_like(v)
        for well, rise in zip(self.wells, self.rises, strict=True):
            above = v > rise
            if above.any():
                volume, error = well.with_error(v[above] - rise)
                total[above] += volume
                miss[above] += volume * error
        return total, miss / total


class _Well:
    """One well; near its bottom Omega / v^k is a polynomial through five values, its exact limit among them.

    Where the power k is not known, Omega is solved along the rays all the way down.
    """

    def __init__(self, angular: Angular) -> None:
        self.angular = angular
        self.exponent = angular.exponent
        self.scale, self.edge = angular.end, 0.0
        if self.exponent is not None:
            self.scale = _scale(angular, angular.end)
            self.edge = SERIES * self.scale
            self._series(self.exponent)

    def with_error(self, v: FloatArray) -> tuple[FloatArray, FloatArray]:
        """Omega at energies (n,) above the bottom of the well, and its relative error."""
        if self.exponent is None:
            return self.angular.with_error(v)
        result = np.asarray(np.polyval(self.series, np.minimum(v / self.edge, 1.0)) * v**self.exponent)
        error = np.full(v.shape, self.error)
        above = v > self.edge
        if above.any():
            result[above], error[above] = self.angular.with_error(v[above])
        return result, error

    def _series(self, exponent: float) -> None:
        exact = self.angular.degree == 2
        share = np.array([0.25, 0.5, 0.75, 1.0] if exact else [0.2, 0.4, 0.6, 0.8, 1.0])
        volume, error = self.angular.with_error(self.edge * share)
        ratio, self.error = volume / (self.edge * share) ** exponent, float(error.max())
        if exact:
            share, ratio = np.append(share, 0.0), np.append(ratio, self.angular.limit)
        self.series = np.linalg.solve(np.vander(share), ratio)


def _shares(minima: Sequence[Minimum], region: Region) -> list[Callable[[FloatArray], FloatArray] | None]:
    """The share of space of each well; None for one alone."""
    if len(minima) == 1:
        return [None]
    partition = Partition(np.array([m.position for m in minima]), region.size)
    return [partial(partition.share, k) for k in range(len(minima))]


class Ladder:
    """Omega from wells along rays, which are walked anew for energies RUNG times as high; errors by energy.

    level: the highest energy (J), or, without a top, one from which rungs go up without end. Raises Declined
    where the wells cannot be taken so with the accuracy of GOOD and FAIR.
    """

    def __init__(self, field: Field, minima: Sequence[Minimum], level: float, top: float) -> None:
        self.field, self.minima, self.level, self.top = field, minima, level, top
        self._made: dict[int, Wells] = {}
        self.lowest = LOWEST
        self._known = np.empty((0, 2))
        shares = np.array([0.8, 1.0])
        self(level * shares)
        if np.any(self._known[:, 1] > [GOOD, FAIR]):
            raise Declined
        wells = self._wells(0)
        self.scale = wells.scale
        self.foot: float | None = None
        self.lowest = LOWEST if wells.exponent is not None else DEEPEST
        self.exponent = wells.exponent if wells.exponent is not None else self._beginning()

    def _beginning(self) -> float:
        """The power with which Omega begins; sets the foot, below which it counts as that power."""
        floor = max(ROUNDED * abs(self.minima[0].value), self.level * RUNG**self.lowest)
        v, slopes = [self.level], [inf]
        volume = self(np.array(v))
        while v[-1] / STEP > floor:
            v.append(v[-1] / STEP)
            lower = self(np.array(v[-1:]))
            slopes.append(float(np.log(volume / lower)[0] / np.log(STEP)))
            volume = lower
            if np.any(self._known[:, 1] > COARSE):
                raise Declined
            if abs(slopes[-1] - slopes[-2]) < STEADY:
                break
        near = float(Fraction(slopes[-1]).limit_denominator(24))
        exponent = near if abs(near - slopes[-1]) < 10 * STEADY else slopes[-1]
        self.foot, self.scale = v[-1], v[-1]
        miss = np.array([[v[-1], abs(slopes[-1] - exponent) + abs(slopes[-1] - slopes[-2])]])
        self._known = np.concatenate([miss, self._known[self._known[:, 0] > v[-1]]])
        return exponent

    def __call__(self, v: FloatArray) -> FloatArray:
        """Omega at energies (n,) above 0, in any order."""
        result, errors = np.empty_like(v), np.empty_like(v)
        rungs = self._rungs(v)
        for k in np.unique(rungs).tolist():
            mine = np.flatnonzero(rungs == k)
            mine = mine[np.argsort(v[mine])]
            for part in np.array_split(mine, -(-mine.size // TOGETHER)):  # the lower ones need fewer rays
                result[part], errors[part] = self._wells(k).with_error(v[part])
        known = np.concatenate([self._known, np.stack([v, errors], axis=1)])
        self._known = known[np.argsort(known[:, 0], kind="stable")]
        return result

    def error_below(self, v: FloatArray) -> FloatArray:
        """Relative error up to energies, as far as it is known."""
        known, worst = self._known[:, 0], np.maximum.accumulate(self._known[:, 1])
        return np.asarray(worst[np.minimum(np.searchsorted(known, v * (1 - 1e-12)), known.size - 1)])

    def release(self) -> None:
        """Let go of the rays walked so far; they take tens of megabytes."""
        self._made.clear()

    def _rungs(self, v: FloatArray) -> NDArray[np.int_]:
        """Number of the rung up to which an energy belongs, 0 the one that ends at the level."""
        rungs = np.ceil(np.log(v / self.level) / np.log(RUNG) - 1e-9).astype(int)
        return np.asarray(np.clip(rungs, self.lowest, 0 if self.top < inf else None))

    def _wells(self, k: int) -> Wells:
        if k not in self._made:
            self._made[k] = Wells(self.field, self.minima, self.level * RUNG**k)
        return self._made[k]


def about(field: Field, landscape: Landscape, ceiling: float) -> Measure | None:
    """Omega from rays about the bottoms, up to the escape energy or the ceiling; None where that does not do."""
    top = min(landscape.depth, ceiling)
    if (
        landscape.bottom is None
        or not 1 <= len(landscape.minima) <= MOST_WELLS
        or len(field.coordinates) == 1
    ):
        return None
    level = top if top < inf else typical_level(field, landscape.bottom.value)
    try:
        ladder = Ladder(field, landscape.minima, level, top)
    except Declined:
        return None
    escape = landscape.escape
    if escape is not None and escape.position is None and top > OPEN * landscape.depth:
        refuse_infinite(*ladder(level * NEARING))
    rises = [minimum.value - landscape.bottom.value for minimum in landscape.minima[1:]]
    passes = saddles(field, _lines(field, landscape, level), landscape.bottom.value, level)
    return Sampled(
        ladder,
        ladder.exponent,
        scale=ladder.scale,
        foot=ladder.foot,
        top=top,
        error=ladder.error_below,
        route="about the bottom",
        breaks=(*rises, *passes),
    )


def refuse_infinite(lower: float, upper: float) -> None:
    """Raise NoAnswerError where Omega grows like (depth - v)^-3/2 or faster between the shares NEARING of the depth."""
    if upper > lower * 4**GROWTH:
        raise NoAnswerError(
            "the number of states below the escape energy is infinite: towards it the region grows without "
            "bound. Give the trap an E_max below the depth"
        )


def _lines(field: Field, landscape: Landscape, level: float) -> list[FloatArray]:
    return held_lines(field, landscape.minima, level, SKETCH[len(field.coordinates)])


def _scale(angular: Angular, end: float) -> float:
    """The energy, at most `end`, at which V leaves its quadratic form by a hundredth along a principal axis."""
    found, size = end, abs(angular.v_min)
    q = angular.radius(end) * np.geomspace(1e-9, 1.0, 300)
    form = q**2 / 2 if angular.degree == 2 else q
    names = angular.field.coordinates
    for along in np.concatenate([angular.frame.T, -angular.frame.T]):
        x = angular.start[:, None] + along[:, None] * q
        v = angular.field.formula.evaluate(dict(zip(names, x, strict=True))) - angular.v_min
        ratio = v / form
        clear = form > 1e-10 * size
        bent = np.flatnonzero(clear & ~(np.abs(ratio / ratio[np.argmax(clear)] - 1) <= BENT))
        if bent.size:
            found = min(found, float(form[bent[0]]))
    return found
