"""A gas in a place with every name at a value: the facts that physics takes, numbers and formulas in SI."""

from __future__ import annotations

import math
from functools import cached_property
from typing import TYPE_CHECKING, Literal, cast

from eoscore.errors import Complaint, NoAnswerError, TarnError
from eoscore.formula.field import Field
from eoscore.language import nodes
from eoscore.language.facts import GasFacts, PlaceFacts, StatesFacts, TrapFacts, UniformFacts, VolumeFacts
from eoscore.language.faults import listed
from eoscore.language.kind import PURE, Wild
from eoscore.language.place_check import dimension_of
from eoscore.language.role import settable

if TYPE_CHECKING:
    from eoscore.language.block import Pair
    from eoscore.language.checker import Checker
    from eoscore.language.lower import Lowering
    from eoscore.language.scope import Named
    from eoscore.language.symbolic import Symbolic
    from eoscore.language.units import Dimension

__all__ = ["Binding"]


class Binding:
    """One gas in one place. Made by `Program.bind`; facts are lowered when they are asked for."""

    def __init__(self, pair: Pair, checker: Checker, lowering: Lowering) -> None:
        self._pair, self._checker, self._lowering = pair, checker, lowering

    @cached_property
    def names(self) -> tuple[str, ...]:
        """Every name with a value that the place, the gas or the file defines, inner ones first."""
        return tuple(settable([self._pair.scope]))

    def value(self, name: str) -> tuple[float, Dimension]:
        """SI value and dimension of a name. Raises TarnError where nobody knows it, or it is a function."""
        named = self._pair.scope.find(name)
        if named is None or named.is_function:
            message = f"`{name}` has no value in {self._pair.scope.title}"
            raise TarnError([Complaint("<name>", 1, 1, 1, 1, message, listed(name, self.names))])
        dim = self._checker.named(named).dimension
        return self._lowering.value(named), PURE if isinstance(dim, Wild) else dim

    @cached_property
    def gas(self) -> GasFacts:
        """The gas in SI. Raises NoAnswerError, in words, where the values given make no sense."""
        gas = self._pair.gas
        own = gas.scope.names
        statistics = gas.statistics.name if gas.statistics else "bose"
        return GasFacts(
            name=gas.name,
            statistics=cast("Literal['bose', 'fermi', 'classical']", statistics),
            degeneracy=self._positive(own["degeneracy"]) if "degeneracy" in own else 1.0,
            mass=self._positive(own["m"]) if "m" in own else None,
            a_s=self._finite(own["a_s"]) if "a_s" in own else None,
            treatment=gas.treatment.name if gas.treatment else None,
            dispersion="inline" if gas.energy else gas.signature.name if gas.signature else "free",
            parameters={name: self._finite(named) for name, named in gas.parameters.items()},
            energy=self._field(gas.energy) if gas.energy else None,
        )

    @cached_property
    def place(self) -> PlaceFacts | None:
        """The place in SI, None where the gas holds itself. Raises NoAnswerError as `gas` does."""
        place, own = self._pair.place, self._pair.scope.names
        if place is None:
            return None
        if place.node is None:
            return UniformFacts()
        if isinstance(place.node, nodes.States):
            return self._states()
        e_max = self._positive(own["E_max"]) if "E_max" in own else None
        levels = place.levels.name if place.levels else None
        if "V" in own:
            return TrapFacts(place.name, self._field(own["V"]), e_max, levels)
        size = dimension_of(self._pair, self._checker) or 3
        return VolumeFacts(place.name, self._positive(own["volume"]), size, e_max, levels)

    def symbolic(self) -> Symbolic:
        """The same in SymPy, by a walk of its own over the nodes; imports SymPy."""
        from eoscore.language.symbolic import Symbolic

        return Symbolic(self._pair, self._lowering)

    def _states(self) -> StatesFacts:
        place, own = self._pair.place, self._pair.scope.names
        anchor = place.anchor if place else None
        return StatesFacts(
            name=place.name if place else "",
            density=self._lowering.function(own["rho"], ("E",))[0] if "rho" in own else None,
            exponent=self._positive(own["exponent"]) if "exponent" in own else None,
            anchor_number=self._lowering.expression(anchor.number, self._pair.scope) if anchor else None,
            anchor_temperature=self._lowering.expression(anchor.temperature, self._pair.scope)
            if anchor
            else None,
        )

    def _field(self, named: Named) -> Field:
        coordinates = tuple(p.name for p in (named.definition.parameters if named.definition else None) or ())
        return Field(coordinates, *self._lowering.function(named, coordinates))

    def _finite(self, named: Named) -> float:
        value = self._lowering.value(named)
        if not math.isfinite(value):
            raise NoAnswerError(f"`{named.name}` has no finite value with the values given")
        return value

    def _positive(self, named: Named) -> float:
        value = self._finite(named)
        if value <= 0:
            raise NoAnswerError(
                f"`{named.name}` must be above 0, with the values given it is {value:g} in SI"
            )
        return value
