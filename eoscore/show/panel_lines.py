"""A panel of lines: one for each value of a second name or each entry of a list, told apart by dash and label."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.show.band import Band
from eoscore.show.factors import mark_factors

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence

    from matplotlib.axes import Axes
    from numpy.typing import NDArray

    from eoscore.show.scale import Scale

__all__ = ["draw_lines"]

_MOST = 6  # lines in a panel; of more, as many from the first to the last
_DASHES = ("-", (0, (6, 2)), (0, (1.5, 1.5)), (0, (7, 2, 1.5, 2)), (0, (3, 3)), (0, (7, 2, 1.5, 2, 1.5, 2)))
_FEW = 15  # points that are marked one by one


def draw_lines(axes: Axes, over: Sequence[Scale], value: Scale, band: Band | None) -> None:
    """Draw a quantity over one name, or over two of which the shorter one gives a line for each value.

    `band` is that of the quantity in SI.
    """
    along = max(range(len(over)), key=lambda place: over[place].values.size)
    x = over[along]
    lines = list(_lines(over, along, value, band))
    many = len(lines) > 1
    for place, (label, y, ends) in enumerate(lines):
        colour = _colour(place, len(lines))
        marker = "o" if x.values.size <= _FEW else None
        axes.plot(
            x.values, y, color=colour, linestyle=_DASHES[place], marker=marker, markersize=2.5, label=label
        )
        if ends is not None:
            axes.fill_between(x.values, ends.low, ends.high, color=colour, alpha=0.22, linewidth=0)
    axes.dataLim.update_from_data_x(x.values, ignore=False)  # points without an answer keep their room
    axes.set_xscale("log" if x.logarithmic else "linear")
    axes.set_yscale("log" if value.logarithmic else "linear")
    axes.set_xlabel(x.label)
    axes.set_ylabel(value.label)
    axes.grid(visible=True, color="0.9", linewidth=0.5)
    axes.set_axisbelow(True)
    axes.spines[["top", "right"]].set_visible(False)
    axes.margins(x=0.02)
    for axis, scale in ((axes.xaxis, x), (axes.yaxis, value)):
        if scale.logarithmic:
            mark_factors(axis)
    if many:
        axes.legend(frameon=False, fontsize=7.5, handlelength=3.2)


def _lines(
    over: Sequence[Scale], along: int, value: Scale, band: Band | None
) -> Iterator[tuple[str, NDArray[np.float64], Band | None]]:
    """Label, values and band of every line."""
    own = value.values.ndim > len(over)
    ends = None if band is None else [np.moveaxis(end / value.factor, along, -1) for end in band]
    table = np.moveaxis(value.values, along, -1)
    others = [scale for place, scale in enumerate(over) if place != along]
    every = list(np.ndindex(table.shape[:-1]))
    shown = np.unique(np.linspace(0, len(every) - 1, min(_MOST, len(every))).astype(int))
    for index in (every[place] for place in shown):
        words = [scale.text(float(scale.values[i])) for scale, i in zip(others, index, strict=False)]
        words += [f"{value.name}, {index[-1] + 1}"] if own else []
        yield (
            ", ".join(words) or value.name,
            table[index],
            None if ends is None else Band(*(end[index] for end in ends)),
        )


def _colour(place: int, count: int) -> tuple[float, float, float, float]:
    """From dark to light within cividis, as far as a line keeps a contrast of 3 on white and, inverted, on black."""
    from matplotlib import colormaps

    red, green, blue, alpha = colormaps["cividis"](0.1 + 0.5 * place / max(1, count - 1))
    return red, green, blue, alpha
