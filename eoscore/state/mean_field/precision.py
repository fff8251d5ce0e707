"""How far the integrals of a cloud may be wrong."""

from __future__ import annotations

from dataclasses import replace
from math import inf
from typing import TYPE_CHECKING

import numpy as np

from eoscore.state.mean_field.panels import NODES

if TYPE_CHECKING:
    from eoscore.state.mean_field.cloud import Cloud

__all__ = ["ROUNDING", "relative_error"]

FINER = NODES + 8  # of the rule that the usual one is held against
ROUNDING = 1e-12  # and the phases as they are met


def relative_error(cloud: Cloud) -> float:
    """Bound of the relative error of N, U (of its parts: relative to the whole) and S at the mu and T of a cloud.

    The rule is held against a finer one; the error of Omega below each energy counts as much as there are particles.
    """
    finer = replace(cloud, order=FINER)
    if not finer.number > 0:
        return inf
    energy = finer.kinetic + finer.potential + abs(finer.interaction)
    apart = [abs(cloud.number / finer.number - 1)]
    apart += [abs(a - b) / energy for a, b in _energies(cloud, finer)]
    if finer.entropy > 0:
        apart.append(abs(cloud.entropy / finer.entropy - 1))
    density = sum(cloud.densities) * cloud.nodes[1]
    below = cloud.setting.measure.error_below(cloud.nodes[0])
    return max(apart) + ROUNDING + 2 * float(np.sum(density * below) / np.sum(density))


def _energies(cloud: Cloud, other: Cloud) -> tuple[tuple[float, float], ...]:
    return (
        (cloud.kinetic, other.kinetic),
        (cloud.potential, other.potential),
        (cloud.interaction, other.interaction),
    )
