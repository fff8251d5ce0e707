"""Names that nothing uses and that look like a word of the block: `E_mx` would otherwise cut nothing, silently."""

from __future__ import annotations

from difflib import SequenceMatcher
from typing import TYPE_CHECKING, Final

from eoscore.language import nodes

if TYPE_CHECKING:
    from collections.abc import Iterable

    from eoscore.language.checker import Checker
    from eoscore.language.world import World

__all__ = ["check_strays"]

_WORDS: Final[dict[type, tuple[str, ...]]] = {
    nodes.Gas: ("degeneracy", "a_s", "m", "E"),
    nodes.Trap: ("volume", "E_max", "V"),
    nodes.States: ("exponent", "rho"),
}
_LIKE = 0.74


def check_strays(world: World, checker: Checker) -> None:
    """Faults for unused names of a block that are nearly one of its words."""
    asked = {name.name for question in world.questions for name in _names_of(question)}
    blocks: list[nodes.Gas | nodes.Trap | nodes.States] = [gas.node for gas in world.gases.values()]
    blocks += [place.node for place in world.places.values() if place.node is not None]
    for block in blocks:
        definitions = [entry for entry in block.entries if isinstance(entry, nodes.Definition)]
        present = {definition.name.name for definition in definitions}
        for definition in definitions:
            name = definition.name.name
            if id(definition) in checker.used or name in asked or name in _WORDS[type(block)]:
                continue
            meant = next(
                (word for word in _WORDS[type(block)] if word not in present and _like(name, word)), None
            )
            if meant is not None:
                message = f"`{name}` is used nowhere, and a {_kind(block)} has no such word"
                checker.faults.add(definition.name.span, message, f"did you mean `{meant}`?")


def _names_of(question: nodes.Find | nodes.Derive) -> Iterable[nodes.Ident]:
    yield from question.quantities
    yield from (condition.name for condition in question.conditions)
    yield from (axis.name for axis in question.over) if isinstance(question, nodes.Find) else ()


def _like(name: str, word: str) -> bool:
    if name.lower() == word.lower():
        return True
    return min(len(name), len(word)) >= 4 and SequenceMatcher(None, name, word).ratio() >= _LIKE


def _kind(block: nodes.Gas | nodes.Trap | nodes.States) -> str:
    return type(block).__name__.lower()
