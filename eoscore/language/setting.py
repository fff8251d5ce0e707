"""Values set from outside the file (`--set "P=2 W"`): read as Tarn, put in place of what the file defines."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import TYPE_CHECKING, NamedTuple

from eoscore.errors import Complaint, TarnError
from eoscore.language import nodes
from eoscore.language.faults import listed
from eoscore.language.kind import alike, told
from eoscore.language.parse import parse
from eoscore.language.quantities import CONDITIONS
from eoscore.source import Source, Span

if TYPE_CHECKING:
    from collections.abc import Iterable, Mapping, Sequence

    from eoscore.language.checker import Checker
    from eoscore.language.scope import Scope

__all__ = ["Settings", "settings_of"]


class _Replaced(NamedTuple):
    setting: nodes.Definition
    original: nodes.Definition
    block: str


@dataclass
class Settings:
    """The definitions given from outside by name, and what each of them took the place of."""

    definitions: dict[str, nodes.Definition] = field(default_factory=dict)
    replaced: list[_Replaced] = field(default_factory=list)
    hit: set[str] = field(default_factory=set)

    def applied(self, definitions: Iterable[nodes.Definition], block: str) -> list[nodes.Definition]:
        """The definitions of a block (or of the file, named "") with those replaced that are set from outside."""
        return [self._one(definition, block) for definition in definitions]

    def taken(self, name: str) -> nodes.Definition | None:
        """What is set for a name from outside, if anything; it counts as used."""
        setting = self.definitions.get(name)
        if setting is not None:
            self.hit.add(name)
        return setting

    def _one(self, definition: nodes.Definition, block: str) -> nodes.Definition:
        setting = None if definition.parameters is not None else self.taken(definition.name.name)
        if setting is None:
            return definition
        self.replaced.append(_Replaced(setting, definition, block))
        return setting

    def check(self, checker: Checker, scopes: Mapping[str, Scope], known: Iterable[str]) -> None:
        """Faults for settings that fit nothing, or have another dimension than what they replace."""
        names = [*known, *CONDITIONS]
        for name, setting in self.definitions.items():
            if name not in self.hit:
                message = f"nothing in the file is called `{name}`"
                checker.faults.add(setting.name.span, message, listed(name, names, what="can be set"))
        for setting, original, block in self.replaced:
            if block not in scopes:
                continue
            was = checker.kind(original.value, scopes[block]).dimension
            now = checker.kind(setting.value, scopes[block]).dimension
            if not alike(was, now):
                message = f"`{setting.name.name}` is {told(was)} in the file, but is set to {told(now)}"
                checker.faults.add(setting.value.span, message, "give the value a unit of the same dimension")


def settings_of(texts: Sequence[str]) -> tuple[Settings, list[Complaint]]:
    """Reads `NAME=VALUE` texts; what cannot be read comes back as complaints."""
    settings = Settings()
    broken: list[Complaint] = []
    for text in texts:
        name = f"--set {text.splitlines()[0] if text else text!r}"
        try:
            entries = parse(text, name).entries
        except TarnError as error:
            broken.extend(error.complaints)
            continue
        one = entries[0] if len(entries) == 1 else None
        if isinstance(one, nodes.Definition) and one.parameters is None and not one.where:
            settings.definitions[one.name.name] = one
        else:
            place = Span(Source(name, text), 0, len(text))
            broken.append(Complaint.at(place, f"`{text}` sets no value", "write NAME=VALUE, such as `P=2 W`"))
    return settings, broken
