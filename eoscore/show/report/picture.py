"""A matplotlib figure as inline SVG with a text alternative, for light and dark and for any zoom."""

from __future__ import annotations

import re
from io import StringIO
from itertools import count
from typing import TYPE_CHECKING, Any

from matplotlib import rc_context
from matplotlib.figure import Figure

from eoscore.show.report.markup import Markup, element

if TYPE_CHECKING:
    from collections.abc import Callable

    from matplotlib.axes import Axes

__all__ = ["BLUE", "INK", "ORANGE", "SHAPE", "WALL", "Gallery", "second_scale"]

# Okabe and Ito's colours, told apart by colour-blind readers; dashes and marks tell them apart in grey.
INK, BLUE, ORANGE = "#111111", "#0072B2", "#D55E00"
WALL: dict[str, Any] = {"facecolor": "none", "edgecolor": "#888888", "hatch": "////", "linewidth": 0.0}
_SIZE = (4.2, 3.1)  # inches; scaled with the page
# The same for every picture: to find margins for each costs as much as to draw it.
_MARGINS = {"left": 0.18, "right": 0.97, "bottom": 0.165, "top": 0.96}
_BESIDE = 0.85  # the right one, where a second scale stands there
SHAPE = (
    _SIZE[0] * (_MARGINS["right"] - _MARGINS["left"]) / (_SIZE[1] * (_MARGINS["top"] - _MARGINS["bottom"]))
)
_LOOK: dict[Any, Any] = {
    "font.family": "sans-serif",
    "font.size": 10.0,
    "axes.spines.top": False,
    "axes.spines.right": False,
    "hatch.color": "#888888",
    "axes.edgecolor": "#444444",
    "axes.labelcolor": INK,
    "text.color": INK,
    "xtick.color": "#333333",
    "ytick.color": "#333333",
    "lines.linewidth": 1.6,
    "svg.fonttype": "path",
    "svg.hashsalt": "eoscore",
}


class Gallery:
    """Makes the pictures of one page; each gets ids of its own."""

    def __init__(self) -> None:
        self._number = count(1)

    def draw(self, title: str, words: str, paint: Callable[[Axes], None]) -> Markup:
        """One panel that `paint` fills; `words` tell in the caption what is to be seen."""
        with rc_context(_LOOK):
            figure = Figure(figsize=_SIZE)
            figure.subplots_adjust(**_MARGINS)
            paint(figure.subplots())
            return self.show(figure, title, words)

    def show(self, figure: Figure, title: str, words: str) -> Markup:
        """A finished figure with its caption."""
        stream = StringIO()
        figure.savefig(stream, format="svg", transparent=True, metadata={"Date": None, "Creator": None})
        svg = _inline(stream.getvalue(), f"p{next(self._number)}", title)
        return element("figure", Markup(svg), element("figcaption", element("b", title), ". ", words))


def second_scale(axes: Axes) -> Axes:
    """Axes with a scale on the right, painted behind the given ones."""
    axes.figure.subplots_adjust(right=_BESIDE)
    beside = axes.twinx()
    beside.spines["right"].set_visible(True)
    axes.set_zorder(beside.get_zorder() + 1)
    axes.patch.set_visible(False)
    return beside


def _inline(text: str, name: str, title: str) -> str:
    """The `svg` element alone, labelled by its title, with only the ids that something points at, made unique."""
    svg = text[text.index("<svg") :]
    svg = re.sub(r"<metadata>.*?</metadata>\s*", "", svg, flags=re.DOTALL)
    svg = re.sub(r"<!--.*?-->\s*", "", svg, flags=re.DOTALL)
    used = dict.fromkeys(re.findall(r'(?:href="#|url\(#)([^")]+)', svg))
    short = {each: f"{name}-{place}" for place, each in enumerate(used)}
    svg = re.sub(r' id="([^"]*)"', lambda m: f' id="{short[m[1]]}"' if m[1] in short else "", svg)
    svg = re.sub(r'(href="#|url\(#)([^")]+)', lambda m: m[1] + short[m[2]], svg)
    svg = re.sub(r"xlink:href", "href", svg)
    svg = re.sub(r'(?<= d=")[^"]*', _rounded, svg)
    svg = re.sub(r'<svg [^>]*viewBox="([^"]*)"[^>]*>', _opening(name, title), svg, count=1)
    return re.sub(r"\n\s*", "\n", svg)


def _rounded(path: re.Match[str]) -> str:
    """A path to a hundredth of a point: what no eye sees need not be sent."""
    return re.sub(r"(\d+\.\d{2})\d+", r"\1", path[0])


def _opening(name: str, title: str) -> Callable[[re.Match[str]], str]:
    from html import escape

    def opened(found: re.Match[str]) -> str:
        return (
            f'<svg role="img" aria-labelledby="{name}-title" viewBox="{found[1]}" '
            f'xmlns="http://www.w3.org/2000/svg"><title id="{name}-title">{escape(title)}</title>'
        )

    return opened
