"""The faults of a text, collected in one pass; and the known names, nearest first, where one is missed."""

from __future__ import annotations

from dataclasses import dataclass
from difflib import SequenceMatcher
from typing import TYPE_CHECKING

from eoscore.errors import Complaint, TarnError

if TYPE_CHECKING:
    from collections.abc import Iterable

    from eoscore.source import Span

__all__ = ["Fault", "Faults", "listed", "nearest"]

_LISTED = 8
_NEAR = 0.6
_COMPARED = 200  # names compared letter by letter; beyond that only those with the same first letter


@dataclass(frozen=True)
class Fault:
    """What is wrong at a place; `is_value` where it is a value that is no number, not the text itself.

    Where a call does not fit the body of its function, `origin` is the place in the body and `reason` what is wrong
    there, however deep the calls are nested.
    """

    span: Span
    message: str
    hint: str | None = None
    origin: Span | None = None
    reason: str | None = None
    is_value: bool = False


class Faults:
    """Collects faults; the same words at the same place count once."""

    def __init__(self) -> None:
        self._found: dict[tuple[str, int, int, str], Fault] = {}

    def __bool__(self) -> bool:
        return bool(self._found)

    def __len__(self) -> int:
        return len(self._found)

    def add(self, span: Span, message: str, hint: str | None = None) -> None:
        """Notes a fault at a place."""
        self.append(Fault(span, message, hint))

    def append(self, fault: Fault) -> None:
        """Notes a fault that is already put into words."""
        place = fault.span
        self._found.setdefault((place.source.name, place.start, place.end, fault.message), fault)

    def complaints(self) -> list[Complaint]:
        """All that was found, file by file in the order of the text."""
        files = {key[0]: None for key in self._found}
        order = {name: index for index, name in enumerate(files)}
        found = sorted(self._found.items(), key=lambda item: (order[item[0][0]], item[0][1], item[0][2]))
        return [Complaint.at(fault.span, fault.message, fault.hint) for _, fault in found]

    def raise_if_any(self) -> None:
        """Raises TarnError with everything that was found, if anything was."""
        if self:
            raise TarnError(self.complaints())


def nearest(name: str, known: Iterable[str]) -> list[str]:
    """The known names, those most like `name` first."""
    candidates = sorted(set(known))
    if len(candidates) > _COMPARED:
        alike = [other for other in candidates if other[:1].lower() == name[:1].lower()]
        candidates = (alike or candidates)[:_COMPARED]
    likeness = {other: _likeness(name, other) for other in candidates}
    return sorted(candidates, key=lambda other: -likeness[other])


def _likeness(name: str, other: str) -> float:
    """From 0 to 1, and 2 for a name that differs in case only; of unlike names only an estimate, which is quick."""
    if name.lower() == other.lower():
        return 2.0
    matcher = SequenceMatcher(None, name[:40], other[:40], autojunk=False)
    begun = 0.2 if name.startswith(other) or other.startswith(name) else 0.0
    bound = matcher.quick_ratio()
    return matcher.ratio() if bound >= _NEAR else 0.5 * bound + begun


def listed(name: str, known: Iterable[str], *, what: str = "known here") -> str:
    """A hint that lists the known names, nearest first, and asks whether the first was meant if it is near."""
    ranked = nearest(name, known)
    if not ranked:
        return f"nothing is {what}"
    shown = ", ".join(ranked[:_LISTED]) + (", ..." if len(ranked) > _LISTED else "")
    words = f"{what}: {shown}"
    return f"did you mean `{ranked[0]}`? {words}" if _likeness(name, ranked[0]) >= _NEAR else words
