"""The words of Tarn that are never names, and those that open a line of a block."""

from __future__ import annotations

from typing import Final

BLOCKS: Final = ("gas", "trap", "states")
OPENERS: Final = (*BLOCKS, "use", "find", "derive")
JOINERS: Final = ("for", "in", "with", "over", "from", "where", "at", "and", "or", "not", "if")
RESERVED: Final = frozenset(OPENERS + JOINERS)

# Words that open a line of one kind of block; with `=` or `(` after them they are ordinary names.
LINE_WORDS: Final = {
    "isotope": "gas",
    "statistics": "gas",
    "treatment": "gas",
    "dispersion": "gas",
    "levels": "trap",
    "anchor": "states",
}
