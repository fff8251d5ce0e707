"""Small labs for the tests of meaning: the dispersions that a text may name, and texts that are right."""

from __future__ import annotations

from typing import TYPE_CHECKING

import pytest

from eoscore.language import read
from eoscore.language.signature import Parameter, Signature

if TYPE_CHECKING:
    from eoscore.formula import Formula
    from eoscore.language.program import Program

LEVELS = ("omega_x", "omega_y", "omega_z")
DISPERSIONS = {
    "free": Signature("free", (), needs_mass=True),
    "relativistic": Signature(
        "relativistic", (Parameter("antiparticles", "1", 0.0, "1 with antiparticles"),), needs_mass=True
    ),
    "trapped": Signature(
        "trapped",
        tuple(Parameter(name, "rad/s", None, "level") for name in LEVELS),
        needs_mass=True,
        levels=LEVELS,
    ),
    "band": Signature(
        "band", (Parameter("J", "J", None, "hopping energy"),), needs_mass=False, momentum=("px", "py")
    ),
}

GAS = "gas sr { isotope Sr-84 }\n"
TRAP = "trap bowl { f = 100 Hz\n V(r) = m/2*(2*pi*f)^2*r^2 }\n"
BOX = "trap box { volume = 1 mm3 }\n"


def near(value: float, rel: float = 1e-12) -> object:
    """Equal up to a relative error alone: pytest's own default lets any two numbers below 1e-12 be equal."""
    return pytest.approx(value, rel=rel, abs=0)


def program(text: str, **options: object) -> Program:
    """The program of a text with the dispersions above."""
    return read(text, dispersions=DISPERSIONS, **options)  # type: ignore[arg-type]


def value_of(expression: str, use: str) -> float:
    """The SI value of an expression that uses a shelf file."""
    lab = program(f"use {use}\ngas sr {{ isotope Sr-84 }}\nanswer = {expression}")
    return lab.bind("sr", None).value("answer")[0]


def formula_of(expression: str, use: str) -> Formula:
    """An expression of x, y, z (m) that uses a shelf file, as a formula; its factor of 1 in SI makes it an energy."""
    trap = f"trap t {{ V(x, y, z) = {expression} }}"
    return program(f"use {use}\n{GAS}{trap}").bind("sr", "t").place.field.formula
