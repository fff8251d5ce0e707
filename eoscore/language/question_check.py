"""Checks of a whole question: who is asked, where, for what, and on which grid."""

from __future__ import annotations

from typing import TYPE_CHECKING

from eoscore.language import nodes
from eoscore.language.ask_check import check_ask
from eoscore.language.block import UNIFORM, Gas, Place
from eoscore.language.condition_check import check_axis, check_condition, check_grid
from eoscore.language.faults import listed
from eoscore.language.question import Question
from eoscore.language.role import Roles

if TYPE_CHECKING:
    from eoscore.language.checker import Checker
    from eoscore.language.question import Axis, Given
    from eoscore.language.world import World

__all__ = ["check_question"]


def check_question(node: nodes.Find | nodes.Derive, world: World, checker: Checker) -> Question | None:
    """The question with everything resolved; None where nobody knows who is asked."""
    gas, place = _gas(node.gas, world, checker), _place(node.place, world, checker)
    is_find = isinstance(node, nodes.Find)
    origin_nodes = node.origins if isinstance(node, nodes.Find) else ()
    origins = [_place(origin, world, checker) for origin in origin_nodes]
    if gas is None or (node.place is not None and place is None) or None in origins:
        return None
    pairs = [world.pair(gas, place), *(world.pair(gas, origin) for origin in origins)]
    roles = Roles.of_question(node, pairs)
    given = _conditions(node, roles, world, checker)
    axes = _axes(node, given, roles, checker)
    question = Question(
        node,
        "find" if is_find else "derive",
        gas.name,
        place.name if place else None,
        tuple(origin.name for origin in origin_nodes),
        node.quantities,
        {name: each for name, each in given.items() if each.thermodynamic},
        {name: each for name, each in given.items() if not each.thermodynamic},
        tuple(axes),
        None,
        roles.coordinates,
    )
    return check_ask(question, pairs, roles, checker)


def _gas(name: nodes.Ident, world: World, checker: Checker) -> Gas | None:
    gas = world.gases.get(name.name)
    if gas is None:
        is_place = name.name in world.places
        words = f"`{name.name}` is a place, not a gas" if is_place else f"there is no gas `{name.name}`"
        checker.faults.add(name.span, words, listed(name.name, world.gases, what="gases of this file"))
    return gas


def _place(name: nodes.Ident | None, world: World, checker: Checker) -> Place | None:
    if name is None or name.name == UNIFORM.name:
        return UNIFORM if name else None
    place = world.places.get(name.name)
    if place is None:
        is_gas = name.name in world.gases
        words = f"`{name.name}` is a gas, not a place" if is_gas else f"there is no place `{name.name}`"
        hint = listed(name.name, [*world.places, UNIFORM.name], what="places of this file")
        checker.faults.add(name.span, words, hint)
    return place


def _conditions(
    node: nodes.Find | nodes.Derive, roles: Roles, world: World, checker: Checker
) -> dict[str, Given]:
    found: dict[str, Given] = {}
    seen: set[str] = set()
    for written in node.conditions:
        condition = world.settings.taken(written.name.name) or written
        if written.name.name in seen:
            checker.faults.add(written.name.span, f"`{written.name.name}` is given twice", "keep one of them")
            continue
        seen.add(written.name.name)
        given = check_condition(condition, roles, checker)
        if given is not None:
            found[given.name] = given
    return found


def _axes(
    node: nodes.Find | nodes.Derive, given: dict[str, Given], roles: Roles, checker: Checker
) -> list[Axis]:
    axes: list[Axis] = []
    for written in node.over if isinstance(node, nodes.Find) else ():
        if written.name.name in given or any(axis.name == written.name.name for axis in axes):
            checker.faults.add(written.name.span, f"`{written.name.name}` is given twice", "keep one of them")
            continue
        axis = check_axis(written, roles, checker)
        if axis is not None:
            axes.append(axis)
    if axes:
        check_grid(axes, checker)
    return axes
