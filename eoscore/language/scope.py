"""Who sees what: a block sees its own names, then the gas it is asked with, then the file's, then the constants."""

from __future__ import annotations

from dataclasses import dataclass, field
from functools import cache
from typing import TYPE_CHECKING

from eoscore import constants
from eoscore.language.kind import Kind, dimension

if TYPE_CHECKING:
    from collections.abc import Iterable, Iterator

    from eoscore.language.nodes import Definition

__all__ = ["Named", "Scope", "constant_scope", "read_in"]


@dataclass(frozen=True, eq=False)
class Named:
    """A name as some scope knows it: a definition with the scope it is read in, or a given value.

    Every name is itself only (compared by identity), so that it can carry a value of its own in a binding.
    """

    name: str
    definition: Definition | None = None
    home: Scope | None = None
    given: Kind | None = None

    @property
    def is_function(self) -> bool:
        """Whether the name wants arguments."""
        return self.definition is not None and self.definition.parameters is not None


@dataclass(frozen=True, eq=False)
class Scope:
    """Names of one block or file, and the scope that is asked for what it does not know."""

    title: str
    outer: Scope | None = None
    names: dict[str, Named] = field(default_factory=dict)
    is_block: bool = False

    def chain(self) -> Iterator[Scope]:
        """The scopes from this one outwards."""
        scope: Scope | None = self
        while scope is not None:
            yield scope
            scope = scope.outer

    def find(self, name: str) -> Named | None:
        """What a name means here, None if nothing."""
        for scope in self.chain():
            if name in scope.names:
                return scope.names[name]
        return None

    def get(self, name: str) -> Named:
        """What a name means here; LookupError where it means nothing, which the check of the text rules out."""
        named = self.find(name)
        if named is None:
            raise LookupError(name)
        return named

    def known(self) -> list[str]:
        """All names that are seen from here, inner ones first."""
        return list(dict.fromkeys(name for scope in self.chain() for name in scope.names))

    def define(self, definitions: Iterable[Definition]) -> Scope:
        """Takes in definitions that are read in this scope itself; the first of a name counts."""
        for definition in definitions:
            self.names.setdefault(definition.name.name, Named(definition.name.name, definition, self))
        return self


def read_in(named: Named) -> tuple[Definition, Scope]:
    """The definition of a name and the scope it is read in; LookupError for a given value, which has none."""
    if named.definition is None or named.home is None:
        raise LookupError(named.name)
    return named.definition, named.home


@cache
def constant_scope() -> Scope:
    """The constants that are always known, and nothing around them."""
    units = {
        "pi": (constants.PI, "1"),
        "hbar": (constants.HBAR, "J.s"),
        "h": (constants.H, "J.s"),
        "k_B": (constants.K_B, "J/K"),
        "c": (constants.C, "m/s"),
        "e": (constants.E, "C"),
        "m_e": (constants.M_E, "kg"),
        "m_u": (constants.M_U, "kg"),
        "mu_B": (constants.MU_B, "J/T"),
        "mu_0": (constants.MU_0, "N/A2"),
        "epsilon_0": (constants.EPSILON_0, "F/m"),
        "a_0": (constants.A_0, "m"),
        "g_n": (constants.G_N, "m/s2"),
    }
    given = {name: Named(name, given=Kind(dimension(text), value)) for name, (value, text) in units.items()}
    return Scope("the constants", None, given)
