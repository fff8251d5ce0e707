"""From a place to its levels."""

from __future__ import annotations

from math import inf, pi
from typing import TYPE_CHECKING

from eoscore.constants import HBAR, H
from eoscore.errors import NoAnswerError
from eoscore.formula.polynomial import polynomial
from eoscore.measure.landscape import survey
from eoscore.measure.landscape_separable import independent_parts
from eoscore.place import TrapPlace, VolumePlace
from eoscore.state.exact.direction import Oscillator
from eoscore.state.exact.ensemble import ExactLevels
from eoscore.state.exact.line import levels_on_line
from eoscore.state.exact.radial import radial_levels
from eoscore.state.exact.ring import Ring
from eoscore.state.exact.rotated import as_radial

if TYPE_CHECKING:
    from eoscore.formula.field import Field
    from eoscore.gas.gas import Gas
    from eoscore.place import Place
    from eoscore.state.exact.direction import Direction

__all__ = ["exact_levels"]


def exact_levels(gas: Gas, place: Place) -> ExactLevels:
    """The levels of free particles of a mass in a place; NoAnswerError where they are not to be had.

    Harmonic places in closed form, independent directions, V(rho) and V(r) by a spectral method; a `volume` is
    taken as a cube (square, line) with periodic ends.
    """
    mass = _mass(gas)
    if place.top < inf:
        raise NoAnswerError(
            "`levels exact` wants a trap that holds at every energy: a leaky one has no true levels"
        )
    if isinstance(place, VolumePlace):
        length = place.volume ** (1 / place.dimension)
        ring = Ring((2 * pi * HBAR / length) ** 2 / (2 * mass))
        return ExactLevels((ring,) * place.dimension, gas.statistics, gas.degeneracy)
    if not isinstance(place, TrapPlace):
        raise NoAnswerError("`levels exact` wants a potential or a volume")
    directions = tuple(d for part in independent_parts(place.field) for d in _of_part(part, mass))
    return ExactLevels(directions, gas.statistics, gas.degeneracy)


def _mass(gas: Gas) -> float:
    if gas.statistics == "fermi":
        raise NoAnswerError(
            "`levels exact` is for bosons and classical particles; fermions: `dispersion trapped`"
        )
    momenta = gas.momentum_measure(1).powers()
    free = momenta is not None and len(momenta) == 1 and momenta[0][1] == 0.5
    if not gas.mass or not free or gas.quanta or len(gas.branches) != 1:
        raise NoAnswerError("`levels exact` is for free particles of a mass m")
    expected = 2 * (2 * gas.mass) ** 0.5 / H * gas.degeneracy
    if momenta is not None and abs(momenta[0][0] / expected - 1) > 1e-9:
        raise NoAnswerError("`levels exact` is for E(p) = p^2/2m with the mass m of the gas")
    return gas.mass


def _of_part(field: Field, mass: float) -> tuple[Direction, ...]:
    bottom = survey(field).bottom
    if _harmonic(field) and bottom is not None and bottom.curvatures is not None:
        return tuple(Oscillator(HBAR * (bend / mass) ** 0.5) for bend in bottom.curvatures)
    if field.coordinates in (("x",), ("y",), ("z",)):
        return (levels_on_line(field, mass),)
    turned = field if field.coordinates in (("r",), ("rho",)) else as_radial(field)
    if turned is not None:
        return (radial_levels(turned, mass),)
    raise NoAnswerError(
        "exact levels are known of harmonic traps, independent directions, V(r) and V(rho); "
        f"{', '.join(field.coordinates)} depend on each other here"
    )


def _harmonic(field: Field) -> bool:
    """Whether V is a quadratic form without walls; a distance then comes as its square alone."""
    terms = None if field.walls else polynomial(field.formula, field.coordinates)
    if not terms or max(map(sum, terms)) != 2:
        return False
    distances = [i for i, name in enumerate(field.coordinates) if name in ("rho", "r")]
    rises = survey(field).bottom
    return (
        all(powers[i] in (0, 2) for powers, value in terms.items() if value for i in distances)
        and rises is not None
        and rises.curvatures is not None
        and min(rises.curvatures) > 0
    )
