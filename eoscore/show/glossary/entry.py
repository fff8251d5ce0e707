"""One entry of the glossary."""

from __future__ import annotations

from dataclasses import dataclass

__all__ = ["Entry"]


@dataclass(frozen=True)
class Entry:
    """What a name means: its kind in words, the meaning, and where they exist a formula, a unit and a source.

    Formulas are written in Tarn's notation; units are SI.
    """

    name: str
    kind: str
    meaning: str
    formula: str = ""
    unit: str = ""
    source: str = ""
