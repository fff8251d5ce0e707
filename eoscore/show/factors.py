"""Marks on an axis that runs by factors: plain numbers where it spans little, powers of ten where it spans much."""

from __future__ import annotations

from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from matplotlib.axis import Axis

__all__ = ["mark_factors"]

_STEPS = ((4.0, (1.0, 1.5, 2.0, 3.0, 4.0, 5.0, 6.0, 8.0)), (100.0, (1.0, 2.0, 5.0)))


def mark_factors(axis: Axis) -> None:
    """Choose the marks of an axis whose scale and range are set; powers of ten are left as they are."""
    low, high = sorted(axis.get_view_interval())
    steps = next((marks for most, marks in _STEPS if low > 0.0 and high <= most * low), None)
    if steps is None or not 1e-4 < low < high < 1e6:
        return
    from matplotlib.ticker import LogLocator, NullFormatter, StrMethodFormatter

    axis.set_major_locator(LogLocator(subs=steps))
    axis.set_major_formatter(StrMethodFormatter("{x:g}"))
    axis.set_minor_formatter(NullFormatter())
