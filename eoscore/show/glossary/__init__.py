"""What every name of the language means: one table per kind, held against the language's own tables by a test."""

from __future__ import annotations

from eoscore.show.glossary.entry import Entry
from eoscore.show.glossary.glossary import entries_of, glossary, near_names

__all__ = ["Entry", "entries_of", "glossary", "near_names"]
