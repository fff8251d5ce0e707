"""The condensate of a fixed number as quantities of a state: mean, standard deviation and probability of N_0.

Between two whole numbers the answer lies on the straight line between theirs, so that grids and derivatives by N have
one.
"""

from __future__ import annotations

from dataclasses import replace
from math import ceil, floor
from typing import TYPE_CHECKING, cast

import numpy as np

from eoscore.constants import K_B
from eoscore.errors import NoAnswerError
from eoscore.state.canonical import MOST, chances, levels_of, logarithms
from eoscore.state.ensemble import EPS
from eoscore.state.reading import Reading, Reason, reading_of

if TYPE_CHECKING:
    from collections.abc import Callable

    from numpy.typing import ArrayLike, NDArray

    from eoscore.state.exact import ExactLevels
    from eoscore.state.held import HeldGas
    from eoscore.state.reading import FloatArray
    from eoscore.state.state import State

    # Value and error from the probabilities of n = 0 ... N, the relative error of Z_1, and the points that are meant.
    _Of = Callable[[FloatArray, float, NDArray[np.intp]], tuple[float | FloatArray, float | FloatArray]]

__all__ = ["mean", "probability", "probability_at", "spread"]

ROUTE = "canonical ensemble: recursion of the partition functions on the excited levels"
KEPT = 64  # temperatures
ROUNDING = 40 * EPS  # of a sum over levels, and of a step of the recursion


def mean(state: State, unit: str) -> Reading:
    """Mean N_0 of exactly N particles."""
    return _reading(state, unit, _mean)


def spread(state: State, unit: str) -> Reading:
    """Standard deviation of N_0 of exactly N particles."""
    return _reading(state, unit, _deviation)


def probability(_state: State, _unit: str) -> Reading:
    """Words: it is that of a number, which `probability_at` takes."""
    raise NoAnswerError(
        "P_N_0 is the probability of some number N_0, and none is given: ask `over N_0 = ...`"
    )


def probability_at(state: State, counts: ArrayLike) -> Reading:
    """The chance that just so many of exactly N particles are in the lowest level; broadcasts with the states."""
    counts = np.asarray(counts, dtype=float)
    shape = np.broadcast_shapes(state.shape, counts.shape)
    n = np.broadcast_to(counts, shape).ravel()
    whole = (n >= 0) & (n == np.round(n))

    def at(p: FloatArray, doubt: float, where: NDArray[np.intp]) -> tuple[FloatArray, FloatArray]:
        here = np.where(whole[where] & (n[where] < p.size), n[where], p.size).astype(int)
        value = np.append(p, 0.0)[here]
        return value, value * (doubt + ROUNDING) * (np.abs(n[where] - _mean(p, 0.0, where)[0]) + 1)

    words = "N_0 is a whole number from 0 on: ask over whole steps, such as N_0 = even(0, 100, 101)"
    found = _reading(state, "1", at, shape, [Reason(words, ~whole.reshape(shape))])
    return replace(found, scale=np.ones(shape))


def _mean(p: FloatArray, doubt: float, _where: NDArray[np.intp]) -> tuple[float, float]:
    """Z_M that are off by less than e^(doubt M) move the mean by less than doubt times the variance."""
    n = np.arange(float(p.size))
    value = float(p @ n)
    return value, doubt * (float(p @ (n - value) ** 2) + 1) + ROUNDING * value


def _deviation(p: FloatArray, doubt: float, where: NDArray[np.intp]) -> tuple[float, float]:
    """As for the mean, with the third moment for the variance."""
    far = np.abs(np.arange(float(p.size)) - _mean(p, 0.0, where)[0])
    variance = float(p @ far**2)
    if not variance > 0:
        return 0.0, 0.0
    value = variance**0.5
    return value, doubt * (float(p @ far**3) + variance) / (2 * value) + 10 * ROUNDING * value


def _reading(
    state: State,
    unit: str,
    of: _Of,
    shape: tuple[int, ...] | None = None,
    reasons: list[Reason] | None = None,
) -> Reading:
    shape = state.shape if shape is None else shape
    try:
        number, T = (np.broadcast_to(state.shaped(x), shape).ravel() for x in _themselves(state))
        value, error = _filled(state.held, number, K_B * T, of)
    except NoAnswerError as fault:
        nothing = np.full(shape, np.nan)
        return reading_of(nothing, nothing, unit, "", [Reason(fault.why, np.ones(shape, dtype=bool))])
    few = Reason(f"a fixed number is counted from 1 to {MOST} particles", ~_counted(number).reshape(shape))
    cold = Reason("T must be above zero", ~(T > 0).reshape(shape))
    told = [few, cold, *(reasons or ())]
    return reading_of(value.reshape(shape), error.reshape(shape), unit, ROUTE, told)


def _themselves(state: State) -> tuple[FloatArray, FloatArray]:
    if set(state.given) != {"N", "T"}:
        came = ", ".join(state.given) or "nothing"
        raise NoAnswerError(f"a fixed number of particles is asked with N and T themselves; {came} came")
    return state.given["N"], state.given["T"]


def _counted(number: FloatArray) -> NDArray[np.bool_]:
    return np.asarray((number >= 1) & (number <= MOST))


def _filled(held: HeldGas, number: FloatArray, kT: FloatArray, of: _Of) -> tuple[FloatArray, FloatArray]:
    """Value and error of every point; one recursion for each temperature."""
    levels = levels_of(held)
    value, error = np.full(number.shape, np.nan), np.full(number.shape, np.nan)
    for same in _alike(kT, np.flatnonzero(_counted(number) & (kT > 0))):
        logs = _kept(held, levels, ceil(number[same].max()), float(kT[same[0]]))
        doubt = float(levels.error_at(kT[same[:1]])[0]) + ROUNDING
        for where in _alike(number, same):
            low = floor(number[where[0]])
            share = float(number[where[0]] - low)
            value[where] = error[where] = 0.0
            for part, count in ((1 - share, low), (share, low + 1)):
                if part > 0:
                    own, off = of(chances(logs[: count + 1]), doubt, where)
                    value[where] += part * own
                    error[where] += part * off
    return value, error


def _kept(held: HeldGas, levels: ExactLevels, count: int, kT: float) -> FloatArray:
    """ln Z_M, M = 0 ... `count` at least; those of the last temperatures serve other quantities too."""
    kept = cast("dict[float, FloatArray]", held._cache.setdefault("fixed number", {}))
    if kT not in kept or kept[kT].size <= count:
        if len(kept) >= KEPT:
            kept.clear()
        kept[kT] = logarithms(levels, count, kT)
    return kept[kT]


def _alike(values: FloatArray, index: NDArray[np.intp]) -> list[NDArray[np.intp]]:
    """The indices in groups of one value each."""
    order = index[np.argsort(values[index], kind="stable")]
    cuts = np.flatnonzero(np.diff(values[order])) + 1
    return np.split(order, cuts) if order.size else []
