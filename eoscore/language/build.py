"""Grammar to nodes: questions, and the whole file."""

from __future__ import annotations

from typing import TYPE_CHECKING, Literal

from eoscore.language import nodes
from eoscore.language.build_declaration import BuildDeclaration, Part
from eoscore.source import Span

if TYPE_CHECKING:
    from eoscore.language.build_expression import Found

_ORDER = ("in", "from", "with", "over")
_RANGES: dict[str, Literal["even", "geometric"]] = {"even": "even", "geometric": "geometric"}
_SPANS = "write `even(a, b, points)`, `geometric(a, b, points)` or `[a, b, ...]`"


class Build(BuildDeclaration):
    """Builds the nodes of a whole text."""

    def file(self, found: Found) -> nodes.File:
        """All entries; the place is that of the whole text."""
        return nodes.File(tuple(found), span=Span(self.source, 0, len(self.source.text)))

    def wanted(self, found: Found) -> Part:
        """The quantities asked for."""
        return Part("wanted", tuple(map(self.ident, found[::2])), self.span(found))

    def find(self, found: Found) -> nodes.Find:
        """`find QUANTITIES for GAS [in PLACE] [from PLACE]* [with ...] [over ...]`."""
        parts = self._in_order(found[4:], "find")
        return nodes.Find(
            found[1].items,
            self.ident(found[3]),
            _only(parts["in"]),
            tuple(item for part in parts["from"] for item in part.items),
            tuple(item for part in parts["with"] for item in part.items),
            tuple(item for part in parts["over"] for item in part.items),
            span=self.span(found),
        )

    def derive(self, found: Found) -> nodes.Derive:
        """`derive QUANTITIES for GAS [in PLACE] [with ...]`."""
        parts = self._in_order(found[4:], "derive")
        for part in (*parts["from"], *parts["over"]):
            message = f"`{part.kind}` came in a `derive` question, which knows `in` and `with` only"
            self.faults.add(part.span, message, "leave it out, or ask with `find`")
        conditions = tuple(item for part in parts["with"] for item in part.items)
        gas = self.ident(found[3])
        return nodes.Derive(found[1].items, gas, _only(parts["in"]), conditions, span=self.span(found))

    def _in_order(self, parts: list[Part], verb: str) -> dict[str, list[Part]]:
        sorted_parts: dict[str, list[Part]] = {kind: [] for kind in _ORDER}
        latest = 0
        for part in parts:
            rank = _ORDER.index(part.kind)
            if sorted_parts[part.kind] and part.kind != "from":
                message = f"a second `{part.kind}` came in one question"
                self.faults.add(part.span, message, "join both, with a comma between, or ask two questions")
            elif rank < latest:
                message = f"`{part.kind}` came after `{_ORDER[latest]}`"
                hint = (
                    f"the order is `{verb} ... for GAS in PLACE{' from PLACE' * (verb == 'find')} with ...`"
                )
                self.faults.add(part.span, message, hint + (" over ..." if verb == "find" else ""))
            latest = max(latest, rank)
            sorted_parts[part.kind].append(part)
        return sorted_parts

    def at_place(self, found: Found) -> Part:
        """`in PLACE`."""
        return Part("in", (self.ident(found[1]),), self.span(found))

    def from_place(self, found: Found) -> Part:
        """`from PLACE`."""
        return Part("from", (self.ident(found[1]),), self.span(found))

    def conditions(self, found: Found) -> Part:
        """`with NAME = a, ...`."""
        return Part("with", tuple(found[1::2]), self.span(found))

    def grid(self, found: Found) -> Part:
        """`over NAME = SPAN, ...`."""
        return Part("over", tuple(found[1::2]), self.span(found))

    def axis(self, found: Found) -> nodes.Axis:
        """`NAME = SPAN`."""
        return nodes.Axis(self.ident(found[0]), found[2], span=self.span(found))

    def range(self, found: Found) -> nodes.Range | nodes.Listing:
        """`even(a, b, points)`, `geometric(a, b, points)`."""
        word, values = str(found[0]), [self.bounded(value) for value in found[2:-1:2]]
        if word not in _RANGES:
            self.faults.add(
                self.span(found[:1]), f"`{word}` came where a span of values was expected", _SPANS
            )
        elif len(values) != 3:
            message = f"`{word}` takes 3 values (start, stop, number of points), {len(values)} came"
            self.faults.add(self.span(found), message, f"write `{word}(a, b, points)`")
        else:
            return nodes.Range(_RANGES[word], values[0], values[1], values[2], span=self.span(found))
        return nodes.Listing((), span=self.span(found))

    def listing(self, found: Found) -> nodes.Listing:
        """`[a, b, ...]`."""
        if len(found) == 2:
            self.faults.add(self.span(found), "`[]` came; a grid needs at least one value", _SPANS)
        return nodes.Listing(tuple(map(self.bounded, found[1:-1:2])), span=self.span(found))


def _only(parts: list[Part]) -> nodes.Ident | None:
    return parts[0].items[0] if parts else None
