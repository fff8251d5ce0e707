"""From a gas and a place to the ensembles of the gas held there."""

from __future__ import annotations

from math import inf
from typing import TYPE_CHECKING

from eoscore.state.branches import WithAntiparticles
from eoscore.state.classical import Classical
from eoscore.state.closed import ClosedBose
from eoscore.state.nodes import NodeBose
from eoscore.state.steps import StepFermi

if TYPE_CHECKING:
    from eoscore.gas.gas import Gas
    from eoscore.measure.base import Measure
    from eoscore.state.ensemble import Ensemble

__all__ = ["ensemble_of"]


def ensemble_of(gas: Gas, measure: Measure) -> Ensemble:
    """The ensemble of a gas over its combined measure: closed where it can be, with antiparticles where it has them."""
    particles = _of(gas.statistics, measure)
    gaps = [branch.gap for branch in gas.branches if branch.charge < 0]
    return WithAntiparticles(particles, particles, gaps[0]) if gaps else particles


def _of(statistics: str, measure: Measure) -> Ensemble:
    if statistics == "fermi":
        return StepFermi(measure)
    if statistics == "classical":
        return Classical(measure)
    return ClosedBose(measure) if measure.powers() is not None and measure.top == inf else NodeBose(measure)
