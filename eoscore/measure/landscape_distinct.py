"""Which of many points are the same place."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

if TYPE_CHECKING:
    from eoscore.measure.landscape_chart import Array

__all__ = ["distinct"]


def distinct(points: Array, values: Array, tolerance: float) -> list[int]:
    """Indices of points that differ, lowest value first; those closer than `tolerance` (m) count once."""
    kept: list[int] = []
    for k in np.argsort(values, kind="stable").tolist():
        near = kept and np.min(np.linalg.norm(points[kept] - points[k], axis=1)) <= tolerance
        if np.isfinite(values[k]) and not near:
            kept.append(k)
    return kept
