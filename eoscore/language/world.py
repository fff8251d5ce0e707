"""All that a text declares, sorted: the file's own names, gases, places, and the scopes of gases in places."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import TYPE_CHECKING

from eoscore.language import nodes
from eoscore.language.block import UNIFORM, Gas, Pair, Place, gas_block, pair, place_block, without_doubles
from eoscore.language.builtin import BUILTINS
from eoscore.language.scope import Scope, constant_scope

if TYPE_CHECKING:
    from collections.abc import Iterable, Mapping, Sequence

    from eoscore.language.faults import Faults
    from eoscore.language.include import Included
    from eoscore.language.setting import Settings
    from eoscore.language.signature import Signature

__all__ = ["World", "world_of"]


@dataclass(frozen=True, eq=False)
class World:
    """The declarations of a text with everything it takes in."""

    scope: Scope
    gases: Mapping[str, Gas]
    places: Mapping[str, Place]
    questions: tuple[nodes.Find | nodes.Derive, ...]
    settings: Settings
    shelf: tuple[Scope, ...] = ()
    _pairs: dict[tuple[str, str | None], Pair] = field(default_factory=dict)

    @property
    def pairs_made(self) -> tuple[Pair, ...]:
        """The pairs that were asked for so far."""
        return tuple(self._pairs.values())

    def pair(self, gas: Gas, place: Place | None) -> Pair:
        """The scope of a gas in a place, made once."""
        key = (gas.name, place.name if place else None)
        if key not in self._pairs:
            self._pairs[key] = pair(gas, place)
        return self._pairs[key]


def world_of(
    included: Included, dispersions: Mapping[str, Signature], settings: Settings, faults: Faults
) -> World:
    """Sorts all entries; faults are noted for names that come twice."""
    entries = included.entries
    shelf_scopes = {name: _shelf_scope(name, file, faults) for name, file in included.shelf.items()}
    shelf = Scope("the shelf", constant_scope())
    for scope in shelf_scopes.values():
        shelf.names.update(scope.names)
    written = [entry for entry in entries if isinstance(entry, nodes.Definition)]
    definitions = settings.applied(without_doubles(written, faults), "")
    file_scope = Scope("the file", shelf).define(definitions)
    _builtin_names(entries, faults)
    blocks = _unique_blocks(entries, faults)
    gases = [
        gas_block(b, file_scope, dispersions, settings, faults) for b in blocks if isinstance(b, nodes.Gas)
    ]
    places = [place_block(b, settings, faults) for b in blocks if not isinstance(b, nodes.Gas)]
    return World(
        file_scope,
        {gas.name: gas for gas in gases},
        {place.name: place for place in places},
        tuple(entry for entry in entries if isinstance(entry, nodes.Find | nodes.Derive)),
        settings,
        tuple(shelf_scopes.values()),
    )


def _shelf_scope(name: str, file: nodes.File, faults: Faults) -> Scope:
    definitions = [entry for entry in file.entries if isinstance(entry, nodes.Definition)]
    return Scope(f"shelf {name}", constant_scope()).define(without_doubles(definitions, faults))


def _unique_blocks(
    entries: Iterable[nodes.Entry], faults: Faults
) -> list[nodes.Gas | nodes.Trap | nodes.States]:
    """The blocks; two of one name, or one that is called as the built-in place, are faults."""
    found: dict[str, nodes.Gas | nodes.Trap | nodes.States] = {}
    for entry in entries:
        if not isinstance(entry, nodes.Gas | nodes.Trap | nodes.States):
            continue
        name = entry.name
        if name.name == UNIFORM.name:
            faults.add(name.span, "`uniform` is the built-in unbounded place", "choose another name")
            continue
        first = found.setdefault(name.name, entry)
        if first is not entry:
            message = f"a block called `{name.name}` stands already in line {first.name.span.line}"
            faults.add(name.span, message, "choose another name")
    return list(found.values())


def _builtin_names(entries: Sequence[nodes.Entry], faults: Faults) -> None:
    """A function of Tarn keeps its meaning everywhere."""
    for entry in entries:
        inner = entry.entries if isinstance(entry, nodes.Gas | nodes.Trap | nodes.States) else (entry,)
        for each in inner:
            if (
                isinstance(each, nodes.Definition)
                and each.parameters is not None
                and each.name.name in BUILTINS
            ):
                message = f"`{each.name.name}` is a function of Tarn already"
                faults.add(each.name.span, message, "choose another name")
