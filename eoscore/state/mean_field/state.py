"""The state of a gas with `treatment hartree_fock`."""

from __future__ import annotations

from functools import cached_property
from typing import TYPE_CHECKING

import numpy as np

from eoscore.constants import K_B
from eoscore.errors import NoAnswerError
from eoscore.state.mean_field import local
from eoscore.state.mean_field.matter import filling_of
from eoscore.state.mean_field.positions import energies_at
from eoscore.state.mean_field.precision import relative_error
from eoscore.state.profile import Profile
from eoscore.state.solution import Solution
from eoscore.state.state import State

if TYPE_CHECKING:
    from collections.abc import Callable

    from numpy.typing import ArrayLike

    from eoscore.state.mean_field.filling import Filled, Filling
    from eoscore.state.reading import FloatArray, Reading

__all__ = ["MeanFieldState"]

ROUTE = "Hartree-Fock in local density, Thomas-Fermi condensate"
WAYS = (("N", "T"), ("mu", "T"), ("N", "S"), ("N", "U"))


class MeanFieldState(State):
    """A state whose quantities include those of the condensate, its radii and the release energy.

    It is fixed by N and T, mu and T, N and S, or N and U. Points are solved one by one.
    """

    def reading(self, name: str) -> Reading:
        """See `State.reading`."""
        from eoscore.state.mean_field.table import READ
        from eoscore.state.table import unit_in

        if name not in READ:
            return super().reading(name)
        unit = unit_in(name, self.held.dimension)
        try:
            with np.errstate(all="ignore"):
                return READ[name](self, unit)
        except NoAnswerError as error:
            return self.nothing(error.why, unit)

    @cached_property
    def filling(self) -> Filling:
        """The solver; NoAnswerError where the treatment does not fit the gas or the place."""
        return filling_of(self.held)

    @cached_property
    def fills(self) -> list[Filled | None]:
        """The solved points; None where there is no state, and `solution` says why."""
        _ = self.solution
        return self._fills

    @cached_property
    def solution(self) -> Solution:
        """kT and the condensate of every point; alpha is -mu/kT."""
        names = next((way for way in WAYS if set(way) == set(self.given)), None)
        if names is None:
            came = ", ".join(self.given) or "nothing"
            known = "; ".join(" and ".join(way) for way in WAYS)
            raise NoAnswerError(f"with treatment hartree_fock a state is fixed by {known}; {came} came")
        size = self.given[names[0]].size
        solution, fills = Solution.empty(size), []
        filling = self.filling
        for index in range(size):
            first, second = (float(self.given[name][index]) for name in names)
            fills.append(_attempt(filling, names, first, second, solution, index))
        self._fills: list[Filled | None] = fills
        return solution

    def each(self, read: Callable[[Filled], float]) -> FloatArray:
        """A number of every point, nan where there is no state."""
        return np.array([np.nan if fill is None else read(fill) for fill in self.fills])

    @cached_property
    def relative(self) -> FloatArray:
        """Bound of the relative error of N, U and S, of every point; nan where there is no state."""
        of_sums = self.each(lambda fill: relative_error(fill.cloud))
        if "N" not in self.given:
            return of_sums
        return of_sums + np.abs(self.each(lambda fill: fill.number) / self.given["N"] - 1)  # as it was met

    @cached_property
    def kT(self) -> tuple[FloatArray, FloatArray]:
        """See `State.kT`."""
        if "T" in self.given:
            return K_B * self.given["T"], np.full(self.given["T"].shape, 1e-15)
        return self.solution.kT, 3 * self.relative

    @cached_property
    def number(self) -> tuple[FloatArray, FloatArray]:
        """See `State.number`."""
        if "N" in self.given:
            return self.given["N"], 1e-15 * np.abs(self.given["N"])
        value = self.each(lambda fill: fill.number)
        return value, self.relative * value

    def profile(self, **positions: ArrayLike) -> Profile:
        """See `State.profile`: the density of the thermal part, the pressure of both."""
        energies, outside = energies_at(self.held, positions)
        _, thermal = self.parts(energies)
        pressure = local.pressure_at(self._only.cloud, energies.ravel()).reshape(energies.shape)
        none = np.where(outside, 0.0, 1.0)
        return Profile(np.where(outside, np.inf, energies), none * thermal, none * pressure)

    def densities(self, **positions: ArrayLike) -> tuple[FloatArray, FloatArray]:
        """Densities (m^-3) of the condensate and of the thermal part at positions by coordinate, m.

        Of one state: NoAnswerError for several, or none. Arrays broadcast; beyond walls there is nothing.
        """
        energies, outside = energies_at(self.held, positions)
        condensed, thermal = self.parts(energies)
        return np.where(outside, 0.0, condensed), np.where(outside, 0.0, thermal)

    def parts(self, V: ArrayLike) -> tuple[FloatArray, FloatArray]:
        """The same where the potential is V, J from the bottom."""
        energies = np.asarray(V, dtype=float)
        condensed, thermal = self._only.cloud.parts(energies.ravel())
        return condensed.reshape(energies.shape), thermal.reshape(energies.shape)

    @property
    def _only(self) -> Filled:
        if len(self.fills) != 1 or self.fills[0] is None:
            raise NoAnswerError("a profile is that of one state: give one value of each condition")
        return self.fills[0]


def _attempt(
    filling: Filling, names: tuple[str, str], first: float, second: float, solution: Solution, index: int
) -> Filled | None:
    """One point, entered into the solution."""
    here = np.arange(solution.kT.size) == index
    try:
        fill = _filled(filling, names, first, second)
    except NoAnswerError as error:
        solution.refuse(error.why, here)
        return None
    kT = fill.cloud.fluid.kT
    solution.kT[here], solution.alpha[here] = kT, -fill.cloud.mu / kT
    solution.condensate[here], solution.condensed[here] = fill.condensate, fill.condensate > 0
    return fill


def _filled(filling: Filling, names: tuple[str, str], first: float, second: float) -> Filled:
    for name, value in zip(names, (first, second), strict=True):
        if not np.isfinite(value):
            raise NoAnswerError(f"{name} came as a value that is not finite")
        if name != "mu" and value <= 0:
            raise NoAnswerError(f"{name} must be above zero")
    match names[1]:
        case "T" if names[0] == "N":
            return filling.holding(first, K_B * second)
        case "T":
            return filling.at_potential(first, K_B * second)
        case "S":
            return filling.with_entropy(first, second / K_B)
        case _:
            return filling.with_energy(first, second)
