"""A state from two conditions."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.constants import K_B
from eoscore.errors import NoAnswerError
from eoscore.state.along import alpha_along
from eoscore.state.condensed import of_condensate, split_phases
from eoscore.state.curve import along_curve
from eoscore.state.ensemble import EPS
from eoscore.state.model import CONDITIONS
from eoscore.state.solution import Solution, spread

if TYPE_CHECKING:
    from collections.abc import Mapping

    from numpy.typing import NDArray

    from eoscore.state.model import Model
    from eoscore.state.reading import FloatArray
    from eoscore.state.sums import Sums

__all__ = ["bounds", "solve"]

POSITIVE = ("T", "N", "fugacity", "n_peak", "PSD", "U", "N_0")


def solve(model: Model, given: Mapping[str, FloatArray]) -> Solution:
    """The states of two conditions of `CONDITIONS`, given as flat arrays of one length in SI units.

    NoAnswerError where the two can fix no state; single points without one are told in the solution.
    """
    if len(given) != 2:
        came = ", ".join(given) or "none"
        raise NoAnswerError(f"a state needs two conditions and came with {len(given)} ({came}); {_known()}")
    for name in given:
        if name not in CONDITIONS:
            raise NoAnswerError(f"a state cannot be found from {name}; {_known()}")
        if name in ("n_peak", "PSD") and model.local is None:
            raise NoAnswerError(f"{name} has no sense where every direction is held as levels")
    if set(given) == {"S", "U"}:
        raise NoAnswerError(
            "S and U without N may fix two states, or none of a saturated gas: give N with one of them"
        )
    first, second = sorted(given, key=CONDITIONS.index)
    x1, x2 = given[first], given[second]
    solution = Solution.empty(x1.size)
    _check(model, given, solution)
    with np.errstate(all="ignore"):
        if second in ("f_0", "N_0"):
            of_condensate(model, first, second, (x1, x2), solution)
        elif first == "T":
            _at_temperature(model, second, x1, x2, solution)
        else:
            _elsewhere(model, (first, second), (x1, x2), solution)
    return solution


def _known() -> str:
    return f"two of {', '.join(CONDITIONS)} fix one"


def _check(model: Model, given: Mapping[str, FloatArray], solution: Solution) -> None:
    """Refuse values that no state of any temperature has."""
    for name, x in given.items():
        solution.refuse(f"{name} came as a value that is not finite", ~np.isfinite(x))
        if name in POSITIVE:
            solution.refuse(f"{name} came as {spread(x[x <= 0], name)}; it must be above zero", x <= 0)
        if name == "S" and model.whole.statistics != "classical":
            solution.refuse(f"S came as {spread(x[x <= 0], name)}; it must be above zero", x <= 0)
    if model.bosons:
        words = "bosons have mu at or below the lowest level, mu <= 0"
        if "mu" in given:
            solution.refuse(
                f"mu came as {spread(given['mu'][given['mu'] > 0], 'mu')}; {words}", given["mu"] > 0
            )
        if "fugacity" in given:
            solution.refuse(f"the fugacity came above 1; {words}", given["fugacity"] > 1)
        gap = 2 * model.whole.highest
        if "mu" in given and np.isfinite(gap):
            antiparticles = "with antiparticles mu must also stay above"
            low = given["mu"] < -gap
            solution.refuse(f"mu came as {spread(given['mu'][low], 'mu')}; {antiparticles} {-gap:.6g} J", low)
    if "N" in given and np.isfinite(model.capacity):
        most = model.capacity
        solution.refuse(
            f"N came as {spread(given['N'][given['N'] >= most])}; below the escape energy there are {most:.6g} "
            "states, and fermions fill each but once",
            given["N"] >= most,
        )


def _at_temperature(model: Model, name: str, T: FloatArray, x: FloatArray, solution: Solution) -> None:
    some = np.flatnonzero(solution.known)
    kT, x = K_B * T[some], x[some]
    alpha = alpha_along(model, name, x, kT)
    solution.kT[some], solution.alpha[some] = kT, alpha
    full = model.bosons & (alpha == 0)
    if name == "N":
        if full.any():
            solution.condensed[some] = full
            held = model.whole.saturated(kT[full])
            solution.condensate[some[full]] = np.maximum(x[full] - held, 0.0)
        return
    if name in ("mu", "fugacity"):
        if model.bosons and not model.whole.condenses:
            endless = f"at mu = 0 the number has no limit ({model.whole.why_not}); mu must be below 0"
            solution.refuse(endless, _put(some, full, solution))
        return
    if model.bosons and model.whole.condenses:
        most = model.value(name, np.zeros_like(kT), kT)[0]
        beyond = x >= most * (1 - 2 * model.error_of(name, kT))
        words = f"at this temperature {name} is at most {spread(most[beyond], name)}, which it has for any condensate"
        solution.refuse(words, _put(some, beyond, solution))
    reached = model.value(name, alpha, kT)[0]
    wrong = ~(np.abs(reached - x) <= 1e-8 * np.abs(x))
    words = f"at this temperature no state has that {name}; it reaches {spread(reached[wrong], name)}"
    solution.refuse(words, _put(some, wrong, solution))


def _put(some: NDArray[np.intp], where: NDArray[np.bool_], solution: Solution) -> NDArray[np.bool_]:
    whole = np.zeros(solution.kT.shape, dtype=bool)
    whole[some] = where
    return whole


def _elsewhere(
    model: Model, names: tuple[str, str], values: tuple[FloatArray, FloatArray], solution: Solution
) -> None:
    """Neither condition is a temperature."""
    for name, x in zip(names, values, strict=True):
        if model.bosons and name in ("mu", "fugacity") and model.whole.condenses:
            words = f"at {name} = {'0' if name == 'mu' else '1'} a Bose gas may have any temperature below T_c: give T"
            solution.refuse(words, x == (0 if name == "mu" else 1))
    if names == ("mu", "fugacity"):
        some = solution.known & (np.sign(values[0]) == np.sign(np.log(values[1])))
        solution.alpha[some] = -np.log(values[1][some])
        solution.kT[some] = values[0][some] / np.log(values[1][some])
        solution.refuse("mu and fugacity = exp(mu/kT) came with signs that do not agree", ~some)
        return
    low = split_phases(model, names, values, solution)
    along_curve(model, names, values, low, solution)


def bounds(
    model: Model, given: Mapping[str, FloatArray], solution: Solution, sums: Sums
) -> tuple[FloatArray, FloatArray]:
    """Bounds of the errors of alpha and ln T, from those of the two conditions through the matrix of their slopes.

    `sums` are those of the whole gas at the solution. With a condensate alpha is 0, and T has its own bound.
    """
    if any(name in ("f_0", "N_0") for name in given):
        return np.zeros_like(solution.kT), solution.dlog
    rows = [model.value(name, solution.alpha, solution.kT, sums) for name in given]
    (x1, a1, t1), (x2, a2, t2) = rows
    e1, e2 = (
        model.noise(name, x, sums, solution.kT) + 8 * EPS * np.abs(x)
        for name, x in zip(given, (x1, x2), strict=True)
    )
    det = np.abs(a1 * t2 - a2 * t1)
    dalpha = (np.abs(t2) * e1 + np.abs(t1) * e2) / det
    dlog = (np.abs(a2) * e1 + np.abs(a1) * e2) / det
    dalpha = np.where(np.isfinite(dalpha) & ~solution.condensed, dalpha, 0.0)
    return dalpha, np.where(solution.condensed, solution.dlog, np.where(np.isfinite(dlog), dlog, 8 * EPS))
