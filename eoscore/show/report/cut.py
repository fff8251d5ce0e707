"""V along one coordinate through the bottom, with kT, the escape energy and the density of the cloud."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.show.report.axis import as_temperature, length
from eoscore.show.report.picture import BLUE, INK, ORANGE, WALL, second_scale

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from numpy.typing import NDArray

    from eoscore.show.report.cloud import Cloud
    from eoscore.show.report.view import View

__all__ = ["Cut"]

_POINTS = 401
_LOW, _HIGH = -0.06, 1.25  # edges of the picture, in the energy of the view


class Cut:
    """A picture: paints itself on axes."""

    def __init__(self, view: View, cloud: Cloud, place: int) -> None:
        self.view, self.cloud, self.place = view, cloud, place
        self.name = view.trap.field.coordinates[place]
        x = np.linspace(*view.ranges[place], _POINTS)
        x[np.argmin(np.abs(x - view.trap.r_min[place]))] = view.trap.r_min[place]
        self.x, self.values = x, view.energies({**view.at_bottom(), self.name: x})

    @property
    def walled(self) -> bool:
        """Whether walls are in the picture."""
        return bool(np.isnan(self.values).any())

    def __call__(self, axes: Axes) -> None:
        """Paint."""
        view = self.view
        factor, label = as_temperature(view.energy, r"$(V-V_{\mathrm{min}})/k_{\mathrm{B}}$")
        step, title = length(self.x, self.name)
        low, high = _LOW * view.energy / factor, _HIGH * view.energy / factor
        self._density(axes, self.x / step)
        if self.walled:
            axes.fill_between(self.x / step, low, high, where=np.isnan(self.values), **WALL)
        axes.plot(self.x / step, self.values / factor, color=INK)
        axes.plot(view.trap.r_min[self.place] / step, 0.0, "+", color=INK, markersize=11, markeredgewidth=2)
        if view.trap.top <= 1.2 * view.energy:
            _level(axes, view.trap.top / factor, "escape", ORANGE, "--", 0.02)
        if self.cloud.kT and self.cloud.kT <= 1.2 * view.energy:
            _level(axes, self.cloud.kT / factor, "kT", BLUE, ":", 0.98)
        axes.set_ylim(low, high)
        axes.set_xlabel(title)
        axes.set_ylabel(label)

    def _density(self, axes: Axes, x: NDArray[np.float64]) -> None:
        if not self.cloud.peak:
            return
        bottom = int(np.argmin(np.abs(self.x - self.view.trap.r_min[self.place])))
        held = self.view.holds(self.values, (bottom,))
        shares = np.where(held, self.cloud.at(self.values) / self.cloud.peak, 0.0)
        beside = second_scale(axes)
        beside.fill_between(x, shares, color=BLUE, alpha=0.3, linewidth=0)
        beside.set_ylim(_LOW, _HIGH)
        beside.set_yticks([0.0, 0.5, 1.0])
        beside.set_ylabel("density / peak")


def _level(axes: Axes, height: float, name: str, colour: str, dash: str, at: float) -> None:
    """A line across with its name above it, at a share of the width."""
    axes.axhline(height, color=colour, linestyle=dash)
    axes.annotate(
        name,
        (at, height),
        (0, 3),
        xycoords=("axes fraction", "data"),
        textcoords="offset points",
        color=colour,
        ha="left" if at < 0.5 else "right",
    )
