"""The density of a gas as a function of V - V_min, from one profile of one state."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.constants import K_B
from eoscore.errors import NoAnswerError
from eoscore.show.prefix import quantity
from eoscore.show.report.raised import raised

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from eoscore.show.report.subject import Subject
    from eoscore.show.report.view import View

__all__ = ["Cloud"]

_LINE = 801  # points along each coordinate among which those of the profile are chosen
_POINTS = 72  # of the profile: each may cost the engine a millisecond


class Cloud:
    """The density of the non-condensed gas; `peak` is 0 where there is none to show."""

    def __init__(self, subject: Subject, view: View) -> None:
        self.peak, self.kT, self.words, self.map_words = 0.0, 0.0, "", ""
        state = subject.state
        if state is None or subject.temperature is None:
            return
        try:
            profile = state.profile(**_positions(view))
        except NoAnswerError:
            return
        order = np.argsort(profile.potential)
        known = order[np.isfinite(profile.potential[order]) & (profile.density[order] > 0.0)]
        finite = profile.density[known][np.isfinite(profile.density[known])]
        if not finite.size:
            return
        diverges = finite.size < known.size  # a flat gas that condenses, at the bottom
        self._roots = np.sqrt(np.maximum(profile.potential[known], 0.0))
        self._densities = np.minimum(profile.density[known], finite.max())
        self.peak, self.kT = float(self._densities.max()), K_B * subject.temperature
        self._say(subject, view, diverges=diverges)

    def _say(self, subject: Subject, view: View, *, diverges: bool) -> None:
        unit = f"m^-{view.trap.dimension}"
        state, temperature = subject.state, quantity(subject.temperature or 0.0, "K")
        of = ", without the condensate, which has no width in this picture" if state and state.f_0 else ""
        peak = "it diverges at the bottom" if diverges else f"its peak is {raised(quantity(self.peak, unit))}"
        self.words = f" Shaded: density of the non-condensed gas at T = {temperature}{of}; {peak}."
        self.map_words = (
            " Shades: the density is above 2, 10, 30, 50, 70 and 90 % of its peak, from the rim inwards."
        )

    def at(self, energies: NDArray[np.float64]) -> NDArray[np.float64]:
        """Density in m^-d where V - V_min has these values in J; 0 behind walls. It bends with the root of V."""
        roots = np.sqrt(np.maximum(np.nan_to_num(energies, nan=np.inf), 0.0))
        return np.asarray(np.interp(roots, self._roots, self._densities, right=0.0))


def _positions(view: View) -> dict[str, NDArray[np.float64]]:
    """Points on the coordinate lines through the bottom whose energies rise in even steps of their root."""
    bottom = view.inside()
    lines: dict[str, list[NDArray[np.float64]]] = {name: [] for name in bottom}
    heights = []
    for place, name in enumerate(bottom):
        x = np.linspace(*view.ranges[place], _LINE)
        x[np.argmin(np.abs(x - bottom[name]))] = bottom[name]
        energies = view.energies({**bottom, name: x})
        held = view.holds(energies, (int(np.argmin(np.abs(x - bottom[name]))),))
        heights.append(np.where(held, energies, np.nan))
        for each, values in lines.items():
            values.append(x if each == name else np.full(_LINE, bottom[each]))
    energies = np.concatenate(heights)
    wanted = np.nanmax(np.minimum(energies, 1.3 * view.energy)) * np.linspace(0.0, 1.0, _POINTS) ** 2
    chosen = np.unique([int(np.nanargmin(np.abs(energies - each))) for each in wanted])
    return {name: np.concatenate(values)[chosen] for name, values in lines.items()}
