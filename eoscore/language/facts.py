"""What a binding hands to physics: plain SI numbers and formulas, no text, no units."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import TYPE_CHECKING, Literal

from eoscore.formula.field import Field

if TYPE_CHECKING:
    from collections.abc import Mapping

    from eoscore.formula import Formula

__all__ = ["Field", "GasFacts", "PlaceFacts", "StatesFacts", "TrapFacts", "UniformFacts", "VolumeFacts"]


@dataclass(frozen=True)
class GasFacts:
    """A gas: mass in kg, scattering length in m, parameters of the dispersion in SI.

    `energy` is the inline E(p), None where `dispersion` is a plugin's name.
    """

    name: str
    statistics: Literal["bose", "fermi", "classical"]
    degeneracy: float
    mass: float | None
    a_s: float | None
    treatment: str | None
    dispersion: str
    parameters: Mapping[str, float] = field(hash=False)
    energy: Field | None


@dataclass(frozen=True)
class TrapFacts:
    """A potential, and the energy (J, from the bottom) above which states are cut, if any.

    `levels` is "exact" where the true levels are counted, None for the semiclassical count.
    """

    name: str
    field: Field
    e_max: float | None
    levels: str | None = None


@dataclass(frozen=True)
class VolumeFacts:
    """A flat box of any shape: its content in m^dimension."""

    name: str
    volume: float
    dimension: int
    e_max: float | None
    levels: str | None = None


@dataclass(frozen=True)
class StatesFacts:
    """A density of states: a formula of E in 1/J, or an exponent with a measured point (N_c at T in K)."""

    name: str
    density: Formula | None
    exponent: float | None
    anchor_number: float | None
    anchor_temperature: float | None


@dataclass(frozen=True)
class UniformFacts:
    """The unbounded place; its dimension comes with the density that a question gives."""

    name: str = "uniform"


PlaceFacts = TrapFacts | VolumeFacts | StatesFacts | UniformFacts
