"""Grammar to nodes: expressions and conditions, one method per rule of `grammar/tarn.lark`.

A method takes all that its rule matched, signs included, so the place of a node runs from the first to the last.
"""

from __future__ import annotations

import re
import unicodedata
from dataclasses import replace
from typing import Any, TypeAlias

from lark import Token

from eoscore.language import nodes
from eoscore.language.faults import Faults
from eoscore.language.limits import DEPTH, FAULTS, too_deep
from eoscore.language.literal import read_number
from eoscore.source import Source, Span

Found: TypeAlias = list[Any]  # tokens, nodes and None for what was left out, in the order of the rule
_LETTERS = re.compile(r"[0-9A-Za-z_À-ÖØ-öø-ɏͰ-ͳͶͷͻ-ͽΆΈ-Ͽἀ-῾]+")


class BuildExpression:
    """Builds expressions; what is wrong with them goes to `faults`."""

    source: Source
    faults: Faults

    def begin(self, source: Source) -> Faults:
        """Starts on a new text, with a new collection of faults."""
        self.source, self.faults = source, Faults()
        return self.faults

    def enough(self) -> None:
        """Raises TarnError with what was found, where that is as much as is told of one text."""
        if len(self.faults) >= FAULTS:
            self.faults.raise_if_any()

    def span(self, found: Found) -> Span:
        """From the first to the last of what a rule matched."""
        first = found[0]
        last = (
            found[-1] if found[-1] is not None else next(part for part in reversed(found) if part is not None)
        )
        start: int = (first.start_pos or 0) if isinstance(first, Token) else first.span.start
        end: int = (last.end_pos or 0) if isinstance(last, Token) else last.span.end
        return Span(self.source, start, end)

    def letters(self, token: Token) -> str:
        """A name in its normal form, so that the two `µ` of Unicode are one; other alphabets are faults."""
        if token.isascii():
            return str(token)
        self.enough()
        name = unicodedata.normalize("NFKC", token)
        strange = next(
            (char for char in token if not _LETTERS.fullmatch(unicodedata.normalize("NFKC", char))), None
        )
        raised = next((char for char in token if char.isdigit() and not char.isascii()), None)
        if raised:
            mend = (
                f"write `{token[: token.index(raised)]}^{unicodedata.normalize('NFKC', raised)}` for a power"
            )
            self.faults.add(self.span([token]), f"`{raised}` came in the name `{token}`", mend)
        elif strange:
            kind = unicodedata.name(strange, "a sign without a name").lower()
            message = f"`{strange}` ({kind}) came in the name `{token}`; names have Latin or Greek letters"
            self.faults.add(
                self.span([token]), message, "write the letter that looks like it on your keyboard"
            )
        return name

    def ident(self, token: Token) -> nodes.Ident:
        """A name that is declared or pointed at."""
        return nodes.Ident(self.letters(token), span=self.span([token]))

    def bounded(self, node: Any) -> Any:
        """The node itself; one that nests too deep is a fault."""
        if too_deep(node):
            message = f"this expression has more than {DEPTH} levels of brackets, signs and operators"
            self.faults.add(node.span, message, "give parts of it names of their own, on lines before")
        return node

    def number(self, found: Found) -> nodes.Number:
        """`1.50(5) W`."""
        self.enough()
        return read_number(self.span(found), self.faults)

    def name(self, found: Found) -> nodes.Name:
        """A name that is used."""
        return nodes.Name(self.letters(found[0]), span=self.span(found))

    def call(self, found: Found) -> nodes.Call:
        """`NAME(a, b)`."""
        return nodes.Call(self.ident(found[0]), tuple(found[2:-1:2]), span=self.span(found))

    def choice(self, found: Found) -> nodes.If:
        """`if(condition, a, b)`."""
        return nodes.If(found[2], found[4], found[6], span=self.span(found))

    def group(self, found: Found) -> Any:
        """`(a)`: the same node, whose place takes in the brackets."""
        return replace(found[1], span=self.span(found))

    def negative(self, found: Found) -> nodes.Negative:
        """`-a`."""
        return nodes.Negative(found[1], span=self.span(found))

    def binary(self, found: Found) -> nodes.Binary:
        """`a + b` and its like."""
        return nodes.Binary(str(found[1]), found[0], found[2], span=self.span(found))  # type: ignore[arg-type]

    def power(self, found: Found) -> nodes.Binary:
        """`a ^ b`; whether `5 m^2` means the unit or the whole is for the writer to say."""
        base = found[0]
        if isinstance(base, nodes.Number) and base.unit and self.source.text[base.span.start] != "(":
            words, unit = base.span.text, base.unit.span.text
            exponent = found[2].span.text
            self.faults.add(
                self.span(found),
                f"`^` came after the unit of `{words}`; it is not clear whether the unit or the whole is meant",
                f"write `{words}{exponent}` for the unit {unit}{exponent}, or `({words})^{exponent}` for the whole",
            )
        return self.binary(found)

    def comparison(self, found: Found) -> nodes.Compare:
        """`a < b` and its like."""
        return nodes.Compare(str(found[1]), found[0], found[2], span=self.span(found))  # type: ignore[arg-type]

    def logic(self, found: Found) -> nodes.Logic:
        """`a and b`, `a or b`."""
        return nodes.Logic(str(found[1]), (found[0], found[2]), span=self.span(found))  # type: ignore[arg-type]

    def negation(self, found: Found) -> nodes.Logic:
        """`not a`."""
        return nodes.Logic("not", (found[1],), span=self.span(found))
