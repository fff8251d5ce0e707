"""The dispersions that are installed: found by their entry points, checked at the door before anyone uses them.

A package offers one under the group `eoscore.dispersions`, as NAME = "module:Class"; the ones that ship with
eoscore do the same. Listing names imports none of them; asking for one imports that one alone.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from difflib import get_close_matches
from functools import cache
from importlib.metadata import EntryPoint, entry_points
from typing import TYPE_CHECKING

from eoscore.errors import PluginError
from eoscore.gas.door import admitted

if TYPE_CHECKING:
    from eoscore.gas.dispersion import Dispersion
    from eoscore.language.signature import Signature

__all__ = ["GROUP", "Installed", "Signatures", "dispersion", "dispersion_names", "installed"]

GROUP = "eoscore.dispersions"


@dataclass(frozen=True)
class Installed:
    """One plugin as it is listed: what it is, or why it is refused (`refusal` in words, `kind` None)."""

    name: str
    package: str
    kind: type[Dispersion] | None
    refusal: str | None


@cache
def _found() -> dict[str, tuple[EntryPoint, ...]]:
    """The entry points under each name; more than one is a clash."""
    found: dict[str, list[EntryPoint]] = {}
    for point in entry_points(group=GROUP):
        found.setdefault(point.name, []).append(point)
    return {name: tuple(points) for name, points in sorted(found.items())}


def dispersion_names() -> tuple[str, ...]:
    """The names of all installed dispersions, sorted; nothing is imported for it."""
    return tuple(_found())


@cache
def dispersion(name: str) -> type[Dispersion]:
    """The dispersion of a name, checked; PluginError where it is refused or not there."""
    points = _found().get(name, ())
    if not points:
        near = get_close_matches(name, _found(), 1)
        known = f"one of {', '.join(_found())}" + (f"; did you mean {near[0]}?" if near else "")
        raise PluginError(name, "no installed dispersion of this name", known)
    if len(points) > 1:
        owners = " and ".join(sorted(_package(point) for point in points))
        wanted = "one package per name: uninstall or rename one of them"
        raise PluginError(name, f"{len(points)} dispersions of this name, from {owners}", wanted)
    return admitted(name, _loaded(points[0]))


def _loaded(point: EntryPoint) -> object:
    try:
        return point.load()
    except Exception as fault:
        found = f"{point.value!r} of package {_package(point)}, which fails to import: {type(fault).__name__}: {fault}"
        raise PluginError(point.name, found, "a module that imports and holds the class") from fault


def _package(point: EntryPoint) -> str:
    return point.dist.name if point.dist is not None else point.module


def installed() -> tuple[Installed, ...]:
    """Every plugin, loaded and checked; the refused ones with their refusal."""
    return tuple(_entry(name, points) for name, points in _found().items())


def _entry(name: str, points: tuple[EntryPoint, ...]) -> Installed:
    package = ", ".join(sorted(_package(point) for point in points))
    try:
        return Installed(name, package, dispersion(name), None)
    except PluginError as refused:
        return Installed(name, package, None, str(refused))


class Signatures(Mapping[str, "Signature"]):
    """What the language must know of every installed dispersion; a plugin is imported when it is looked up.

    A refused plugin raises its PluginError when looked up, and a name that is not installed is a KeyError.
    """

    def __getitem__(self, name: str) -> Signature:
        if name not in _found():
            raise KeyError(name)
        return dispersion(name).signature()

    def __iter__(self) -> Iterator[str]:
        return iter(dispersion_names())

    def __len__(self) -> int:
        return len(_found())

    def __contains__(self, name: object) -> bool:
        return name in _found()
