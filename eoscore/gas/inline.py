"""A dispersion written in the user's file: `E(p) = ...` or `E(px, py, pz) = ... where ...`."""

from __future__ import annotations

from typing import TYPE_CHECKING, ClassVar

from eoscore.gas.dispersion import Dispersion

if TYPE_CHECKING:
    from eoscore.formula.field import Field

__all__ = ["Inline"]


class Inline(Dispersion):
    """The energy formula of a gas block; its walls are the edge of a momentum zone."""

    name: ClassVar[str] = "inline"
    origin: ClassVar[str] = "the user's file"
    needs_mass: ClassVar[bool] = False

    def __init__(self, mass: float | None, energy: Field) -> None:
        super().__init__(mass)
        self.__dict__["field"] = energy  # stands in for what a plugin compiles from its text

    @property
    def energy(self) -> str:
        """The momenta it is a function of; the text itself stays with the file."""
        return f"E({', '.join(self.field.coordinates)})"
