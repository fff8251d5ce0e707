"""The state of a held gas, and every quantity that can be read off it."""

from __future__ import annotations

from functools import cached_property
from typing import TYPE_CHECKING, TypeVar

import numpy as np

from eoscore.constants import K_B
from eoscore.errors import NoAnswerError
from eoscore.state.ensemble import EPS
from eoscore.state.pairs import bounds, solve
from eoscore.state.reading import Reading, Reason, reading_of

if TYPE_CHECKING:
    from collections.abc import Iterable, Mapping

    from numpy.typing import ArrayLike, NDArray

    from eoscore.state.held import HeldGas
    from eoscore.state.profile import Profile
    from eoscore.state.reading import FloatArray
    from eoscore.state.solution import Solution
    from eoscore.state.sums import Sums

__all__ = ["State"]

Shaped = TypeVar("Shaped", bound=np.generic)


class State:
    """A gas under conditions that were given, at every point of their common shape.

    Every quantity is an attribute: a float, or an array (masked where a point has none; NoAnswerError where no
    point has one). `reading(name)` tells its error, unit, route and reasons as well. The state is solved for when
    a quantity first needs it: T_c needs N alone, N_c needs T alone.
    """

    def __init__(self, held: HeldGas, given: Mapping[str, ArrayLike], spill: tuple[str, ...] = ()) -> None:
        self.held = held
        self.spill = spill
        arrays = np.broadcast_arrays(*(np.asarray(x, dtype=float) for x in given.values()))
        self.shape: tuple[int, ...] = arrays[0].shape if arrays else ()
        flat = {name: array.ravel() for name, array in zip(given, arrays, strict=True)}
        self.given: dict[str, FloatArray] = held.as_conditions(flat)

    def reading(self, name: str) -> Reading:
        """One quantity of the language's table, with its error and its route. NoAnswerError for a name that is none."""
        from eoscore.state.table import QUANTITIES, unit_in

        if name not in QUANTITIES:
            known = ", ".join(QUANTITIES)
            raise NoAnswerError(f"{name} is no quantity of a state; known are {known}")
        unit = unit_in(name, self.held.dimension)
        try:
            with np.errstate(all="ignore"):
                return QUANTITIES[name].read(self, unit)
        except NoAnswerError as error:
            return self.nothing(error.why, unit)

    def __getattr__(self, name: str) -> float | FloatArray:
        from eoscore.state.table import QUANTITIES

        if name not in QUANTITIES:
            raise AttributeError(f"a state has no {name!r}; it has {', '.join(QUANTITIES)}")
        return self.reading(name).number()

    def __dir__(self) -> list[str]:
        from eoscore.state.table import QUANTITIES

        return sorted([*super().__dir__(), *QUANTITIES])

    @cached_property
    def solution(self) -> Solution:
        """alpha, kT and the condensate at every point; NoAnswerError where the conditions fix no state."""
        return solve(self.held.model, self.given)

    @cached_property
    def sums(self) -> Sums:
        """The sums of the excited gas."""
        return self.held.model.whole.sums(self.solution.alpha, self.solution.kT)

    @cached_property
    def doubt(self) -> tuple[FloatArray, FloatArray]:
        """Bounds of the errors of alpha and of ln T."""
        return bounds(self.held.model, self.given, self.solution, self.sums)

    @cached_property
    def local_sums(self) -> Sums:
        """The sums per volume at the bottom."""
        local = self.held.model.local
        if local is None:
            raise NoAnswerError("every direction is held as levels: there is no local density")
        return local.sums(self.solution.alpha, self.solution.kT)

    @cached_property
    def kT(self) -> tuple[FloatArray, FloatArray]:
        """kT in J, given or solved for, and the bound of the error of its logarithm."""
        if "T" in self.given:
            return K_B * self.given["T"], np.full(self.given["T"].shape, 2 * EPS)
        return self.solution.kT, self.doubt[1]

    @cached_property
    def number(self) -> tuple[FloatArray, FloatArray]:
        """N, given or solved for (per volume in a uniform gas), and the bound of its error."""
        if "N" in self.given:
            return self.given["N"], 2 * EPS * np.abs(self.given["N"])
        excited, error = self.of_sums("N")
        return excited + self.solution.condensate, error + 4 * EPS * self.solution.condensate

    def of_sums(self, name: str) -> tuple[FloatArray, FloatArray]:
        """N, U (J) or S (J/K) of the excited gas and the bound of the error."""
        s, model = self.solution, self.held.model
        value, by_alpha, by_log = model.value(name, s.alpha, s.kT, self.sums)
        return value, model.noise(name, value, self.sums, s.kT) + self.bound(0.0, value, by_alpha, by_log)

    def bound(
        self, relative: float | FloatArray, value: FloatArray, by_alpha: FloatArray, by_log: FloatArray
    ) -> FloatArray:
        """The error of a function of alpha and ln T from its own, and from those of alpha and ln T."""
        dalpha, dlog = self.doubt
        lean = np.where(dalpha > 0, np.abs(by_alpha) * dalpha, 0.0)
        return (relative + 4 * EPS) * np.abs(value) + lean + np.abs(by_log) * dlog

    def numeric_bound(
        self, relative: float | FloatArray, function: _OfState
    ) -> tuple[FloatArray, FloatArray]:
        """A function of (alpha, kT) at the state and its error, with slopes by differences (an error may be rough)."""
        s = self.solution
        value = function(s.alpha, s.kT)
        h = 1e-4
        shifted = np.where(s.alpha == 0, 0.0, h * np.maximum(np.abs(s.alpha), self.doubt[0]))
        by_alpha = np.where(shifted > 0, (function(s.alpha + shifted, s.kT) - value) / shifted, 0.0)
        by_log = (function(s.alpha, s.kT * (1 + h)) - value) / h
        return value, self.bound(relative, value, by_alpha, by_log)

    def profile(self, **positions: ArrayLike) -> Profile:
        """V, density and pressure of the non-condensed gas at positions in m, by coordinate; of one state.

        See `eoscore.state.profile.profile`.
        """
        from eoscore.state.profile import profile

        return profile(self, positions)

    def at(self, name: str, **positions: ArrayLike) -> float | FloatArray:
        """V_at, n_at, pressure_at or n_column at positions in m, by coordinate, which broadcast with the states.

        Coordinates not given are those of the bottom; n_column is integrated along the one that is not given.
        """
        from eoscore.state.positioned import read_at

        return read_at(self, name, positions).number()

    @property
    def reasons(self) -> list[Reason]:
        """Why points have no state."""
        return [Reason(words, self.shaped(where)) for words, where in self.solution.missing]

    def shaped(self, flat: NDArray[Shaped]) -> NDArray[Shaped]:
        """A flat array in the shape of the question."""
        return np.asarray(flat).reshape(self.shape)

    def read(
        self,
        value: FloatArray,
        error: FloatArray,
        unit: str,
        route: str = "",
        reasons: Iterable[Reason] = (),
        of: str = "",
    ) -> Reading:
        """A reading of the state, in the shape of the question; `of`: the one condition it depends on, if given."""
        route = route or self.held.model.whole.route
        told = [*(self.reasons if self.solved and of not in self.given else ()), *reasons]
        lost = ~np.isfinite(value).reshape(self.shape)
        for reason in told:
            lost &= ~reason.where
        told.append(Reason("no finite number came of it: it is beyond the range of doubles", lost))
        return reading_of(self.shaped(value), self.shaped(error), unit, route, told)

    @property
    def solved(self) -> bool:
        """Whether the state has been solved for."""
        return "solution" in self.__dict__

    def nothing(self, why: str, unit: str) -> Reading:
        """A reading without a number anywhere."""
        nan = np.full(self.shape, np.nan)
        return reading_of(nan, nan, unit, "", [Reason(why, np.ones(self.shape, dtype=bool))])

    def __repr__(self) -> str:
        given = ", ".join(f"{name} = {_short(x)}" for name, x in self.given.items())
        return f"State of {self.held.name} with {given}"

    def _repr_html_(self) -> str:
        from eoscore.state.page import state_table

        return state_table(self)


def _short(x: FloatArray) -> str:
    return f"{x[0]:.6g}" if x.size == 1 else f"{x.size} values from {np.min(x):.6g} to {np.max(x):.6g}"


if TYPE_CHECKING:
    from collections.abc import Callable

    _OfState = Callable[[FloatArray, FloatArray], FloatArray]
