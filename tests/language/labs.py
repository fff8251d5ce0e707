"""Small labs for the tests of meaning: the dispersions that a text may name, and texts that are right."""

from __future__ import annotations

from typing import TYPE_CHECKING

from eoscore.language import read
from eoscore.language.signature import Parameter, Signature

if TYPE_CHECKING:
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


def program(text: str, **options: object) -> Program:
    """The program of a text with the dispersions above."""
    return read(text, dispersions=DISPERSIONS, **options)  # type: ignore[arg-type]
