"""A measure asked millions of times: ln Omega between equal steps of ln v."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

if TYPE_CHECKING:
    from eoscore.measure.base import FloatArray, Measure

__all__ = ["Logarithms"]

ENTRIES = 2**14
DEEP = 2.0**-40  # of the scale: below the least entry Omega is a pure power


class Logarithms:
    """Omega(v) by cubic polynomials through values and slopes (`steep`), or by straight lines through values.

    With steps of some 3e-3 the former err by 1e-12 where Omega is smooth, the latter by 1e-6.
    """

    def __init__(self, measure: Measure, *, steep: bool) -> None:
        self._measure, self._steep = measure, steep
        self._last = 0.0
        self._first, self._step = 0.0, 1.0
        self._value = self._slope = np.empty(0)

    def __call__(self, energy: FloatArray) -> FloatArray:
        """Omega at energies (J) of any shape; 0 below 0."""
        most = float(energy.max(initial=0.0))
        if most > self._last or not self._value.size:
            self._make(2 * max(most, self._measure.scale))
        with np.errstate(divide="ignore"):
            place = (np.log(np.maximum(energy, 0.0)) - self._first) / self._step
        below = np.minimum(place, 0.0) * (self._step * self._measure.exponent)
        place = np.clip(place, 0.0, ENTRIES - 1)
        k = np.minimum(place.astype(np.intp), ENTRIES - 2)
        t, rise = place - k, self._value[k + 1] - self._value[k]
        log = self._value[k] + t * rise + below
        if self._steep:
            log += t * (1 - t) * ((1 - t) * (self._slope[k] - rise) - t * (self._slope[k + 1] - rise))
        return np.asarray(np.exp(log))

    def _make(self, last: float) -> None:
        measure = self._measure
        self._last = min(last, measure.top)
        logs = np.linspace(np.log(DEEP * min(measure.scale, self._last)), np.log(self._last), ENTRIES)
        self._first, self._step = float(logs[0]), float(logs[1] - logs[0])
        v = np.exp(logs)
        omega = measure.volume(v)
        self._value = np.log(omega)
        if self._steep:
            inside = np.minimum(v, self._last * (1 - 1e-12))
            self._slope = self._step * v * measure.density(inside) / omega
        if self._last == measure.top:
            self._last = np.inf
