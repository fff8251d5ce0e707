"""Lines of equal V on a plane through the bottom, over the density in shades."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import numpy as np

from eoscore.show.report.axis import as_temperature, length
from eoscore.show.report.picture import INK, ORANGE, SHAPE
from eoscore.show.report.raised import with_prefixes
from eoscore.show.report.way_out import leak_of

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from numpy.typing import NDArray

    from eoscore.show.report.cloud import Cloud
    from eoscore.show.report.view import View

__all__ = ["Contours"]

_MESH = 161
_SHARES = (0.25, 0.5, 0.75)  # contour lines, of the energy of the view
_DENSITIES = (0.02, 0.1, 0.3, 0.5, 0.7, 0.9, 1.01)  # shades, of the peak
_UNEQUAL = 2.5  # planes that are longer than wide by more have scales of their own


class Contours:
    """A picture: paints itself on axes. `words` tell what the lines are; without a cloud there are no shades."""

    def __init__(self, view: View, cloud: Cloud | None, pair: tuple[int, int]) -> None:
        self.view, self.cloud, self.pair = view, cloud, pair
        self.names = [view.trap.field.coordinates[place] for place in pair]
        (x, y), self.equal = _true_to_scale([view.ranges[place] for place in pair], self.names)
        bottom = [view.trap.r_min[place] for place in pair]
        self.x, self.y = (
            _through(np.linspace(*ends, _MESH), at) for ends, at in zip((x, y), bottom, strict=True)
        )
        at: dict[str, Any] = {
            **view.at_bottom(),
            self.names[0]: self.x[:, None],
            self.names[1]: self.y[None, :],
        }
        self.values = view.energies(at).T
        self._factor, self.unit = as_temperature(view.energy, "")
        self.levels = [float(f"{share * view.energy / self._factor:.2g}") for share in _SHARES]

    @property
    def words(self) -> str:
        """What the lines, the marks and the hatching are."""
        told = ", ".join(f"{level:g}" for level in self.levels)
        words = f"Lines: (V − V_min)/k_B = {told} {self.unit}. Plus sign: the bottom."
        if np.isnan(self.values).any():
            words += " Hatched: behind walls."
        if self._shows_top:
            words += f" Dashed: the escape energy.{self._escape_words()}"
        return words + ("" if self.equal else " The two axes have scales of their own.")

    @property
    def _shows_top(self) -> bool:
        return self.view.trap.top <= 1.2 * self.view.energy

    def _escape_words(self) -> str:
        escape = leak_of(self.view.trap)
        if escape is None:
            return ""
        inside = escape.position is not None and self.view.shows(escape.position)
        return (
            f" {'Cross' if inside else 'Outside this picture'}: the trap leaks {with_prefixes(escape.words)}."
        )

    def __call__(self, axes: Axes) -> None:
        """Paint."""
        (x_step, x_label), (y_step, y_label) = length(self.x, self.names[0]), length(self.y, self.names[1])
        x, y = self.x / x_step, self.y / y_step
        self._shade(axes, x, y)
        known = np.ma.masked_invalid(self.values / self._factor)
        lines = axes.contour(x, y, known, levels=self.levels, colors=INK, linewidths=1.0)
        axes.clabel(lines, fontsize=8, fmt="%.3g")
        if self._shows_top:
            top = [self.view.trap.top / self._factor]
            axes.contour(x, y, known, levels=top, colors=ORANGE, linestyles="--", linewidths=1.8)
        across, up = (self.view.trap.r_min[place] for place in self.pair)
        axes.plot(across / x_step, up / y_step, "+", color=INK, markersize=11, markeredgewidth=2)
        escape = leak_of(self.view.trap)
        if escape is not None and escape.position is not None and self.view.shows(escape.position):
            across, up = (escape.position[place] for place in self.pair)
            axes.plot(across / x_step, up / y_step, "x", color=ORANGE, markersize=10, markeredgewidth=2.5)
        axes.set_xlabel(x_label)
        axes.set_ylabel(y_label)

    def _shade(self, axes: Axes, x: NDArray[np.float64], y: NDArray[np.float64]) -> None:
        """The density, and hatching behind walls."""
        if self.cloud is not None and self.cloud.peak:
            bottom = [self.view.trap.r_min[place] for place in self.pair]
            at = int(np.argmin(np.abs(self.y - bottom[1]))), int(np.argmin(np.abs(self.x - bottom[0])))
            shares = np.where(
                self.view.holds(self.values, at), self.cloud.at(self.values) / self.cloud.peak, 0.0
            )
            axes.contourf(x, y, shares, levels=_DENSITIES, cmap="Blues", alpha=0.85)
        behind = np.isnan(self.values)
        if behind.any():
            axes.contourf(x, y, behind.astype(float), levels=[0.5, 1.5], hatches=["////"], colors="none")


def _through(x: NDArray[np.float64], at: float) -> NDArray[np.float64]:
    """The mesh with its nearest line moved through the bottom."""
    x[np.argmin(np.abs(x - at))] = at
    return x


def _true_to_scale(
    ranges: list[tuple[float, float]], names: list[str]
) -> tuple[list[tuple[float, float]], bool]:
    """The ranges with the shorter one widened until a micrometre is as long upwards as across; if that is sensible."""
    across, up = (high - low for low, high in ranges)
    if not 1 / _UNEQUAL <= across / (SHAPE * up) <= _UNEQUAL:
        return ranges, False
    wanted = max(across, SHAPE * up), max(across / SHAPE, up)
    found = []
    for (low, high), name, size in zip(ranges, names, wanted, strict=True):
        more = size - (high - low)
        below = 0.0 if name in ("rho", "r") else more / 2
        found.append((low - below, high + more - below))
    return found, True
