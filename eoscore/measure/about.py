"""Route: about the bottoms. Omega of all wells solved along rays, with smooth shares of space for each."""

from __future__ import annotations

from copy import copy
from fractions import Fraction
from math import inf
from typing import TYPE_CHECKING

import numpy as np

from eoscore.errors import NoAnswerError
from eoscore.measure.angular import ROOTS
from eoscore.measure.critical import saddles
from eoscore.measure.landscape_chart import Chart
from eoscore.measure.landscape_record import Minimum
from eoscore.measure.mesh import SKETCH, held_lines, typical_level
from eoscore.measure.moments import cumulated, edges_of
from eoscore.measure.need import Need
from eoscore.measure.rays import Declined
from eoscore.measure.sampled import Sampled
from eoscore.measure.wells import MOST_WELLS, Wells

if TYPE_CHECKING:
    from collections.abc import Sequence

    from numpy.typing import NDArray

    from eoscore.formula.field import Field
    from eoscore.measure.base import FloatArray, Measure
    from eoscore.measure.landscape_record import Landscape
    from eoscore.measure.panel import Panel
    from eoscore.measure.wells import How

__all__ = ["NEARING", "OPEN", "about", "refuse_infinite"]

RUNG = 16.0  # ratio of the energies for which rays are walked anew
LOWEST, DEEPEST = -1, -12  # the rung that serves all lower energies, where the bottom is known and where not
STEP, STEADY = 4.0, 1e-6  # of energies on the way to a bottom, and the change of a power that counts as none
COARSE = 1e-3  # error on the way there at which boxes do better
ROUNDED = 1e-8  # of V at the bottom: nearer to it too few digits are left
GOOD, FAIR = 3e-5, 3e-4  # errors at 0.8 of the level and at the level itself, at which boxes do better
TOGETHER = 20  # energies that share their rays
OPEN = 0.99  # of the depth: a ceiling below this keeps away from an escape at infinity
NEARING = np.array([7 / 8, 31 / 32])
GROWTH = 1.4  # power of 1/(depth - v) in Omega at which, with 3/2 from the momenta, states are without number
SAME = 1e-9  # relative, of the energy of a pass
APART = 2.0  # times the highest pass between wells: from there on rays from one bottom serve for all


