"""Numbers of an axis with the prefix that fits: the factor to SI, and the label."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.constants import K_B
from eoscore.show.prefix import fitting

if TYPE_CHECKING:
    from numpy.typing import NDArray

__all__ = ["as_temperature", "length", "temperature"]


def length(values: NDArray[np.float64], name: str) -> tuple[float, str]:
    """For positions in m."""
    return _fitted(values, "m", name)


def temperature(values: NDArray[np.float64], name: str) -> tuple[float, str]:
    """For temperatures in K."""
    return _fitted(values, "K", name)


def as_temperature(energy: float, name: str) -> tuple[float, str]:
    """For energies in J, shown as E/k_B; `energy` is a typical one."""
    factor, unit = fitting(energy / K_B, "K")
    return factor * K_B, f"{name} ({unit})" if name else unit


def _fitted(values: NDArray[np.float64], unit: str, name: str) -> tuple[float, str]:
    factor, shown = fitting(float(np.max(np.abs(values))), unit)
    return factor, f"{name} ({shown})"
