"""Fields of x, y, z (or two of them) that depend on the distance from the origin alone."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.formula import variable
from eoscore.formula.field import Field

if TYPE_CHECKING:
    from eoscore.formula import Formula
    from eoscore.state.reading import FloatArray

__all__ = ["as_radial"]

RADII = np.geomspace(1e-9, 1e-2, 71)  # m, at which directions are compared
ALIKE = 1e-11  # relative, of what the formula varies by up to there
SEED = 7


def as_radial(field: Field) -> Field | None:
    """The same as a field of r (of rho in two dimensions); None where directions differ, at some thousand points."""
    names = field.coordinates
    if len(names) not in (2, 3) or not set(names) <= {"x", "y", "z"}:
        return None
    ways = np.random.default_rng(SEED).normal(size=(len(names), 24, 1))
    points = RADII * ways / np.linalg.norm(ways, axis=0)
    if not all(_turns(formula, names, points) for formula in (field.formula, *field.walls)):
        return None
    radius = "r" if len(names) == 3 else "rho"
    along: dict[str, Formula | float] = {names[0]: variable(radius), **dict.fromkeys(names[1:], 0.0)}
    return Field((radius,), field.formula.substitute(along), tuple(w.substitute(along) for w in field.walls))


def _turns(formula: Formula, names: tuple[str, ...], points: FloatArray) -> bool:
    """Whether the values at all directions (second axis) are those along the first coordinate."""
    values = formula.evaluate(dict(zip(names, points, strict=True)))
    nothing = np.zeros_like(RADII)
    along = formula.evaluate({name: RADII if name == names[0] else nothing for name in names})
    start = formula.evaluate(dict.fromkeys(names, 0.0))
    scale = np.abs(along) + np.abs(start)
    off = np.broadcast_to(np.abs(values - along), points.shape[1:])
    return bool(np.all((off <= ALIKE * scale) | ~np.isfinite(scale)))
