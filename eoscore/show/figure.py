"""The figure of one question: a panel for each quantity, its axes in units that fit.  Imports matplotlib."""

from __future__ import annotations

from textwrap import fill
from typing import TYPE_CHECKING, Any

import numpy as np
from matplotlib import rc_context
from matplotlib.figure import Figure

from eoscore.show.band import band_of, band_words
from eoscore.show.panel_lines import draw_lines
from eoscore.show.panel_map import draw_map
from eoscore.show.scale import Scale

if TYPE_CHECKING:
    from pathlib import Path

    from matplotlib.axes import Axes

    from eoscore.answer.record import Finding, FoundAnswer

__all__ = ["as_map", "figure_of", "write_figure"]

_FAMILY = 6  # values of one name that are drawn as lines of their own rather than as a map
_LOOK: Any = {
    "font.family": "sans-serif",
    "font.size": 9.0,
    "axes.titlesize": 9.0,
    "axes.linewidth": 0.6,
    "axes.edgecolor": "0.35",
    "axes.labelcolor": "0.1",
    "axes.unicode_minus": True,
    "xtick.color": "0.35",
    "ytick.color": "0.35",
    "xtick.labelcolor": "0.1",
    "ytick.labelcolor": "0.1",
    "xtick.direction": "out",
    "lines.linewidth": 1.4,
    "svg.hashsalt": "eoscore",  # the same question gives the same file
    "savefig.dpi": 160,
}


def write_figure(answer: FoundAnswer, path: Path, kind: str) -> None:
    """Write the figure of a question as "png", "svg" or "pdf", without a date: the same answer, the same file."""
    undated: dict[str, dict[str, Any]] = {"svg": {"Date": None}, "pdf": {"CreationDate": None}}
    with rc_context(_LOOK):
        figure_of(answer).savefig(path, format=kind, metadata=undated.get(kind))


def figure_of(answer: FoundAnswer, *, bare: bool = False) -> Figure:
    """The figure of a question over one or two names; points without an answer stay blank, with the reason below.

    A `bare` figure has neither the question above nor the words below, which then stand beside it.
    """
    names = list(answer.found)
    mapped = as_map(answer)
    with rc_context(_LOOK):
        figure = Figure(figsize=(5.2, (0.5 if bare else 0.9) + 2.5 * len(names)), layout="constrained")
        panels = figure.subplots(len(names), 1, squeeze=False, sharex=True)[:, 0]
        for axes, name in zip(panels, names, strict=True):
            _draw(axes, answer, name, as_map=mapped)
        for axes in panels[:-1]:
            axes.set_xlabel("")
        if not bare:
            figure.suptitle(fill(answer.question, 76), fontsize=8.5, color="0.1")
        if not bare and (notes := _notes(answer, as_map=mapped)):
            figure.supxlabel(notes, fontsize=7.5, color="0.3", x=0.02, ha="left")
        figure.draw_without_rendering()  # with the look in force: texts are laid out now
    return figure


def as_map(answer: FoundAnswer) -> bool:
    """Whether a grid is drawn as a map: over two names of many values each."""
    return len(answer.over) == 2 and min(values.size for values in answer.over.values()) > _FAMILY


def _draw(axes: Axes, answer: FoundAnswer, name: str, *, as_map: bool) -> None:
    finding = answer.found[name]
    scales = {each: Scale.of(values, answer.over_units[each], each) for each, values in answer.over.items()}
    value = Scale.of(finding.value, finding.unit, name)
    if not np.isfinite(finding.value).any():
        _say_nothing(axes, name, finding, scales)
    elif as_map and finding.value.ndim == 2:
        draw_map(axes, list(scales.values()), value)
    else:
        draw_lines(axes, list(scales.values()), value, band_of(finding))


def _say_nothing(axes: Axes, name: str, finding: Finding, scales: dict[str, Scale]) -> None:
    """Words where a whole panel has no number."""
    axes.set_ylabel(name)
    axes.set_yticks([])
    axes.set_xlabel(next(iter(scales.values())).label)
    axes.text(
        0.5, 0.5, fill(f"no value: {finding.why}", 60), transform=axes.transAxes, ha="center", va="center"
    )


def _notes(answer: FoundAnswer, *, as_map: bool) -> str:
    """Why points are blank, and what a band means."""
    lines = []
    if not as_map and (bands := band_words(answer.found.values())):
        lines.append(bands)
    reasons: dict[str, list[str]] = {}
    for name, finding in answer.found.items():
        for reason in finding.reasons:
            reasons.setdefault(reason.text, []).append(name)
    lines += [f"Blank in {', '.join(names)}: {text}" for text, names in list(reasons.items())[:3]]
    return "\n".join(fill(line, 88) for line in lines)
