"""The file's expressions with the signs of its values: a rule must know that k < 0, or that there is no tilt."""

from __future__ import annotations

from functools import cached_property
from typing import TYPE_CHECKING, Any

import sympy as sp

if TYPE_CHECKING:
    from collections.abc import Mapping

    from eoscore.language.symbolic import Symbolic

__all__ = ["Signed"]


class Signed:
    """The parts of a `Symbolic`, in which symbols of negative value are negative, and those of value 0 are 0."""

    def __init__(self, known: Symbolic) -> None:
        self._known = known
        self.coordinates, self.momenta = known.coordinates, known.momenta
        self.potential, self.energy, self.rho = map(self._signed, (known.potential, known.energy, known.rho))
        self.walls, self.zone = (tuple(map(self._signed, part)) for part in (known.walls, known.zone))

    def of(self, name: str) -> Any:
        """The expression behind a name, None where nobody knows it."""
        return self._signed(self._known.of(name))

    @cached_property
    def _anchor(self) -> dict[sp.Symbol, tuple[Any, float]]:
        """Symbols for the two sides of the measured point where the file has mere numbers for them."""
        taken, parts = self._known.values, self._known.anchor or ()
        found = {}
        for name, part in zip(("N_anchor", "T_anchor"), parts, strict=False):
            if part.is_number:
                free = next(n for n in (name, f"{name}_1", f"{name}_2", f"{name}_3") if n not in taken)
                found[sp.Symbol(free, positive=True)] = (part, float(part))
        return found

    @property
    def anchor(self) -> tuple[Any, Any] | None:
        """N_c and T of a measured point."""
        if self._known.anchor is None:
            return None
        names = {part: symbol for symbol, (part, _) in self._anchor.items()}
        number, temperature = self._known.anchor
        return names.get(number, self._signed(number)), names.get(temperature, self._signed(temperature))

    @property
    def values(self) -> Mapping[str, float]:
        """SI values of all symbols by name."""
        return {**self._known.values, **{symbol.name: value for symbol, (_, value) in self._anchor.items()}}

    def _signed(self, expression: Any) -> Any:
        if expression is None or not isinstance(expression, sp.Basic):
            return expression
        values = self._known.values
        signs = {
            symbol: sp.Symbol(symbol.name, negative=True) if values[symbol.name] < 0 else sp.Integer(0)
            for symbol in expression.free_symbols
            if values.get(symbol.name, 1.0) <= 0 and symbol.name in values
        }
        return expression.subs(signs) if signs else expression
