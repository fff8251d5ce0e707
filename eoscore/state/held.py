"""A gas held in a place: built once, asked for any number of states."""

from __future__ import annotations

from dataclasses import dataclass, field
from math import inf
from typing import TYPE_CHECKING

import numpy as np

from eoscore.constants import K_B
from eoscore.errors import NoAnswerError
from eoscore.state.state import State
from eoscore.state.treatment import state_of

if TYPE_CHECKING:
    from collections.abc import Iterable, Mapping

    from numpy.typing import ArrayLike

    from eoscore.gas import Gas
    from eoscore.measure import Measure
    from eoscore.place import Place
    from eoscore.state.canonical import CondensateStatistics
    from eoscore.state.model import Model
    from eoscore.state.reading import FloatArray, Reading

__all__ = ["HeldGas"]


@dataclass(frozen=True, repr=False)
class HeldGas:
    """A gas in equilibrium in a place; `eoscore.state.hold` makes one.

    model: what is counted. dimension: of the place (0 where every direction is held as levels). momentum: the
    measure of E(p) per m^d. top: energies above it are not counted, J.
    volume: the content of a flat box, m^d. uniform: whether numbers are densities.
    """

    gas: Gas
    place: Place | None
    model: Model
    dimension: int
    momentum: Measure
    top: float = inf
    volume: float | None = None
    uniform: bool = False
    why_not_local: str = "the place has no coordinates, and so no density at its bottom"
    _cache: dict[str, object] = field(default_factory=dict, compare=False)

    def state(self, **given: ArrayLike) -> State:
        """The state under two conditions in SI units: of N, n, T, mu, S, U, fugacity, f_0, N_0, n_peak, PSD.

        Arrays broadcast. NoAnswerError where the conditions fix no state; single points that have none are masked.
        """
        state = state_of(self, given)
        _ = state.solution
        return state

    def find(self, names: Iterable[str], given: Mapping[str, ArrayLike]) -> dict[str, Reading]:
        """Readings of quantities under conditions, all in SI units; what has no answer says why in its reading."""
        try:
            state = state_of(self, given)
        except NoAnswerError as error:
            state = State(self, {})
            return {name: self._nothing(name, error.why, given) for name in names}
        return {name: state.reading(name) for name in names}

    def _nothing(self, name: str, why: str, given: Mapping[str, ArrayLike]) -> Reading:
        from eoscore.state.table import unit_in

        empty = State(self, {})
        empty.shape = np.broadcast_shapes(*(np.shape(x) for x in given.values()))
        return empty.nothing(why, unit_in(name, self.dimension))

    def T_c(self, **given: ArrayLike) -> float | FloatArray:
        """Critical temperature in K of N particles, or of a density n; NoAnswerError where there is none."""
        return state_of(self, given).reading("T_c").number()

    def N_c(self, T: ArrayLike) -> float | FloatArray:
        """Critical number at T in K."""
        return state_of(self, {"T": T}).reading("N_c").number()

    def n_c(self, T: ArrayLike) -> float | FloatArray:
        """Critical density at the bottom, in m^-d, at T in K."""
        return state_of(self, {"T": T}).reading("n_c").number()

    def condensate_statistics(self, N: int, T: float) -> CondensateStatistics:
        """Mean, variance and distribution of N_0 of exactly N ideal bosons at T (K), in a place with `levels exact`.

        NoAnswerError without these, and for more than 20 000 particles.
        """
        from eoscore.state.canonical import condensate_statistics

        return condensate_statistics(self, N, T)

    def brought_from(self, other: HeldGas | State, **given: ArrayLike) -> State:
        """The state after a slow change from another place, at the same N and entropy.

        `other` is a held gas with the conditions of its state, or a state, so that chains of places are written
        one after the other. Where this place has an escape energy, `state.spill` says what would run over.
        """
        from eoscore.state.transfer import bring

        return bring(self, other if isinstance(other, State) else other.state(**given))

    def as_conditions(self, given: Mapping[str, FloatArray]) -> dict[str, FloatArray]:
        """Conditions as the solver knows them: n becomes N of the volume, or the density of a uniform gas."""
        conditions = dict(given)
        if self.uniform:
            for name in ("N", "S", "U", "N_0"):
                if name in conditions:
                    raise NoAnswerError(
                        f"{name} came for a uniform gas, which has no end: give its density n, or hold it in a trap "
                        "with `volume = ...`"
                    )
        if "n" in conditions:
            if "N" in conditions:
                raise NoAnswerError("N and n came together: they are one condition, and a state needs two")
            if not self.uniform and self.volume is None:
                raise NoAnswerError(
                    "n came for a trap, where the density is not the same everywhere: give N, or n_peak"
                )
            conditions["N"] = conditions.pop("n") * (self.volume or 1.0)
        return conditions

    @property
    def position(self) -> Measure | None:
        """The measure of V, None for a place that has none. NoAnswerError where its volume is infinite."""
        if self.place is None or self.uniform or self.volume is not None or not self.dimension:
            return None
        return self.place.measure

    @property
    def name(self) -> str:
        """`strontium in crossed`."""
        place = getattr(self.place, "name", None)
        return self.gas.name if place is None else f"{self.gas.name} in {place}"

    @property
    def depth(self) -> tuple[float, float]:
        """The depth in J (inf where the place holds at every energy) and its error."""
        place = self._place("depth")
        return place.depth, place.depth * place.depth_error

    def frequencies(self) -> FloatArray:
        """Principal frequencies in Hz, ascending."""
        return np.array(self._place("trap frequencies").frequencies)

    def bottom(self) -> FloatArray:
        """The position of the bottom in the coordinates of the potential, m."""
        return np.array(self._place("bottom").r_min)

    def bottom_energy(self) -> float:
        """V at the bottom in J."""
        return self._place("bottom").v_min

    def _place(self, what: str) -> Place:
        if self.place is None:
            raise NoAnswerError(
                f"{self.gas.name} holds every direction as levels: there is no place with a {what}"
            )
        return self.place

    def __repr__(self) -> str:
        facts = f"counted up to {self.top / K_B:.6g} K" if self.top < inf else "no escape energy"
        return f"HeldGas({self.name}: {self.model.whole.route}, {facts})"

    def _repr_html_(self) -> str:
        from eoscore.state.page import gas_table

        return gas_table(self)
