"""The quantities of a state by name: how each is read, and its unit (d is the dimension of the place)."""

from __future__ import annotations

from typing import TYPE_CHECKING, NamedTuple

from eoscore.state import (
    beyond,
    bottom,
    collisions,
    fixed_number,
    geometry,
    saturation,
    shifts,
    thermal,
)

if TYPE_CHECKING:
    from collections.abc import Callable

    from eoscore.state.reading import Reading
    from eoscore.state.state import State

__all__ = ["QUANTITIES", "Quantity", "unit_in"]


class Quantity(NamedTuple):
    """A way to read a quantity off a state, and its unit."""

    read: Callable[[State, str], Reading]
    unit: str


def _at(name: str) -> Callable[[State, str], Reading]:
    """A quantity at positions, none of which is given."""

    def read(state: State, unit: str) -> Reading:  # noqa: ARG001  the unit is that of every reading of this name
        from eoscore.state.positioned import read_at

        return read_at(state, name, {})

    return read


QUANTITIES: dict[str, Quantity] = {
    "T_c": Quantity(saturation.critical_temperature, "K"),
    "N_c": Quantity(saturation.critical_number, "1"),
    "n_c": Quantity(saturation.critical_density, "m^-d"),
    "N": Quantity(thermal.number, "1"),
    "n": Quantity(thermal.density, "m^-d"),
    "T": Quantity(thermal.temperature, "K"),
    "mu": Quantity(thermal.potential, "J"),
    "S": Quantity(thermal.entropy, "J/K"),
    "U": Quantity(thermal.energy, "J"),
    "fugacity": Quantity(thermal.fugacity, "1"),
    "N_0": Quantity(thermal.condensate, "1"),
    "f_0": Quantity(thermal.fraction, "1"),
    "n_peak": Quantity(bottom.peak_density, "m^-d"),
    "lambda_T": Quantity(bottom.wavelength, "m"),
    "PSD": Quantity(bottom.phase_space_density, "1"),
    "C_N": Quantity(thermal.heat_capacity, "J/K"),
    "pressure": Quantity(bottom.pressure, "J/m^d"),
    "kappa_T": Quantity(bottom.compressibility, "m^d/J"),
    "depth": Quantity(geometry.depth, "J"),
    "eta": Quantity(geometry.eta, "1"),
    "freq": Quantity(geometry.frequencies, "Hz"),
    "r_min": Quantity(geometry.position, "m"),
    "V_min": Quantity(geometry.bottom_energy, "J"),
    "exponent": Quantity(saturation.exponent, "1"),
    "shift_size": Quantity(shifts.of_size, "1"),
    "shift_int": Quantity(shifts.of_interactions, "1"),
    "U_int": Quantity(beyond.interaction_energy, "J"),
    "E_release": Quantity(beyond.release_energy, "J"),
    "n_0_peak": Quantity(beyond.condensate_peak, "m^-d"),
    "R_TF": Quantity(beyond.radii, "m"),
    "rate_coll": Quantity(collisions.rate, "1/s"),
    "N_0_canonical": Quantity(fixed_number.mean, "1"),
    "Delta_N_0": Quantity(fixed_number.spread, "1"),
    "P_N_0": Quantity(fixed_number.probability, "1"),
    "V_at": Quantity(_at("V_at"), "J"),
    "n_at": Quantity(_at("n_at"), "m^-d"),
    "pressure_at": Quantity(_at("pressure_at"), "J/m^d"),
    "n_column": Quantity(_at("n_column"), "m^-(d-1)"),
}


def unit_in(name: str, dimension: int) -> str:
    """The unit of a quantity in a place of some dimension."""
    unit = QUANTITIES[name].unit
    if "(d-1)" in unit:
        return "1" if dimension == 1 else unit.replace("(d-1)", str(dimension - 1))
    return unit.replace("m^d", "m" if dimension == 1 else f"m^{dimension}").replace("-d", f"-{dimension}")
