"""Numbers for an axis: in a unit with the prefix that fits, evenly or by factors."""

from __future__ import annotations

import re
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from eoscore.show.prefix import fitting, written

if TYPE_CHECKING:
    from numpy.typing import NDArray

__all__ = ["Scale"]

_STRAIGHT = 1e-6  # relative spread of steps that counts as none
_DECADES = 30.0  # a quantity that spans more than this factor is drawn by factors


@dataclass(frozen=True)
class Scale:
    """The numbers, the factor that turns them into SI, the label with the unit, and whether steps are factors."""

    name: str
    values: NDArray[np.float64]
    factor: float
    unit: str
    logarithmic: bool

    @classmethod
    def of(cls, values: NDArray[np.float64], unit: str, name: str) -> Scale:
        """The scale of SI values; nan is passed over."""
        sizes = np.abs(values[np.isfinite(values) & (values != 0.0)])
        factor, shown = fitting(float(np.median(sizes)), unit) if sizes.size else (1.0, unit)
        if sizes.size and factor == 1.0 and not 1e-3 <= float(sizes.max()) < 1e5:
            power = int(np.floor(np.log10(sizes.max())))
            by_factors = _by_factors(values)
            if not by_factors:  # a power of ten in the label reads better than one at the end of the axis
                shown = f"10^{{{power}}}" if unit == "1" else f"10^{{{power}}} {unit}"
                factor = 10.0**power
        return cls(name, values / factor, factor, shown, _by_factors(values))

    @property
    def label(self) -> str:
        """`T (nK)`; the name alone where the unit is 1."""
        if self.unit == "1":
            return self.name
        unit = self.unit
        if unit.startswith("10^"):
            power, _, rest = unit.partition(" ")
            unit = f"${power}$ {_raised(rest)}".rstrip()
        else:
            unit = _raised(unit)
        return f"{self.name} ({unit})"

    def text(self, value: float) -> str:
        """A number of this scale with its unit, such as `N = 1e5` or `P = 0.6 W`."""
        if self.unit.startswith("10^") or self.unit == "1":
            rest = self.unit.partition(" ")[2]
            return f"{self.name} = {written(value * self.factor)} {rest}".rstrip()
        return f"{self.name} = {written(value)} {self.unit}"


def _raised(unit: str) -> str:
    """`m$^{-3}$` for `m^-3`."""
    return re.sub(r"\^(-?\d+)", r"$^{\1}$", unit)


def _by_factors(values: NDArray[np.float64]) -> bool:
    """Whether the steps of an axis are factors, or the values span many."""
    flat = values[np.isfinite(values)]
    if flat.size < 2 or flat.min() <= 0.0:
        return False
    if values.ndim == 1 and flat.size == values.size and flat.size > 2:
        steps, ratios = np.diff(flat), np.diff(np.log(flat))
        if np.ptp(ratios) <= _STRAIGHT * np.abs(ratios).max():
            return True
        if np.ptp(steps) <= _STRAIGHT * np.abs(steps).max():
            return False
    return bool(flat.max() > _DECADES * flat.min())
