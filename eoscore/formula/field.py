"""An energy function of coordinates with its walls: V(r) of a place, E(p) of a particle."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from eoscore.formula.expression import Formula

__all__ = ["Field"]


@dataclass(frozen=True)
class Field:
    """An energy in J as a formula of coordinates, with hard walls.

    coordinates: `("x",)`, `("x", "y")`, `("rho",)`, `("x", "y", "z")`, `("rho", "z")` or `("r",)` in m;
    momenta `("p",)`, `("px",)`, `("px", "py")` or `("px", "py", "pz")` in kg m/s.
    walls: formulas of the same coordinates, each positive inside; outside any of them the energy is infinite.
    """

    coordinates: tuple[str, ...]
    formula: Formula
    walls: tuple[Formula, ...] = ()