class Ladder:
    """Omega from wells along rays, which are walked anew for energies RUNG times as high; errors by energy.

    level: the highest energy (J), or, without a top, one from which rungs go up without end. passes: saddles
    between the wells below the level, the lowest first. Raises Declined where the wells cannot be taken so with the
    accuracy of GOOD and FAIR.
    """

    def __init__(
        self, field: Field, minima: Sequence[Minimum], level: float, top: float, passes: Sequence[Minimum]
    ) -> None:
        self.field, self.minima, self.level, self.top = field, minima, level, top
        self.passes = passes if len(minima) > 1 else ()
        marks = [one.value - minima[0].value for one in (*self.passes, *(minima if self.passes else ()))]
        self.lowest_pass, self.highest_pass = marks[0] if marks else inf, max(marks, default=inf)
        self.lowest = LOWEST
        self._made: dict[tuple[int, How], Wells] = {}
        self._asked(Need(wanted=GOOD / 3))
        if not self._wells(self.level, 0.0).plain:
            self(level * np.array([0.8, 1.0]))
            if np.any(self._known[1:, 1] > [GOOD, FAIR]):
                raise Declined
        self._asked(Need())
        wells = self._wells(self.level, 0.0)
        self.scale = wells.scale
        self.foot: float | None = None
        self.lowest = LOWEST if wells.exponent is not None else DEEPEST
        self.exponent = wells.exponent if wells.exponent is not None else self._beginning()

    def _asked(self, need: Need) -> None:
        self._need, self._known = need, np.array([[0.0, ROOTS]])

    def eased(self, kT: float) -> Ladder:
        """The same wells, only as well known at each energy as sums at temperatures up to kT (J) need it."""
        other = copy(self)
        other._asked(Need(kT))
        if self.foot is not None:
            other._known = self._known[:2]
        return other

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
        self._known = np.concatenate([self._known[:1], miss, self._known[self._known[:, 0] > v[-1]]])
        return exponent

    def __call__(self, v: FloatArray) -> FloatArray:
        """Omega at energies (n,) above 0, in any order."""
        result, errors = np.empty_like(v), np.empty_like(v)
        order = np.argsort(v)
        edges = np.array([self.lowest_pass * (1 + SAME), APART * self.highest_pass])
        keys = np.stack([self._rungs(v), np.searchsorted(edges, v)])[:, order]
        groups = np.split(order, 1 + np.flatnonzero(np.any(np.diff(keys, axis=1), axis=0)))
        for mine in groups:
            wells = self._wells(float(v[mine[-1]]), float(v[mine[0]]))
            for part in np.array_split(mine, -(-mine.size // TOGETHER)):  # the lower ones need fewer rays
                result[part], errors[part] = wells.with_error(v[part], self._need)
        self._remember(v, errors)
        return result

    def project(self, stretch: Panel, parts: int, base: float) -> FloatArray:
        """Omega on the parts of a stretch (parts, n) as coefficients of T_n, from `base` at its start.

        For smooth functions g it gives int g dOmega, though Omega itself may be rough between the edges.
        """
        moments, miss = self._wells(stretch.hi, stretch.lo).moments(stretch, parts, base, self._need)
        series = cumulated(moments, base)
        ends = series.sum(axis=1)
        self._remember(edges_of(stretch, parts)[1:], np.maximum(miss / ends, ROOTS))
        return series

    def _remember(self, v: FloatArray, errors: FloatArray) -> None:
        known = np.concatenate([self._known, np.stack([v, errors], axis=1)])
        self._known = known[np.argsort(known[:, 0], kind="stable")]

    def error_below(self, v: FloatArray) -> FloatArray:
        """Relative error up to energies, as far as it is known."""
        known, worst = self._known[:, 0], np.maximum.accumulate(self._known[:, 1])
        return np.asarray(worst[np.minimum(np.searchsorted(known, v * (1 - 1e-12)), known.size - 1)])

    def release(self) -> None:
        """Let go of the rays walked so far."""
        for wells in self._made.values():
            wells.release()

    def _rungs(self, v: FloatArray) -> NDArray[np.int_]:
        """Number of the rung up to which an energy belongs, 0 the one that ends at the level."""
        rungs = np.ceil(np.log(v / self.level) / np.log(RUNG) - 1e-9).astype(int)
        return np.asarray(np.clip(rungs, self.lowest, 0 if self.top < inf else None))

    def _wells(self, upto: float, low: float) -> Wells:
        """What tells Omega from an energy up to another, in one rung."""
        k = int(self._rungs(np.array([upto]))[0])
        how: How = "shared"
        if upto <= self.lowest_pass * (1 + SAME) < inf:
            how = "apart"
        elif low >= APART * self.highest_pass:
            how = "joined"
        if (k, how) not in self._made:
            end = self.level * RUNG**k
            try:
                self._made[k, how] = Wells(
                    self.field,
                    self.minima,
                    min(end, self.lowest_pass) if how == "apart" else end,
                    how,
                    self.passes,
                )
            except Declined:
                if how == "shared":
                    raise
                self._made[k, how] = Wells(self.field, self.minima, end)
        return self._made[k, how]


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
    rises = [minimum.value - landscape.bottom.value for minimum in landscape.minima[1:]]
    passes, places = saddles(field, _lines(field, landscape, level), landscape.bottom.value, level)
    between = [
        Minimum(tuple(place), landscape.bottom.value + rise, "other", bend)
        for rise, place, bend in zip(
            passes.tolist(), places.tolist(), Chart(field).jet(places)[2], strict=True
        )
    ]
    try:
        ladder = Ladder(field, landscape.minima, level, top, between)
    except Declined:
        return None
    escape = landscape.escape
    if escape is not None and escape.position is None and top > OPEN * landscape.depth:
        refuse_infinite(*ladder(level * NEARING))
    return _sampled(ladder, (*rises, *passes.tolist()))


def _sampled(
    ladder: Ladder, breaks: tuple[float, ...], parent: Sampled | None = None, kT: float = inf
) -> Sampled:
    def ease(kT: float) -> Sampled:
        return _sampled(ladder.eased(kT), breaks, whole, kT)

    whole = Sampled(
        ladder,
        ladder.exponent,
        scale=ladder.scale,
        foot=ladder.foot,
        top=ladder.top,
        error=ladder.error_below,
        route="about the bottom",
        breaks=breaks,
        kT=kT,
        ease=ease if parent is None else None,
        project=None if parent is None else ladder.project,
        parent=parent,
    )
    return whole


def refuse_infinite(lower: float, upper: float) -> None:
    """Raise NoAnswerError where Omega grows like (depth - v)^-3/2 or faster between the shares NEARING of the depth."""
    if upper > lower * 4**GROWTH:
        raise NoAnswerError(
            "the number of states below the escape energy is infinite: towards it the region grows without "
            "bound. Give the trap an E_max below the depth"
        )


def _lines(field: Field, landscape: Landscape, level: float) -> list[FloatArray]:
    return held_lines(field, landscape.minima, level, SKETCH[len(field.coordinates)])
