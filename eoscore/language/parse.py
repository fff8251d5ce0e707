"""Text to nodes: the front door of the language's first half."""

from __future__ import annotations

from eoscore.language import nodes
from eoscore.language.characters import read_source
from eoscore.language.grammar import build_nodes
from eoscore.language.recover import recover


def parse(text: str | bytes, name: str = "<text>") -> nodes.File:
    """The nodes of a Tarn text; `name` is the path told in complaints.

    Raises TarnError with every fault of syntax, number and unit that one pass finds. After a fault the reading
    goes on at the next line that opens an entry, or at the bracket that closes the block.
    """
    file, faults = build_nodes(read_source(text, name), recover)
    faults.raise_if_any()
    return file or nodes.File((), span=None)  # type: ignore[arg-type]
