"""Route: a quadratic form with a linear tilt, in any orientation. Completing the square leaves an ellipsoid."""

from __future__ import annotations

from math import gamma, pi
from typing import TYPE_CHECKING

import numpy as np

from eoscore.formula.polynomial import polynomial
from eoscore.measure.landscape_record import multiplicity
from eoscore.measure.powers import Powers

if TYPE_CHECKING:
    from eoscore.formula.field import Field
    from eoscore.measure.base import FloatArray, Measure

__all__ = ["ball", "ellipsoid", "quadratic"]


def ball(d: int) -> float:
    """Volume of the ball of radius 1 in d dimensions (DLMF 5.19.4)."""
    return float(pi ** (d / 2) / gamma(d / 2 + 1))


def ellipsoid(hessian: FloatArray) -> float:
    """C of Omega = C v^{d/2} where V = x H x / 2 with a positive definite H (J/m^2)."""
    d = len(hessian)
    return float(ball(d) * np.prod(np.sqrt(2 / np.linalg.eigvalsh(hessian))))


def quadratic(field: Field) -> Measure | None:
    """Omega = C v^{d/2} of V = x H x / 2 + g x + c with H > 0, without walls; None for another field."""
    names = field.coordinates
    if field.walls or any(multiplicity(name) > 1 for name in names):
        return None
    terms = polynomial(field.formula, names)
    if not terms or max(sum(powers) for powers in terms) != 2:
        return None
    unit = np.eye(len(names), dtype=int)
    hessian = np.array([[terms.get(tuple((a + b).tolist()), 0.0) for a in unit] for b in unit])
    hessian += np.diag(np.diag(hessian))
    scale = np.abs(np.diag(hessian)).max()
    if not scale or np.linalg.eigvalsh(hessian / scale)[0] <= 1e-13:
        return None
    return Powers([(ellipsoid(hessian), len(hessian) / 2)], error=4e-15, route="closed form")
