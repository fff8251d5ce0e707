"""Local quantities of a Hartree-Fock state."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.state.mean_field.fluid import ORDER

if TYPE_CHECKING:
    from eoscore.state.mean_field.cloud import Cloud
    from eoscore.state.mean_field.filling import Filled
    from eoscore.state.reading import FloatArray

__all__ = [
    "compressibility",
    "condensate_peak",
    "phase_space_density",
    "pressure",
    "pressure_at",
    "thermal_peak",
]


def thermal_peak(fill: Filled) -> float:
    """The largest thermal density, m^-3: at the bottom, or just outside a condensate, which pushes it away."""
    cloud, fluid = fill.cloud, fill.cloud.fluid
    if cloud.edge > 0:
        return fluid.density * float(fluid.ideal(ORDER, np.array([fluid.onset.thermal]))[0])
    return float(cloud.parts(np.zeros(1))[1][0])


def condensate_peak(fill: Filled) -> float:
    """The density of the condensate at the bottom, m^-3; of one in the Thomas-Fermi limit."""
    return float(fill.cloud.parts(np.zeros(1))[0][0])


def phase_space_density(fill: Filled) -> float:
    """`thermal_peak` lambda_T^3; the density of the ideal gas is A F, A = 1/lambda_T^3."""
    return thermal_peak(fill) / fill.cloud.fluid.density


def pressure(fill: Filled) -> float:
    """At the bottom, J/m^3."""
    return float(pressure_at(fill.cloud, np.zeros(1))[0])


def pressure_at(cloud: Cloud, v: FloatArray) -> FloatArray:
    """Where the potential is v J above the bottom, J/m^3."""
    fluid = cloud.fluid
    y, inside = cloud.split(v)
    scale = fluid.kT * fluid.density
    if fluid.G == 0:
        return scale * fluid.ideal(ORDER + 1, y)
    return scale * fluid.pressure(y, np.where(inside, y, 0.0))


def compressibility(fill: Filled) -> float:
    """(dn/dmu)/n^2 at the bottom, m^3/J."""
    fluid = fill.cloud.fluid
    y, inside = fill.cloud.split(np.zeros(1))
    slope = float(fluid.slope(y, inside)[0]) * fluid.density / fluid.kT
    density = sum(float(part[0]) for part in fill.cloud.parts(np.zeros(1)))
    return slope / density**2
