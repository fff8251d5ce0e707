"""A complaint for a reader: the place, the line with the place marked, what is wrong, and the mend."""

from __future__ import annotations

from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Iterable

    from eoscore.errors import Complaint

__all__ = ["complaint_text", "complaints_text"]

_WIDTH = 100  # columns of the source line that are shown around the place


def complaint_text(complaint: Complaint) -> str:
    """One complaint over a few lines, without a line end at the last."""
    lines = [f"{complaint.file}:{complaint.line}:{complaint.column}: {complaint.message}"]
    if complaint.excerpt.strip():
        shown, marks = _marked(complaint)
        gutter = f"{complaint.line:>5} | "
        lines += [gutter + shown, " " * (len(gutter) - 2) + "| " + marks]
    if complaint.hint:
        lines.append(f"      {complaint.hint}")
    return "\n".join(lines)


def complaints_text(complaints: Iterable[Complaint], *, computed: bool = False) -> str:
    """All complaints, one after the other, with a closing count."""
    texts = [complaint_text(complaint) for complaint in complaints]
    count = "1 fault" if len(texts) == 1 else f"{len(texts)} faults"
    end = "the other questions were answered." if computed else "nothing was computed."
    return "\n\n".join([*texts, f"{count} found; {end}"])


def _marked(complaint: Complaint) -> tuple[str, str]:
    """The source line, cut to a readable width around the place, and carets below the words meant."""
    text = complaint.excerpt
    start = complaint.column - 1
    end = complaint.end_column - 1 if complaint.end_line == complaint.line else len(text)
    first = max(0, start - _WIDTH // 2) if len(text) > _WIDTH else 0
    last = min(len(text), first + _WIDTH)
    before = "… " if first > 0 else ""
    after = " …" if last < len(text) else ""
    shown = "".join(char if char == "\t" or char.isprintable() else "?" for char in text[first:last])
    blank = "".join("\t" if char == "\t" else " " for char in shown[: start - first])
    carets = "^" * max(1, min(end, last) - start)
    return before + shown + after, " " * len(before) + blank + carets
