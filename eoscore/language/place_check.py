"""What a trap or a states block must be to make sense, in the scope of the gas it is asked with."""

from __future__ import annotations

from typing import TYPE_CHECKING, Final

from eoscore.language import nodes
from eoscore.language.demand import must_be, must_be_positive
from eoscore.language.faults import listed
from eoscore.language.kind import Kind, Wild, dimension

if TYPE_CHECKING:
    from eoscore.language.block import Pair, Place
    from eoscore.language.checker import Checker
    from eoscore.language.scope import Named

__all__ = ["COORDINATES", "check_place", "dimension_of"]

# The coordinates a potential may have, and the dimension each choice stands for.
COORDINATES: Final = {("x",): 1, ("x", "y"): 2, ("rho",): 2, ("x", "y", "z"): 3, ("rho", "z"): 3, ("r",): 3}
LEVELS: Final = ("exact",)
VOLUMES: Final = ("m3", "m2", "m")


def check_place(pair: Pair, checker: Checker) -> None:
    """Notes every fault of a place that is asked with a gas."""
    place = pair.place
    if place is None or place.node is None:
        return
    is_trap = isinstance(place.node, nodes.Trap)
    for named in list(pair.scope.names.values()):
        _entry(named, checker, is_trap=is_trap)
    if is_trap:
        _trap(place, checker)
    else:
        _states(pair, place, checker)


def _entry(named: Named, checker: Checker, *, is_trap: bool) -> None:
    definition, faults = named.definition, checker.faults
    if definition is None:
        return
    name, span = named.name, definition.value.span
    if name == "m":
        faults.add(
            definition.name.span, "`m` in a place is the mass of the gas asked for", "give this another name"
        )
    if name == ("V" if is_trap else "rho"):
        (_potential if is_trap else _density)(named, checker)
    elif named.is_function:
        checker.body(named)
    else:
        kind = checker.named(named)
        demanded = _DEMANDS.get((name, is_trap))
        if demanded is not None:
            units, words = demanded
            if must_be(kind, units, span, words, faults):
                must_be_positive(kind, span, words, faults)


_DEMANDS: Final[dict[tuple[str, bool], tuple[tuple[str, ...], str]]] = {
    ("volume", True): (VOLUMES, "the volume"),
    ("E_max", True): (("J",), "`E_max`"),
    ("exponent", False): (("1",), "the exponent"),
}


def _potential(named: Named, checker: Checker) -> None:
    definition = named.definition
    if definition is None:
        return
    names = tuple(parameter.name for parameter in definition.parameters or ())
    if names not in COORDINATES:
        came = f"V({', '.join(names)})" if definition.parameters is not None else "V without coordinates"
        wanted = ", ".join(f"V({', '.join(coordinates)})" for coordinates in COORDINATES)
        checker.faults.add(definition.name.span, f"`{came}` is no potential", f"write one of {wanted}")
        checker.body(named)
        return
    kind = checker.function(named, [Kind(dimension("m"))] * len(names))
    must_be(kind, ("J",), definition.value.span, "V", checker.faults)


def _density(named: Named, checker: Checker) -> None:
    definition = named.definition
    if definition is None:
        return
    names = [parameter.name for parameter in definition.parameters or ()]
    if names != ["E"]:
        checker.faults.add(
            definition.name.span, "the density of states is a function of E", "write rho(E) = ..."
        )
        checker.body(named)
        return
    checker.without_walls(definition)
    kind = checker.function(named, [Kind(dimension("J"))])
    must_be(kind, ("J-1",), definition.value.span, "rho(E)", checker.faults)


def _trap(place: Place, checker: Checker) -> None:
    if place.node is None:
        return
    if place.levels is not None and place.levels.name not in LEVELS:
        hint = listed(place.levels.name, LEVELS, what="the words after `levels`")
        checker.faults.add(place.levels.span, f"`{place.levels.name}` is no way to count levels", hint)
    both = place.has("V") and place.has("volume")
    if both or not (place.has("V") or place.has("volume")):
        names = [definition.name.name for definition in place.definitions]
        near = [name for name in names if name.lower() in ("v", "u", "volumen", "vol", "potential")]
        hint = (
            f"is `{near[0]}` meant to be V or volume?"
            if near
            else "write V(x, y, z) = ..., or volume = 1 mm3"
        )
        message = "has both V and volume" if both else "has neither V nor volume"
        checker.faults.add(place.node.name.span, f"trap `{place.name}` {message}", hint)


def _states(pair: Pair, place: Place, checker: Checker) -> None:
    node, faults = place.node, checker.faults
    if node is None:
        return
    anchored = place.anchor is not None
    if place.has("rho") and (place.has("exponent") or anchored):
        faults.add(
            node.name.span, f"states `{place.name}` has both rho(E) and an exponent", "keep one of them"
        )
    elif not place.has("rho") and not (place.has("exponent") and anchored):
        message = f"states `{place.name}` has neither rho(E) nor an exponent with its anchor"
        hint = "write rho(E) = ..., or exponent = 1.65 and anchor N_c = 3e5 at T = 90 nK"
        faults.add(node.name.span, message, hint)
    if place.has("E_max"):
        faults.add(node.name.span, "`E_max` belongs to a trap, not to a states block", "take it out")
    if place.anchor is not None:
        for part, unit, words in ((place.anchor.number, "1", "N_c"), (place.anchor.temperature, "K", "T")):
            kind = checker.kind(part, pair.scope)
            if must_be(kind, (unit,), part.span, f"`{words}` of the anchor", faults):
                must_be_positive(kind, part.span, f"`{words}` of the anchor", faults)


def dimension_of(pair: Pair, checker: Checker) -> int | None:
    """The dimension of the space a place holds the gas in; None for states, `uniform`, and where it is at fault."""
    for name, named in pair.scope.names.items() if pair.place is not None else ():
        definition = named.definition
        if definition is not None and name == "V":
            return COORDINATES.get(tuple(parameter.name for parameter in definition.parameters or ()))
        if definition is not None and name == "volume":
            dim = checker.named(named).dimension
            sizes = {dimension(unit): 3 - index for index, unit in enumerate(VOLUMES)}
            return None if isinstance(dim, Wild) else sizes.get(dim)
    return None
