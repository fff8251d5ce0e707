"""The trap in cuts and contour maps, with its bottom, its escape point and the density of the cloud over it."""

from __future__ import annotations

from itertools import combinations
from typing import TYPE_CHECKING, Any

import numpy as np

from eoscore.constants import K_B
from eoscore.errors import NoAnswerError
from eoscore.show.prefix import quantity
from eoscore.show.report.axis import as_temperature, length
from eoscore.show.report.picture import BLUE, INK, ORANGE
from eoscore.show.report.raised import raised
from eoscore.show.report.view import views_of

if TYPE_CHECKING:
    from collections.abc import Iterator

    from matplotlib.axes import Axes
    from numpy.typing import NDArray

    from eoscore.show.report.markup import Markup
    from eoscore.show.report.picture import Gallery
    from eoscore.show.report.subject import Subject
    from eoscore.show.report.view import View

__all__ = ["trap_pictures"]

_POINTS = 401
_MESH = 121
_SHARES = (0.25, 0.5, 0.75)  # contour lines, of the energy of the view
_DENSITIES = (0.02, 0.1, 0.3, 0.5, 0.7, 0.9, 1.01)  # shades, of the peak


def trap_pictures(subject: Subject, gallery: Gallery) -> Iterator[Markup]:
    """A cut along every coordinate and a map of every pair, through the bottom."""
    views = [] if subject.trap is None else list(views_of(subject.trap, subject.temperature))
    for number, view in enumerate(views):
        cloud = _Cloud(subject, view)
        close = " close to the cloud" if number else ""
        names = view.trap.field.coordinates
        for place, name in enumerate(names if not number else ()):
            words = f"{_cut_words(subject, view, name)}{cloud.words}"
            yield gallery.draw(f"{subject.name}: cut along {name}", words, _Cut(view, cloud, place))
        for pair in combinations(range(len(names)), 2):
            drawn = _Map(view, cloud, pair)
            title = f"{subject.name}: map of {names[pair[0]]} and {names[pair[1]]}{close}"
            yield gallery.draw(title, f"{drawn.words}{cloud.map_words}", drawn)


class _Cloud:
    """The density of the non-condensed gas as a function of V - V_min, from one profile of one state."""

    def __init__(self, subject: Subject, view: View) -> None:
        self.peak, self.kT, self.words, self.map_words = 0.0, 0.0, "", ""
        state = subject.state()
        if state is None or subject.temperature is None:
            return
        coordinate, (low, high) = view.trap.field.coordinates[0], view.ranges[0]
        positions: dict[str, Any] = {**view.at_bottom(), coordinate: np.linspace(low, high, _POINTS)}
        try:
            profile = state.profile(**positions)
        except NoAnswerError:
            return
        order = np.argsort(profile.potential)
        self._energies, self._densities = profile.potential[order], profile.density[order]
        diverges = not np.isfinite(self._densities).all()  # a flat gas that condenses, at the bottom
        self._densities = np.minimum(self._densities, self._densities[np.isfinite(self._densities)].max())
        self.peak, self.kT = float(self._densities.max()), K_B * subject.temperature
        self.unit = f"m^-{view.trap.dimension}" if view.trap.dimension > 1 else "m^-1"
        of = "" if not state.f_0 else ", without the condensate, which has no width in this picture"
        self.words = (
            f" Shaded: density of the non-condensed gas at T = {quantity(subject.temperature, 'K')}{of}; "
            + (
                "it diverges at the bottom."
                if diverges
                else f"its peak is {raised(quantity(self.peak, self.unit))}."
            )
        )
        self.map_words = (
            " Shades: the density is above 2, 10, 30, 50, 70 and 90 % of its peak, from the rim inwards."
        )

    def at(self, energies: NDArray[np.float64]) -> NDArray[np.float64]:
        """Density in m^-d where V - V_min has these values; 0 behind walls."""
        found = np.interp(energies, self._energies, self._densities, right=0.0)
        return np.where(np.isfinite(energies), found, 0.0)


