"""Every error that eoscore raises: one root, facts as attributes, the sentence built in the class.

A leaf: it knows nobody but the source spans.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Sequence

    from eoscore.source import Span

__all__ = ["Complaint", "EoscoreError", "LawError", "NoAnswerError", "PluginError", "TarnError"]


class EoscoreError(Exception):
    """The root of all errors of eoscore."""


@dataclass(frozen=True)
class Complaint:
    """One fault in a text: its place, what came and what was expected, and the likely mend.

    Lines and columns count from 1, the end is exclusive; `excerpt` is the line that holds the start.
    """

    file: str
    line: int
    column: int
    end_line: int
    end_column: int
    message: str
    hint: str | None = None
    excerpt: str = ""

    @classmethod
    def at(cls, span: Span, message: str, hint: str | None = None) -> Complaint:
        """A complaint about the words of a span."""
        return cls(
            span.source.name,
            span.line,
            span.column,
            span.end_line,
            span.end_column,
            message,
            hint,
            span.source.line(span.line),
        )

    def __str__(self) -> str:
        sentence = f"{self.file}:{self.line}:{self.column}: {self.message}"
        return f"{sentence}\n  {self.hint}" if self.hint else sentence


class TarnError(EoscoreError, ValueError):
    """A Tarn text, or a question to it, is at fault; `complaints` holds all that was found in one pass."""

    def __init__(self, complaints: Sequence[Complaint]) -> None:
        self.complaints = tuple(complaints)
        super().__init__("\n".join(map(str, self.complaints)))


class NoAnswerError(EoscoreError, ArithmeticError):
    """A case that has no answer, in words that say why: an open trap, a diverging number, no condensation."""

    def __init__(self, why: str) -> None:
        self.why = why
        super().__init__(why)


class PluginError(EoscoreError, TypeError):
    """A plugin is refused at registration: its name, what was found, what was wanted."""

    def __init__(self, plugin: str, found: str, wanted: str) -> None:
        self.plugin, self.found, self.wanted = plugin, found, wanted
        super().__init__(f"plugin {plugin!r} is refused: found {found}; wanted {wanted}")


class LawError(EoscoreError, AssertionError):
    """A dispersion breaks laws of its contract: its name, and each broken law in words."""

    def __init__(self, dispersion: str, broken: Sequence[str]) -> None:
        self.dispersion, self.broken = dispersion, tuple(broken)
        super().__init__("\n  ".join([f"the dispersion {dispersion!r} breaks its contract:", *self.broken]))
