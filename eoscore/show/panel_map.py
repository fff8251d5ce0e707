"""A panel that shows a quantity over two names as a map, with contours that carry their numbers."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np
from matplotlib.colors import LogNorm, Normalize
from matplotlib.ticker import Locator, LogLocator, MaxNLocator

from eoscore.show.factors import mark_factors

if TYPE_CHECKING:
    from collections.abc import Sequence

    from matplotlib.axes import Axes
    from numpy.typing import NDArray

    from eoscore.show.scale import Scale

__all__ = ["draw_map"]

_LEVELS = 7


def draw_map(axes: Axes, over: Sequence[Scale], value: Scale) -> None:
    """Draw a quantity over two names: the second runs along the horizontal axis, the first upwards."""
    up, along = over
    table = np.ma.masked_invalid(value.values)
    kind = LogNorm if value.logarithmic else Normalize
    norm = kind(float(table.min()), float(table.max()))
    image = axes.pcolormesh(
        along.values, up.values, table, cmap="cividis", norm=norm, shading="nearest", rasterized=True
    )
    axes.set_facecolor("0.93")
    axes.set_xscale("log" if along.logarithmic else "linear")
    axes.set_yscale("log" if up.logarithmic else "linear")
    axes.set_xlabel(along.label)
    axes.set_ylabel(up.label)
    for axis, scale in ((axes.xaxis, along), (axes.yaxis, up)):
        if scale.logarithmic:
            mark_factors(axis)
    levels = _levels(table, logarithmic=value.logarithmic)
    if levels.size:
        _contours(axes, along, up, table, levels)
    bar = axes.figure.colorbar(image, ax=axes, pad=0.02, aspect=25)
    bar.set_label(value.label)
    bar.outline.set_linewidth(0.4)


def _contours(
    axes: Axes, along: Scale, up: Scale, table: NDArray[np.float64], levels: NDArray[np.float64]
) -> None:
    """Lines that are dark on light ground and light on dark ground."""
    middle = levels[levels.size // 2]
    colours = ["0.95" if level < middle else "0.05" for level in levels]
    lines = axes.contour(along.values, up.values, table, levels, colors=colours, linewidths=0.7)
    axes.clabel(lines, fontsize=7.0, fmt=lambda level: f"{level:.4g}", inline_spacing=3)


def _levels(table: NDArray[np.float64], *, logarithmic: bool) -> NDArray[np.float64]:
    """Round numbers inside the range."""
    low, high = float(table.min()), float(table.max())
    if not low < high:
        return np.array([])
    decades = np.log10(high / low) if logarithmic else 0.0
    if decades > 1.0:
        locator: Locator = LogLocator(subs=(1.0,) if decades > 3.0 else (1.0, 2.0, 5.0), numticks=_LEVELS)
    else:
        locator = MaxNLocator(_LEVELS)
    ticks = np.asarray(locator.tick_values(low, high), dtype=float)
    return ticks[(ticks > low) & (ticks < high)]
