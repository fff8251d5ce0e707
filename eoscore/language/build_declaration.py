"""Grammar to nodes: definitions and blocks."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

from eoscore.language import nodes
from eoscore.language.build_expression import BuildExpression, Found
from eoscore.language.reserved import LINE_WORDS

if TYPE_CHECKING:
    from lark import Token

    from eoscore.source import Span

_BLOCKS: dict[str, type[nodes.Gas | nodes.Trap | nodes.States]] = {
    "gas": nodes.Gas,
    "trap": nodes.Trap,
    "states": nodes.States,
}
_LINES: dict[type[nodes.Node], str] = {
    nodes.Isotope: "isotope",
    nodes.Statistics: "statistics",
    nodes.Treatment: "treatment",
    nodes.DispersionChoice: "dispersion",
    nodes.Levels: "levels",
    nodes.Anchor: "anchor",
}


@dataclass(frozen=True)
class Part:
    """What a rule within a declaration or a question found: its nodes and its place."""

    kind: str
    items: tuple[Any, ...]
    span: Span


class BuildDeclaration(BuildExpression):
    """Builds what a text declares."""

    def definition(self, found: Found) -> nodes.Definition:
        """`NAME = a`, `NAME(x) = a where ...`."""
        name, parameters, _, value, where = found
        if where and not parameters:
            message = f"`where` came after `{name} = ...`; it bounds the arguments of `NAME(arguments) = ...`"
            self.faults.add(where.span, message, "leave it out, or choose by `if(condition, a, b)`")
        return nodes.Definition(
            self.ident(name),
            parameters and parameters.items,
            self.bounded(value),
            where.items if where else (),
            span=self.span(found),
        )

    def parameters(self, found: Found) -> Part:
        """`(x, y)`; empty brackets are a fault."""
        if len(found) == 2:
            message = "`()` came after a name that is defined; a function has arguments"
            self.faults.add(self.span(found), message, "name them, or leave `()` out")
        return Part("parameters", tuple(map(self.ident, found[1:-1:2])), self.span(found))

    def where(self, found: Found) -> Part:
        """`where a < b, c < d`."""
        return Part("where", tuple(map(self.bounded, found[1::2])), self.span(found))

    def assignment(self, found: Found) -> nodes.Definition:
        """`NAME = a` where only values are given."""
        return nodes.Definition(self.ident(found[0]), None, self.bounded(found[2]), span=self.span(found))

    def block(self, found: Found) -> nodes.Gas | nodes.Trap | nodes.States:
        """`gas NAME { ... }` and its like; lines that belong into another kind of block are faults."""
        kind, name, lines = str(found[0]), self.ident(found[1]), found[3:-1]
        entries = tuple(line for line in lines if self._belongs(line, kind))
        return _BLOCKS[kind](name, entries, span=self.span(found))

    def _belongs(self, line: nodes.Node, kind: str) -> bool:
        if isinstance(line, nodes.Definition):
            return True
        word = _LINES[type(line)]
        home = LINE_WORDS[word]
        if home != kind:
            message = f"`{word}` came in a `{kind}` block; it belongs into `{home} NAME {{ ... }}`"
            self.faults.add(line.span, message, f"move this line into the {home} block")
        return home == kind

    def isotope(self, found: Found) -> nodes.Isotope:
        """`isotope Sr-84`."""
        symbol, _, mass_number = found[1].partition("-")
        return nodes.Isotope(symbol, int(mass_number), span=self.span(found))

    def statistics(self, found: Found) -> nodes.Statistics:
        """`statistics fermi`."""
        return nodes.Statistics(self.ident(found[1]), span=self.span(found))

    def treatment(self, found: Found) -> nodes.Treatment:
        """`treatment hartree_fock`."""
        return nodes.Treatment(self.ident(found[1]), span=self.span(found))

    def dispersion(self, found: Found) -> nodes.DispersionChoice:
        """`dispersion NAME`, `dispersion NAME { parameter = a }`."""
        settings = found[2].items if found[2] else ()
        return nodes.DispersionChoice(self.ident(found[1]), settings, span=self.span(found))

    def settings(self, found: Found) -> Part:
        """`{ parameter = a ... }`."""
        return Part("settings", tuple(found[1:-1]), self.span(found))

    def levels(self, found: Found) -> nodes.Levels:
        """`levels exact`."""
        return nodes.Levels(self.ident(found[1]), span=self.span(found))

    def anchor(self, found: Found) -> nodes.Anchor:
        """`anchor N_c = a at T = b`."""
        for given, wanted in ((found[1], "N_c"), (found[3], "T")):
            if given.name.name != wanted:
                message = f"`{given.name.name}` came in an anchor where `{wanted}` was expected"
                self.faults.add(given.name.span, message, "write `anchor N_c = number at T = temperature`")
        return nodes.Anchor(found[1].value, found[3].value, span=self.span(found))

    def use(self, found: Found) -> nodes.Use:
        """`use "path.tarn"`, `use NAME`."""
        target: Token = found[1]
        is_path = target.type == "PATH"
        return nodes.Use(target[1:-1] if is_path else self.letters(target), is_path, span=self.span(found))
