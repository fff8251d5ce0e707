"""Where on the curve the gas is: N_c(T) with the point asked for, f_0(T) and C_N(T) at the number asked for."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.constants import K_B
from eoscore.errors import EoscoreError
from eoscore.show.factors import mark_factors
from eoscore.show.prefix import quantity, written
from eoscore.show.report.axis import temperature
from eoscore.show.report.picture import BLUE, INK, ORANGE
from eoscore.show.report.raised import raised

if TYPE_CHECKING:
    from collections.abc import Iterator

    from matplotlib.axes import Axes
    from numpy.typing import NDArray

    from eoscore.show.report.markup import Markup
    from eoscore.show.report.picture import Gallery
    from eoscore.show.report.subject import Subject

__all__ = ["curve_pictures"]

_POINTS = 81
_SIDE = 1e-9  # how close to T_c, relative, its two sides are looked at


def curve_pictures(subject: Subject, gallery: Gallery) -> Iterator[Markup]:
    """The curves that the gas has; none where no temperature is in play."""
    middle = subject.critical or subject.temperature
    if subject.held is None or middle is None:
        return
    density = subject.number == "n"
    asked = subject.temperature or middle
    wide = np.geomspace(min(middle / 10.0, asked / 2.0), max(middle * 10.0, asked * 2.0), _POINTS)
    critical = _read(subject, "n_c" if density else "N_c", T=wide)
    if critical is not None:
        yield gallery.draw(*_critical_words(subject), _Critical(subject, wide, critical))
    if subject.number is None:
        return
    number = np.asarray(subject.given[subject.number])
    around = _around(middle, subject.critical)
    for name, unit in (("f_0", "1"), ("C_N", "k_B per particle")):
        values = _read(subject, name, T=around, **{subject.number: number})
        if values is not None and np.any(values > 0.0):
            scale = K_B * float(number) if name == "C_N" else 1.0
            title = f"{subject.name}: {name} against T"
            shown = (
                "condensate fraction"
                if name == "f_0"
                else "heat capacity at fixed number, in k_B per particle"
            )
            words = (
                f"The {shown} at {subject.number} = {written(float(number))}{_of(subject)}.{_marks(subject)}"
            )
            yield gallery.draw(title, words, _Curve(subject, around, values / scale, name, unit))


def _around(middle: float, critical: float | None) -> NDArray[np.float64]:
    """Temperatures in K about one; both sides of T_c among them, for what jumps there."""
    even = np.linspace(0.04, 1.8, _POINTS) * middle
    sides = np.array([]) if critical is None else critical * np.array([1.0 - _SIDE, 1.0 + _SIDE])
    return np.sort(np.concatenate([even[np.abs(even / middle - 1.0) > _SIDE], sides]))


def _of(subject: Subject) -> str:
    return raised(f" m^-{subject.held.dimension}") if subject.number == "n" and subject.held else ""


def _marks(subject: Subject) -> str:
    words = f" Dashed: T_c = {quantity(subject.critical, 'K')}." if subject.critical else ""
    return words + (f" Dot: T = {quantity(subject.given['T'], 'K')}." if "T" in subject.given else "")


def _read(subject: Subject, name: str, **given: NDArray[np.float64]) -> NDArray[np.float64] | None:
    """Values over the temperatures; None where there are none."""
    if subject.held is None:
        return None
    try:
        values = np.asarray(subject.held.find((name,), given)[name].value, dtype=float)
    except EoscoreError:
        return None
    return values if np.isfinite(values).sum() > 1 else None


def _critical_words(subject: Subject) -> tuple[str, str]:
    what = "critical density" if subject.number == "n" else "critical number"
    title = f"{subject.name}: {what} against T"
    words = f"Above the line the gas condenses; both axes run by factors.{_asked_words(subject)}"
    return title, words


def _asked_words(subject: Subject) -> str:
    if subject.number is None:
        return ""
    number = f"{subject.number} = {written(subject.given[subject.number])}{_of(subject)}"
    if "T" in subject.given:
        return f" Dot: the point asked for, {number} at T = {quantity(subject.given['T'], 'K')}."
    return f" Dot: {number} at its T_c." if subject.critical else ""


class _Critical:
    """N_c (or n_c) against T by factors, with the point asked for."""

    def __init__(self, subject: Subject, T: NDArray[np.float64], values: NDArray[np.float64]) -> None:
        self.subject, self.T, self.values = subject, T, values
        dimension = subject.held.dimension if subject.held else 3
        self.label = f"n_c (m$^{{-{dimension}}}$)" if subject.number == "n" else "N_c"

    def __call__(self, axes: Axes) -> None:
        step, label = temperature(self.T, "T")
        axes.loglog(self.T / step, self.values, color=BLUE)
        if self.subject.number is not None and self.subject.temperature is not None:
            at = (self.subject.temperature / step, self.subject.given[self.subject.number])
            axes.plot(*at, "o", color=ORANGE, markeredgecolor=INK, markersize=8)
        mark_factors(axes.xaxis)
        axes.set_xlabel(label)
        axes.set_ylabel(self.label)


class _Curve:
    """A quantity against T at the number asked for, with T_c and the temperature asked for."""

    def __init__(
        self, subject: Subject, T: NDArray[np.float64], values: NDArray[np.float64], name: str, unit: str
    ) -> None:
        self.subject, self.T, self.values, self.name, self.unit = subject, T, values, name, unit

    def __call__(self, axes: Axes) -> None:
        step, label = temperature(self.T, "T")
        axes.plot(self.T / step, self.values, color=BLUE)
        if self.subject.critical:
            axes.axvline(self.subject.critical / step, color=INK, linestyle="--", linewidth=1.0)
        asked = self.subject.given.get("T")
        if asked is not None and self.T[0] <= asked <= self.T[-1]:
            at = float(np.interp(asked, self.T, self.values))
            axes.plot(asked / step, at, "o", color=ORANGE, markeredgecolor=INK, markersize=8)
        axes.set_ylim(bottom=0.0)
        axes.set_xlabel(label)
        axes.set_ylabel(self.name if self.unit == "1" else f"{self.name} ({self.unit})")
