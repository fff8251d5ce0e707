"""HTML by pieces: text is escaped, what is markup already is a `Markup`."""

from __future__ import annotations

from html import escape
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Iterable

__all__ = ["Markup", "element", "listed", "table", "together"]


class Markup(str):
    """Text that is HTML already."""

    __slots__ = ()


def together(*parts: str) -> Markup:
    """Pieces one after the other; plain text is escaped."""
    return Markup("".join(part if isinstance(part, Markup) else escape(part, quote=False) for part in parts))


def element(name: str, *parts: str, **attributes: str) -> Markup:
    """An element; `class_` and `aria_label` stand for `class` and `aria-label`."""
    told = "".join(
        f' {key.rstrip("_").replace("_", "-")}="{escape(value)}"' for key, value in attributes.items()
    )
    return Markup(f"<{name}{told}>{together(*parts)}</{name}>")


def listed(items: Iterable[str], **attributes: str) -> Markup:
    """A list of items; nothing for none."""
    points = [element("li", item) for item in items]
    return element("ul", *points, **attributes) if points else Markup("")


def _row(cells: list[str], width: int) -> Markup:
    wide = {"colspan": str(width - len(cells) + 1)} if len(cells) < width else {}
    head, *middle, last = cells
    return element(
        "tr",
        element("th", head, scope="row"),
        *(element("td", cell) for cell in middle),
        element("td", last, **wide),
    )


def table(caption: str, heads: Iterable[str], rows: Iterable[Iterable[str]]) -> Markup:
    """A table with a caption for those who hear it; the first cell of a row is its head.

    The last cell of a short row reaches to the end. The table scrolls by itself where it is too wide.
    """
    names = list(heads)
    head = element("tr", *(element("th", each, scope="col") for each in names))
    body = [_row(list(row), len(names)) for row in rows]
    whole = element(
        "table", element("caption", caption, class_="heard"), element("thead", head), element("tbody", *body)
    )
    return element("div", whole, class_="wide", tabindex="0", role="group", aria_label=caption)
