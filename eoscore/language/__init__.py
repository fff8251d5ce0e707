"""The language room: Tarn text to checked programs, and programs to facts."""

from __future__ import annotations

from eoscore.language.reading import load, read

__all__ = ["load", "read"]
