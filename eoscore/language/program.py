"""A checked text: what it declares, what it asks, which of its literals are uncertain, and its bindings."""

from __future__ import annotations

from dataclasses import dataclass, field
from functools import cached_property
from typing import TYPE_CHECKING, NamedTuple

from eoscore.errors import Complaint, TarnError
from eoscore.language.binding import Binding
from eoscore.language.block import UNIFORM
from eoscore.language.checker import Checker
from eoscore.language.faults import Faults, listed
from eoscore.language.lower import Lowering
from eoscore.language.place_check import check_place
from eoscore.language.role import settable

if TYPE_CHECKING:
    from collections.abc import Mapping

    from eoscore.language import nodes
    from eoscore.language.block import Pair
    from eoscore.language.question import Question
    from eoscore.language.world import World
    from eoscore.source import Source, Span

__all__ = ["Binding", "Conditions", "Program", "UncertainLiteral"]


@dataclass(frozen=True)
class UncertainLiteral:
    """A literal such as `1.50(5) W`: an independent variable, value and standard deviation in SI.

    `name` is the name that it defines if it stands alone behind the `=`, else None.
    """

    index: int
    span: Span
    value: float
    sigma: float
    name: str | None


class Conditions(NamedTuple):
    """SI values of a question: of the thermodynamic conditions, and of the parameters it gives new values."""

    given: dict[str, float]
    values: dict[str, float]


@dataclass(frozen=True, eq=False)
class Program:
    """A text without faults. `gases` and `places` are the names of its blocks, in the order written."""

    source: Source
    file: nodes.File
    world: World
    checker: Checker
    questions: tuple[Question, ...]
    literals: tuple[UncertainLiteral, ...]
    literal_nodes: tuple[int, ...]
    _checked: set[Pair] = field(default_factory=set)

    @property
    def gases(self) -> tuple[str, ...]:
        """The names of the gases."""
        return tuple(self.world.gases)

    @property
    def places(self) -> tuple[str, ...]:
        """The names of the traps and states blocks; `uniform` is always there besides."""
        return tuple(self.world.places)

    @cached_property
    def parameters(self) -> frozenset[str]:
        """Every name that a binding of some gas in some place can give a new value."""
        pairs = [
            self.world.pair(g, p)
            for g in self.world.gases.values()
            for p in (None, *self.world.places.values())
        ]
        return frozenset(settable([pair.scope for pair in pairs] or [self.world.scope]))

    def bind(
        self,
        gas: str,
        place: str | None,
        values: Mapping[str, float] | None = None,
        literals: Mapping[int, float] | None = None,
    ) -> Binding:
        """A gas in a place (None where the gas holds itself) with names and uncertain literals at other SI values.

        A name that only another gas or place knows is passed over; one that nobody knows, an unknown gas or place,
        and a pair that does not fit raise TarnError.
        """
        pair = self._pair(gas, place)
        if pair not in self._checked:
            faults = Faults()
            check_place(pair, Checker(faults))
            faults.raise_if_any()
            self._checked.add(pair)
        given = {}
        for name, value in (values or {}).items():
            named = pair.scope.find(name)
            if named is not None and not named.is_function:
                given[named] = float(value)
            elif name not in self.parameters:
                raise self._complaint(
                    f"there is no name `{name}` to give a value", listed(name, self.parameters)
                )
        return Binding(pair, self.checker, Lowering(given, self._by_node(literals)))

    def conditions(self, question: Question, literals: Mapping[int, float] | None = None) -> Conditions:
        """The conditions of a question in SI, with uncertain literals at other values."""
        scope = self._pair(question.gas, question.place).scope
        lowering = Lowering({}, self._by_node(literals))
        given, values = (
            {name: lowering.expression(each.node.value, scope) for name, each in conditions.items()}
            for conditions in (question.given, question.values)
        )
        return Conditions(given, values)

    def literals_of(self, question: Question) -> tuple[UncertainLiteral, ...]:
        """The uncertain literals that can matter to a question: its own, its gas's, its places', the file's."""
        asked = {question.gas, question.place, *question.origins}
        gases = [gas.node for gas in self.world.gases.values() if gas.name not in asked]
        places = [
            place.node for place in self.world.places.values() if place.node and place.name not in asked
        ]
        far = [*gases, *places, *(node for node in self.world.questions if node is not question.node)]
        return tuple(
            each for each in self.literals if not any(_inside(each.span, block.span) for block in far)
        )

    def _by_node(self, literals: Mapping[int, float] | None) -> dict[int, float]:
        return {self.literal_nodes[index]: float(value) for index, value in (literals or {}).items()}

    def _pair(self, gas: str, place: str | None) -> Pair:
        if gas not in self.world.gases:
            raise self._complaint(f"there is no gas `{gas}`", listed(gas, self.world.gases, what="gases"))
        if place is None or place == UNIFORM.name:
            return self.world.pair(self.world.gases[gas], UNIFORM if place else None)
        if place not in self.world.places:
            known = [*self.world.places, UNIFORM.name]
            raise self._complaint(f"there is no place `{place}`", listed(place, known, what="places"))
        return self.world.pair(self.world.gases[gas], self.world.places[place])

    def _complaint(self, message: str, hint: str) -> TarnError:
        return TarnError([Complaint(self.source.name, 1, 1, 1, 1, message, hint)])


def _inside(inner: Span, outer: Span) -> bool:
    return inner.source is outer.source and outer.start <= inner.start and inner.end <= outer.end