class _Cut:
    """V along one coordinate through the bottom, with kT, the escape energy and the density."""

    def __init__(self, view: View, cloud: _Cloud, place: int) -> None:
        self.view, self.cloud, self.place = view, cloud, place

    def __call__(self, axes: Axes) -> None:
        view, name = self.view, self.view.trap.field.coordinates[self.place]
        x = np.linspace(*view.ranges[self.place], _POINTS)
        values = view.energies({**view.at_bottom(), name: x})
        factor, label = as_temperature(view.energy, r"$(V-V_{\mathrm{min}})/k_{\mathrm{B}}$")
        step, title = length(x, name)
        self._density(axes, x / step, values)
        axes.plot(x / step, values / factor, color=INK)
        axes.plot(view.trap.r_min[self.place] / step, 0.0, "+", color=INK, markersize=11, markeredgewidth=2)
        if view.trap.top <= 1.2 * view.energy:
            axes.axhline(view.trap.top / factor, color=ORANGE, linestyle="--")
            axes.annotate(
                "escape",
                (0.02, view.trap.top / factor),
                (0, 3),
                xycoords=("axes fraction", "data"),
                textcoords="offset points",
                color=ORANGE,
            )
        if self.cloud.kT:
            axes.axhline(self.cloud.kT / factor, color=BLUE, linestyle=":")
            axes.annotate(
                "kT",
                (0.98, self.cloud.kT / factor),
                (0, 3),
                xycoords=("axes fraction", "data"),
                textcoords="offset points",
                color=BLUE,
                ha="right",
            )
        axes.set_ylim(-0.06 * view.energy / factor, 1.25 * view.energy / factor)
        axes.set_xlabel(title)
        axes.set_ylabel(label)

    def _density(self, axes: Axes, x: NDArray[np.float64], values: NDArray[np.float64]) -> None:
        if not self.cloud.peak:
            return
        beside = axes.twinx()
        beside.fill_between(x, self.cloud.at(values) / self.cloud.peak, color=BLUE, alpha=0.3, linewidth=0)
        beside.set_ylim(-0.06, 1.25)
        beside.set_yticks([0.0, 0.5, 1.0])
        beside.set_ylabel("density / peak")
        axes.set_zorder(beside.get_zorder() + 1)
        axes.patch.set_visible(False)


class _Map:
    """Lines of equal V on a plane through the bottom, over the density in shades."""

    def __init__(self, view: View, cloud: _Cloud, pair: tuple[int, int]) -> None:
        self.view, self.cloud, self.pair = view, cloud, pair
        self._factor, unit = as_temperature(view.energy, "")
        self._levels = [float(f"{share * view.energy / self._factor:.2g}") for share in _SHARES]
        told = ", ".join(f"{level:g}" for level in self._levels)
        self.words = f"Lines: (V − V_min)/k_B = {told} {unit}. Plus sign: the bottom."
        if view.trap.top <= 1.2 * view.energy:
            self.words += " Dashed: the escape energy."
            self.words += self._escape_words()

    def _escape_words(self) -> str:
        escape = self.view.trap.landscape.escape
        if escape is None or self.view.trap.top < self.view.trap.landscape.depth:
            return ""
        inside = escape.position is not None and self.view.shows(escape.position)
        return f" {'Cross' if inside else 'Outside this picture'}: the trap leaks {escape.words}."

    def __call__(self, axes: Axes) -> None:
        view = self.view
        names = [view.trap.field.coordinates[place] for place in self.pair]
        x, y = (np.linspace(*view.ranges[place], _MESH) for place in self.pair)
        positions: dict[str, Any] = {**view.at_bottom(), names[0]: x[:, None], names[1]: y[None, :]}
        values = view.energies(positions).T
        (x_step, x_label), (y_step, y_label) = length(x, names[0]), length(y, names[1])
        x, y = x / x_step, y / y_step
        if self.cloud.peak:
            axes.contourf(
                x, y, self.cloud.at(values) / self.cloud.peak, levels=_DENSITIES, cmap="Blues", alpha=0.85
            )
        known = np.ma.masked_invalid(values / self._factor)
        lines = axes.contour(x, y, known, levels=self._levels, colors=INK, linewidths=1.0)
        axes.clabel(lines, fontsize=8, fmt="%.3g")
        if view.trap.top <= 1.2 * view.energy:
            axes.contour(
                x,
                y,
                known,
                levels=[view.trap.top / self._factor],
                colors=ORANGE,
                linestyles="--",
                linewidths=1.8,
            )
        bottom = [view.trap.r_min[place] for place in self.pair]
        axes.plot(bottom[0] / x_step, bottom[1] / y_step, "+", color=INK, markersize=11, markeredgewidth=2)
        self._mark_escape(axes, (x_step, y_step))
        axes.set_xlabel(x_label)
        axes.set_ylabel(y_label)

    def _mark_escape(self, axes: Axes, steps: tuple[float, float]) -> None:
        escape = self.view.trap.landscape.escape
        if escape is None or escape.position is None or not self.view.shows(escape.position):
            return
        if self.view.trap.top < self.view.trap.landscape.depth:
            return
        x, y = (escape.position[place] / step for place, step in zip(self.pair, steps, strict=True))
        axes.plot(x, y, "x", color=ORANGE, markersize=10, markeredgewidth=2.5)


def _cut_words(subject: Subject, view: View, name: str) -> str:
    trap = view.trap
    at = quantity(trap.r_min[trap.field.coordinates.index(name)], "m")
    depth = (
        "the place holds at every energy"
        if trap.top == np.inf
        else (f"the escape energy is k_B times {quantity(trap.top / K_B, 'K')}")
    )
    cloud = f", kT dotted ({quantity(subject.temperature, 'K')})" if subject.temperature else ""
    return f"Line: V through the bottom (plus sign at {name} = {at}); {depth}{cloud}."
