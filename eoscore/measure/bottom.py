"""The power with which a measure begins, read from its values."""

from __future__ import annotations

from fractions import Fraction
from math import inf
from typing import TYPE_CHECKING

import numpy as np

if TYPE_CHECKING:
    from eoscore.measure.base import FloatArray

__all__ = ["beginning"]

BENT = 0.01  # change of d ln Omega / d ln v at which the pure power ends


def beginning(v: FloatArray, omega: FloatArray) -> tuple[float, float]:
    """Exponent of Omega at the least of ascending energies v, and where Omega leaves that power (inf: nowhere).

    Exponents within 1e-6 of a fraction with a denominator of at most 24 are taken as that fraction.
    """
    v, omega = v[omega > 0], omega[omega > 0]
    slopes = np.diff(np.log(omega)) / np.diff(np.log(v))
    steady = float(np.median(slopes[:5]))
    near = Fraction(steady).limit_denominator(24)
    exponent = float(near) if abs(float(near) - steady) < 1e-6 else steady
    bent = np.flatnonzero(np.abs(slopes - exponent) > BENT)
    return exponent, float(v[bent[0]]) if bent.size else inf
