"""The frame in which a well looks alike in all directions."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.formula import evaluate_many, gradient

if TYPE_CHECKING:
    from eoscore.formula.field import Field
    from eoscore.measure.base import FloatArray
    from eoscore.measure.landscape_record import Minimum
    from eoscore.measure.region import Region

__all__ = ["frame_of"]

ASIDE = 1e-10  # m beside the tip of a cone
DEGREES = {"quadratic": 2, "ring": 2, "cone": 1}


def frame_of(field: Field, bottom: Minimum, region: Region, end: float) -> tuple[int, FloatArray]:
    """The power with which V rises from a bottom (0: unknown), and the frame in which it does so in all directions.

    On a pass V rises along some axes of the frame as it falls along others, by `end` at a distance of 1.
    """
    degree = DEGREES.get(bottom.kind, 0)
    frame = _well_frame(bottom) if degree == 2 else _cone_frame(field, bottom) if degree == 1 else None
    if frame is not None:
        return degree, frame
    curvature, axes = np.linalg.eigh(np.nan_to_num(np.asarray(bottom.hessian)))
    if curvature[0] < 0 and np.abs(curvature).min() > 1e-10 * np.abs(curvature).max():
        return 0, np.asarray(axes * np.sqrt(2 * end / np.abs(curvature)))
    return 0, np.diag(np.ptp(region.points(beyond=True), axis=0) / 2)


def _well_frame(bottom: Minimum) -> FloatArray | None:
    """Columns along the principal axes, so long that V = q^2/2 along each; None where V is level along one."""
    curvature, axes = np.linalg.eigh(np.nan_to_num(np.asarray(bottom.hessian)))
    return np.asarray(axes / np.sqrt(curvature)) if curvature[0] > 1e-10 * curvature[-1] else None


def _cone_frame(field: Field, bottom: Minimum) -> FloatArray | None:
    """Columns along the coordinates, so long that V = q on the average of both sides of the tip; None without one."""
    d = len(field.coordinates)
    steps = ASIDE * np.concatenate([np.eye(d), -np.eye(d)])
    points = dict(zip(field.coordinates, (np.array(bottom.position) + steps).T, strict=True))
    slopes = [
        np.broadcast_to(g, 2 * d) for g in evaluate_many(gradient(field.formula, field.coordinates), points)
    ]
    steepness = np.array([(slope[i] - slope[d + i]) / 2 for i, slope in enumerate(slopes)])
    return np.diag(1 / steepness) if np.all(steepness > 0) else None
