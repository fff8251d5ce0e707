"""What a name after `with` or `over` stands for: a condition of the gas, a coordinate of the place, or a parameter."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING, Final, Literal

from eoscore.language.quantities import AT_COUNTS, AT_POSITIONS, CONDITIONS, COUNT
from eoscore.language.scope import constant_scope

if TYPE_CHECKING:
    from collections.abc import Sequence

    from eoscore.language import nodes
    from eoscore.language.block import Pair
    from eoscore.language.scope import Named, Scope

__all__ = ["Role", "Roles", "settable"]

Role = Literal["condition", "coordinate", "parameter"]

# Always conditions. The others are parameters where the file defines such a name: `f_0` is many a trap's frequency.
_RESERVED: Final = ("N", "n", "T", "mu", "S", "U")


def settable(scopes: Sequence[Scope]) -> dict[str, Named]:
    """The names that a question may give new values: all but functions and constants, inner ones first."""
    found: dict[str, Named] = {}
    for scope in scopes:
        for inner in scope.chain():
            if inner is not constant_scope():
                found.update({k: v for k, v in inner.names.items() if k not in found and not v.is_function})
    return found


@dataclass(frozen=True)
class Roles:
    """The names of one question.

    `coordinates` are those of its place where something is asked at positions, and the number of condensed particles
    where its probability is asked for.
    """

    scopes: Sequence[Scope]
    coordinates: tuple[str, ...] = ()

    @classmethod
    def of_question(cls, node: nodes.Find | nodes.Derive, pairs: Sequence[Pair]) -> Roles:
        """The roles in a question to gases in places; the first pair is the one asked, others are origins."""
        is_local = any(name.name in AT_POSITIONS for name in node.quantities)
        potential = pairs[0].named("V") if is_local else None
        definition = potential.definition if potential else None
        parameters = (definition.parameters if definition else None) or ()
        counts = (COUNT,) if any(name.name in AT_COUNTS for name in node.quantities) else ()
        names = tuple(parameter.name for parameter in parameters)
        return cls([each.scope for each in pairs], names + counts)

    @cached_property
    def known(self) -> dict[str, Named]:
        """The names that can be given new values."""
        return settable(self.scopes)

    def of(self, name: str) -> Role:
        """What a name stands for; "parameter" too where nobody knows it."""
        if name in self.coordinates:
            return "coordinate"
        if name in _RESERVED or (name in CONDITIONS and name not in self.known):
            return "condition"
        return "parameter"
