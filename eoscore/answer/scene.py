"""What a caution may look at: one gas held in one place, the conditions asked for, and what was found."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING

import numpy as np

from eoscore.errors import EoscoreError

if TYPE_CHECKING:
    from collections.abc import Mapping

    from numpy.typing import NDArray

    from eoscore.language.program import Binding
    from eoscore.state import HeldGas, Reading

__all__ = ["Scene"]


@dataclass(frozen=True)
class Scene:
    """One binding of a question: SI numbers over the condition axes of its grid."""

    binding: Binding
    held: HeldGas
    given: Mapping[str, NDArray[np.float64]]
    found: Mapping[str, Reading]

    def number(self, name: str) -> NDArray[np.float64] | None:
        """The finite values of a quantity in the state asked for, given, found or solved now; None without one."""
        if name in self.given:
            return _finite(self.given[name])
        if name in self.found:
            return _finite(self.found[name].value)
        # Without conditions there is no state, and no need to measure the trap.
        return self._solved(name, self.given) if self.given else None

    def _solved(self, name: str, given: Mapping[str, NDArray[np.float64]]) -> NDArray[np.float64] | None:
        try:
            return _finite(self.held.find((name,), given)[name].value)
        except EoscoreError:
            return None  # a caution is told where its size is known, and is silent elsewhere

    @cached_property
    def temperature(self) -> float | None:
        """The lowest temperature in play in K: of the states asked for, else of condensation."""
        for name in ("T", "T_c"):
            values = self.number(name)
            if values is not None:
                return float(values.min())
        return None

    @cached_property
    def density(self) -> float | None:
        """The largest peak density in play in m^-3, of the states asked for, else at condensation."""
        if self.held.dimension != 3:
            return None
        values = self.number("n_peak")
        if values is None and self.temperature is not None and "N" in self.given:
            values = self._solved("n_peak", {"N": self.given["N"].max(), "T": np.asarray(self.temperature)})
        return None if values is None else float(values.max())

    @cached_property
    def frequencies(self) -> tuple[float, ...]:
        """The trap's non-zero frequencies in Hz, ascending; empty where the bottom is not quadratic."""
        values = self._solved("freq", {}) if self.binding.place is not None else None
        return () if values is None else tuple(f for f in values.tolist() if f > 0.0)

    def parameters(self, unit: str) -> dict[str, float]:
        """The named numbers of the file in play that carry this SI unit, such as `W`."""
        from eoscore.answer.unit import unit_of_dimension

        named = {name: self.binding.value(name) for name in self.binding.names}
        return {name: value for name, (value, dim) in named.items() if unit_of_dimension(dim) == unit}


def _finite(values: NDArray[np.float64]) -> NDArray[np.float64] | None:
    array = np.asarray(values, dtype=np.float64).reshape(-1)
    array = array[np.isfinite(array)]
    return array if array.size else None
