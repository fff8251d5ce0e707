"""Gas and place blocks with their entries sorted, ready to be checked and bound."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import TYPE_CHECKING, TypeVar

from eoscore.errors import PluginError
from eoscore.language import nodes
from eoscore.language.faults import listed
from eoscore.language.isotope import isotope_mass
from eoscore.language.kind import UNKNOWN, Kind, dimension
from eoscore.language.scope import Named, Scope

if TYPE_CHECKING:
    from collections.abc import Iterable, Mapping, Sequence

    from eoscore.language.faults import Faults
    from eoscore.language.setting import Settings
    from eoscore.language.signature import Signature

__all__ = ["UNIFORM", "Gas", "Pair", "Place", "gas_block", "pair", "place_block", "without_doubles"]

Entry = TypeVar("Entry")


@dataclass(frozen=True, eq=False)
class Gas:
    """A gas block: its own names, the parameters of its dispersion, and the words it chose.

    `signature` is None with an inline E(p), and where the dispersion is unknown.
    """

    node: nodes.Gas
    scope: Scope
    parameters: Mapping[str, Named]
    signature: Signature | None
    statistics: nodes.Ident | None
    treatment: nodes.Ident | None
    dispersion: nodes.DispersionChoice | None

    @property
    def name(self) -> str:
        """The name of the block."""
        return self.node.name.name

    @property
    def energy(self) -> Named | None:
        """The inline E(p), None where a plugin gives the energy."""
        return self.scope.names.get("E")

    @property
    def mass(self) -> Named | None:
        """The mass that the block itself gives."""
        return self.scope.names.get("m")

    @property
    def held(self) -> tuple[str, ...]:
        """The directions held as levels, by the parameters that hold them."""
        levels = self.signature.levels if self.signature else ()
        return tuple(name for name in levels if name in self.parameters)

    @property
    def momenta(self) -> tuple[str, ...]:
        """The momentum components of its energy; `("p",)` is isotropic and fits any dimension."""
        if self.energy is not None and self.energy.definition is not None:
            return tuple(p.name for p in self.energy.definition.parameters or ())
        return self.signature.momentum if self.signature else ("p",)


@dataclass(frozen=True, eq=False)
class Place:
    """A trap or states block, or the built-in `uniform` (node None)."""

    node: nodes.Trap | nodes.States | None
    definitions: tuple[nodes.Definition, ...] = ()
    anchor: nodes.Anchor | None = None
    levels: nodes.Ident | None = None

    @property
    def name(self) -> str:
        """The name of the block."""
        return self.node.name.name if self.node else "uniform"

    def has(self, name: str) -> bool:
        """Whether the block defines a name."""
        return any(definition.name.name == name for definition in self.definitions)


UNIFORM = Place(None)


@dataclass(frozen=True, eq=False)
class Pair:
    """A gas in a place: the scope in which the place, and every question about the two, is read."""

    gas: Gas
    place: Place | None
    scope: Scope = field(default_factory=lambda: Scope("nothing"))

    def named(self, name: str) -> Named | None:
        """A name of the place itself."""
        return self.scope.names.get(name) if self.place is not None else None


def pair(gas: Gas, place: Place | None) -> Pair:
    """The scope of a place that is asked with a gas."""
    if place is None:
        return Pair(gas, None, gas.scope)
    scope = Scope(f"{place.name} with {gas.name}", gas.scope, is_block=True)
    return Pair(gas, place, scope.define(place.definitions))


def without_doubles(definitions: Iterable[nodes.Definition], faults: Faults) -> list[nodes.Definition]:
    """The definitions, a fault for each name that comes again."""
    first: dict[str, nodes.Definition] = {}
    for definition in definitions:
        name = definition.name
        earlier = first.setdefault(name.name, definition)
        if earlier is not definition:
            message = f"`{name.name}` is defined twice; first in {_line(earlier.name, name)}"
            faults.add(name.span, message, "keep one of them, or give this one another name")
    return list(first.values())


def _line(earlier: nodes.Ident, later: nodes.Ident) -> str:
    where = f"line {earlier.span.line}"
    return where if earlier.span.source is later.span.source else f"{earlier.span.source.name}, {where}"


def single(entries: Sequence[Entry], words: str, faults: Faults) -> Entry | None:
    """The only entry of its kind in a block, a fault for each further one."""
    for extra in entries[1:]:
        if isinstance(extra, nodes.Node):
            faults.add(extra.span, f"a block has one `{words}`", "keep one of them")
    return entries[0] if entries else None


def gas_block(
    node: nodes.Gas,
    around: Scope,
    dispersions: Mapping[str, Signature],
    settings: Settings,
    faults: Faults,
) -> Gas:
    """Sorts the entries of a gas; faults are noted for doubles, unknown dispersions and unknown isotopes."""
    definitions = settings.applied(without_doubles(_of(node, nodes.Definition), faults), node.name.name)
    choice = single(_of(node, nodes.DispersionChoice), "dispersion", faults)
    has_energy = any(definition.name.name == "E" for definition in definitions)
    signature = None if has_energy else _signature(choice, dispersions, faults)
    parameter_scope = Scope(f"the dispersion of {node.name.name}", around)
    scope = Scope(f"gas {node.name.name}", parameter_scope, is_block=True).define(definitions)
    if has_energy and choice is not None:
        message = "a gas has a dispersion by name or a formula E(p), not both"
        faults.add(choice.span, message, "keep one of them")
    _add_mass(single(_of(node, nodes.Isotope), "isotope", faults), scope, settings, faults)
    _add_parameters(choice, signature, parameter_scope, scope, settings, faults)
    return Gas(
        node,
        scope,
        parameter_scope.names,
        signature,
        single([entry.kind for entry in _of(node, nodes.Statistics)], "statistics", faults),
        single([entry.kind for entry in _of(node, nodes.Treatment)], "treatment", faults),
        choice,
    )


def _of(node: nodes.Gas | nodes.States, kind: type[Entry]) -> list[Entry]:
    return [entry for entry in node.entries if isinstance(entry, kind)]


def _signature(
    choice: nodes.DispersionChoice | None, dispersions: Mapping[str, Signature], faults: Faults
) -> Signature | None:
    if choice is None:
        return dispersions.get("free")
    name = choice.name
    try:
        return dispersions[name.name]
    except KeyError:
        hint = listed(name.name, dispersions, what="installed")
        faults.add(name.span, f"there is no dispersion `{name.name}`", hint)
    except PluginError as refused:
        faults.add(name.span, str(refused), "mend or uninstall the package it comes from")
    return None


def _add_mass(isotope: nodes.Isotope | None, scope: Scope, settings: Settings, faults: Faults) -> None:
    if isotope is None:
        return
    mass = isotope_mass(isotope, faults)
    written = scope.names.get("m")
    if written is None:
        setting = settings.taken("m")
        given = Kind(dimension("kg"), mass) if mass else UNKNOWN
        scope.names["m"] = Named("m", setting, scope) if setting else Named("m", given=given)
    elif written.definition is not None and written.definition.span.source is isotope.span.source:
        faults.add(
            written.definition.span, "the mass comes twice, from `isotope` and from `m`", "keep one of them"
        )


def _add_parameters(
    choice: nodes.DispersionChoice | None,
    signature: Signature | None,
    parameters: Scope,
    gas: Scope,
    settings: Settings,
    faults: Faults,
) -> None:
    """The parameters as given, each blind to its own name (`omega_z = omega_z` asks the gas), then the defaults."""
    known = {parameter.name: parameter for parameter in signature.parameters} if signature else {}
    given = without_doubles(choice.parameters, faults) if choice else []
    for definition in settings.applied(given, gas.title.removeprefix("gas ")):
        name = definition.name.name
        if signature is not None and name not in known:
            message = f"the dispersion `{signature.name}` has no parameter `{name}`"
            faults.add(definition.name.span, message, listed(name, known, what="its parameters"))
            continue
        parameters.names[name] = Named(name, definition, Scope(gas.title, gas, is_block=True))
    for own in parameters.names.values():
        if own.home is not None:
            own.home.names.update(
                {name: other for name, other in parameters.names.items() if other is not own}
            )
    for parameter in known.values():
        if parameter.name not in parameters.names and parameter.default is not None:
            default = Kind(dimension(parameter.unit), parameter.default)
            parameters.names[parameter.name] = Named(parameter.name, given=default)


def place_block(node: nodes.Trap | nodes.States, settings: Settings, faults: Faults) -> Place:
    """Sorts the entries of a trap or states block; faults are noted for doubles."""
    written = [entry for entry in node.entries if isinstance(entry, nodes.Definition)]
    definitions = settings.applied(without_doubles(written, faults), node.name.name)
    anchor = single(_of(node, nodes.Anchor), "anchor", faults) if isinstance(node, nodes.States) else None
    words = [entry.kind for entry in node.entries if isinstance(entry, nodes.Levels)]
    return Place(node, tuple(definitions), anchor, single(words, "levels", faults))
