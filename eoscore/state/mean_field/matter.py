"""Whether a held gas can be treated by Hartree-Fock, and what of it the treatment needs."""

from __future__ import annotations

from math import inf, pi
from typing import TYPE_CHECKING

from eoscore.constants import HBAR
from eoscore.errors import NoAnswerError
from eoscore.measure import Powers
from eoscore.state.mean_field.box import BoxFilling
from eoscore.state.mean_field.cloud import Setting
from eoscore.state.mean_field.filling import Filling, collapse_number
from eoscore.state.mean_field.fluid import ORDER
from eoscore.state.shifts import is_flat

if TYPE_CHECKING:
    from eoscore.state.held import HeldGas

__all__ = ["filling_of"]


def filling_of(held: HeldGas) -> Filling:
    """The solver for a held gas; NoAnswerError where the treatment does not fit it."""
    gas = held.gas
    if gas.a_s is None:
        raise NoAnswerError(f"{gas.name} has no scattering length: give the gas a_s = ...")
    _fitting(held)
    mass = float(gas.mass or 0.0)
    terms = held.momentum.powers() or ()
    states = terms[0][0] if len(terms) == 1 and terms[0][1] == ORDER else None
    if not mass or states is None or gas.quanta or len(gas.branches) != 1:
        raise NoAnswerError("treatment hartree_fock is for free particles of a mass m in three dimensions")
    coupling = 4 * pi * HBAR**2 * gas.a_s / mass
    if is_flat(held):
        return BoxFilling(_box(held, coupling, states), None)
    if held.position is None:
        raise NoAnswerError("treatment hartree_fock needs a place with a potential or a volume")
    return Filling(Setting(held.position, held.top, coupling, states), _largest(held, mass, gas.a_s))


def _fitting(held: HeldGas) -> None:
    gas = held.gas
    if gas.statistics != "bose":
        raise NoAnswerError(
            f"treatment hartree_fock is for bosons; {gas.name} has `statistics {gas.statistics}`"
        )
    if held.dimension != 3:
        raise NoAnswerError(
            "treatment hartree_fock is for three dimensions: give the place x, y, z, or rho, z, or r"
        )
    if gas.degeneracy != 1:
        raise NoAnswerError("treatment hartree_fock knows one scattering length, and so one spin state")


def _box(held: HeldGas, coupling: float, states: float) -> Setting:
    if held.top < inf:
        raise NoAnswerError("treatment hartree_fock in a flat place counts all energies: take E_max out")
    content = float(held.position.volume(0.0)) if held.position is not None else (held.volume or 1.0)
    return Setting(Powers([(content, 0.0)]), inf, coupling, states)


def _largest(held: HeldGas, mass: float, a_s: float) -> float | None:
    if a_s >= 0:
        return inf
    try:
        return collapse_number(mass, a_s, tuple(held.frequencies()))
    except NoAnswerError:
        return None
