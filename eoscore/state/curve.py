"""The state on the curve of one condition at which another holds: the temperature is the unknown."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from eoscore.constants import K_B
from eoscore.state.along import alpha_along
from eoscore.state.root import rising_root
from eoscore.state.solution import spread

if TYPE_CHECKING:
    from collections.abc import Callable

    from numpy.typing import NDArray

    from eoscore.state.model import Model
    from eoscore.state.reading import FloatArray
    from eoscore.state.solution import Solution

__all__ = ["along_curve"]

FARTHEST = 64.0  # of the search in ln kT
SAME = 1e-8  # a condition that changes less over the whole bracket does not depend on T
SATURATED = 1e-9  # a condition that is met so well at the saturated state is met by it
COLDEST = 25.0  # below the start: kT = 1e-11 of the energy scale


def along_curve(
    model: Model,
    names: tuple[str, str],
    values: tuple[FloatArray, FloatArray],
    low: FloatArray,
    solution: Solution,
) -> None:
    """Solve the points that are left for ln kT > low along the curve of the first condition."""
    some = np.flatnonzero(solution.known & ~solution.condensed)
    if not some.size:
        return
    first, second = names
    x1, x2, low = values[0][some], values[1][some], low[some]
    linear = second == "mu" or (second == "S" and model.whole.statistics == "classical")

    def miss(log: FloatArray, which: NDArray[np.intp]) -> tuple[FloatArray, FloatArray]:
        kT = np.exp(log)
        alpha = alpha_along(model, first, x1[which], kT)
        sums = model.whole.sums(alpha, kT) if {first, second} & {"N", "S", "U"} else None
        _, a1, t1 = model.value(first, alpha, kT, sums)
        held, a2, t2 = model.value(second, alpha, kT, sums)
        slope = t2 - a2 * t1 / a1
        wanted = x2[which]
        if linear:
            scale = np.abs(wanted)
            return (held - wanted) / scale, slope / scale
        return np.log(held / wanted), slope / held

    start = np.fmax(_start(model, first, second, x1, x2), low)
    bracket = _bracket(miss, start, low)
    rise = np.sign(bracket.above - bracket.below)

    def rising(log: FloatArray, which: NDArray[np.intp]) -> tuple[FloatArray, FloatArray]:
        value, slope = miss(log, which)
        return rise[which] * value, rise[which] * slope

    same = np.abs(bracket.above - bracket.below) <= SAME
    found = (np.sign(bracket.above) != np.sign(bracket.below)) & ~same
    middle = np.clip(start, bracket.low, bracket.high)
    ends = rise * bracket.below, rise * bracket.above
    log = rising_root(rising, bracket.low, bracket.high, np.where(found, middle, np.nan), ends)
    kT = np.exp(log)
    solution.kT[some] = kT
    solution.alpha[some] = alpha_along(model, first, x1, np.where(found, kT, 1.0))
    _refuse_rest(model, names, x2, bracket, found, same, linear, some, solution)


def _refuse_rest(
    model: Model,
    names: tuple[str, str],
    wanted: FloatArray,
    bracket: _Bracket,
    found: NDArray[np.bool_],
    same: NDArray[np.bool_],
    linear: bool,
    some: NDArray[np.intp],
    solution: Solution,
) -> None:
    """Tell the points that were not found, those that do not depend on T, and those at which a condensate is free."""
    first, second = names

    def put(where: NDArray[np.bool_]) -> NDArray[np.bool_]:
        whole = np.zeros(solution.kT.shape, dtype=bool)
        whole[some] = where
        return whole

    words = f"{first} and {second} do not fix a state here: with one given, the other is the same at every temperature"
    solution.refuse(words, put(same))
    if model.bosons and model.whole.condenses and "N" not in names:
        free = np.isfinite(bracket.floor) & (np.abs(bracket.at_floor) <= SATURATED)
        words = f"with that {first} and {second} the gas is saturated, and its condensate may have any size: give N"
        solution.refuse(words, put(free))
    ends = [
        np.where(found, np.nan, _back(end, wanted, linear=linear)) for end in (bracket.below, bracket.above)
    ]
    if first == "N" and second in ("S", "U") and model.bosons and model.whole.condenses:
        ends[0] = np.where(found, np.nan, 0.0)  # the bracket begins at T_c, the condensed states go down to 0
    low, high = spread(np.fmin(*ends), second), spread(np.fmax(*ends), second)
    words = f"with this {first}, {second} runs from {low} to {high}"
    solution.refuse(f"no state has that {first} and that {second}: {words}", put(~found))


@dataclass(frozen=True)
class _Bracket:
    """Ends in ln kT, what the function is there, and the floor of ln kT below which no state can lie."""

    low: FloatArray
    high: FloatArray
    below: FloatArray
    above: FloatArray
    floor: FloatArray
    at_floor: FloatArray


def _bracket(
    miss: Callable[[FloatArray, NDArray[np.intp]], tuple[FloatArray, FloatArray]],
    start: FloatArray,
    floor: FloatArray,
) -> _Bracket:
    """Widen about the start, never below the floor, until the function changes its sign."""
    every = np.arange(start.size)
    low = np.maximum(start - 1.0, floor)
    high = np.maximum(start, floor) + 1.0
    at_floor = miss(np.where(np.isfinite(floor), floor, start), every)[0]
    ends = _Bracket(low, high, miss(low, every)[0], miss(high, every)[0], floor, at_floor)
    reach = 1.0
    while reach < FARTHEST:
        reach *= 2
        same = np.flatnonzero(~(np.sign(ends.below) * np.sign(ends.above) <= 0))
        if not same.size:
            break
        new_low = np.maximum(start[same] - min(reach, COLDEST), floor[same])
        new_high = start[same] + reach
        below, above = miss(new_low, same)[0], miss(new_high, same)[0]
        keep_low, keep_high = ~np.isfinite(below), ~np.isfinite(above)
        ends.low[same] = np.where(keep_low, ends.low[same], new_low)
        ends.below[same] = np.where(keep_low, ends.below[same], below)
        ends.high[same] = np.where(keep_high, ends.high[same], new_high)
        ends.above[same] = np.where(keep_high, ends.above[same], above)
    return ends


def _start(model: Model, first: str, second: str, x1: FloatArray, x2: FloatArray) -> FloatArray:
    """A first guess of ln kT: the energy below which as many states lie as there are particles, or |mu|."""
    given = {first: x1, second: x2}
    if "N" in given:
        return np.log(model.whole.below(given["N"]))
    if "S" in given:
        return np.log(model.whole.below(np.maximum(np.abs(given["S"]) / K_B, 1e-3)))
    if "mu" in given:
        return np.log(np.maximum(np.abs(given["mu"]), 1e-300))
    return np.log(model.whole.below(np.ones_like(x1)))


def _back(miss: FloatArray, wanted: FloatArray, *, linear: bool) -> FloatArray:
    """The value of the second condition from the miss."""
    with np.errstate(over="ignore"):
        return wanted + miss * np.abs(wanted) if linear else wanted * np.exp(miss)
