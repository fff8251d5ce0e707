"""Potentials for the tests of landscapes, in SI units: invented traps of the usual kinds."""

from __future__ import annotations

import math

from eoscore.formula import Formula, call, constant, variable
from eoscore.formula.field import Field

x, y, z, rho, r = map(variable, ("x", "y", "z", "rho", "r"))
K_B, U, G = 1.380649e-23, 1.66053906892e-27, 9.80665
RB87, SR84 = 86.909180529 * U, 83.9134191 * U
E, S = 1e-28, 1e-5  # a depth of some uK, a width of 10 um


def exp(a: Formula) -> Formula:
    return call("exp", a)


def sagging(depth: float, waist: float = 50e-6, mass: float = RB87) -> Field:
    """A Gaussian of `depth` in K with gravity along z."""
    return Field(("z",), -depth * K_B * exp(-2 * z**2 / waist**2) + mass * G * z)


def beam(d2: Formula, along: Formula, power: float, waist: float) -> Formula:
    """Intensity of a Gaussian beam at 1064 nm, W/m^2."""
    reach = math.pi * waist**2 / 1064e-9
    spread = 1 + (along / reach) ** 2
    return 2 * power / (math.pi * waist**2) / spread * exp(-2 * d2 / (waist**2 * spread))


def crossed(power: float = 1.5, waist: float = 55e-6, gravity: float = G) -> Field:
    """Two beams along x and y that cross: 7.4e-37 J m^2/W, strontium."""
    light = beam(y**2 + z**2, x, power, waist) + beam(x**2 + z**2, y, power, waist)
    return Field(("x", "y", "z"), -7.4e-37 * light + SR84 * gravity * z)


def single(gravity: float, waist: float = 30e-6, power: float = 1.5) -> Field:
    """One beam along x."""
    return Field(("x", "y", "z"), -7.4e-37 * beam(y**2 + z**2, x, power, waist) + SR84 * gravity * z)


def turned(field: Field, frame: list[list[float]], shift: tuple[float, ...] = (0.0, 0.0, 0.0)) -> Field:
    """The field in rotated and shifted coordinates."""
    moved = [axis - s for axis, s in zip((x, y, z), shift, strict=True)]
    new: dict[str, Formula | float] = {
        name: sum((frame[i][j] * moved[j] for j in range(3)), constant(0)) for i, name in enumerate("xyz")
    }
    walls = tuple(wall.substitute(new) for wall in field.walls)
    return Field(field.coordinates, field.formula.substitute(new), walls)
