"""Oscillator levels in one, two or three directions, free in the others: a gas between dimensions."""

from __future__ import annotations

from eoscore.constants import HBAR
from eoscore.errors import NoAnswerError
from eoscore.gas import Parameter

from .free import Free

__all__ = ["Trapped"]

AXES = "xyz"


class Trapped(Free):
    """The directions whose frequency is given are held as exact levels n hbar omega, n = 0, 1, 2, ...

    Energies count from the lowest level: the zero-point energy is left out. The trap has the other coordinates.
    """

    name = "trapped"
    origin = "L. D. Landau, E. M. Lifshitz, Quantum Mechanics, section 23"
    parameters = tuple(
        Parameter(
            f"omega_{axis}", "rad/s", None, f"angular frequency along {axis}, held as levels; free without it"
        )
        for axis in AXES
    )
    levels = tuple(f"omega_{axis}" for axis in AXES)

    def check(self) -> None:
        """See `Dispersion.check`."""
        super().check()
        if not self.values:
            raise NoAnswerError(f"trapped holds no direction; give at least one of {', '.join(self.levels)}")
        for name, omega in self.values.items():
            if not omega > 0:
                raise NoAnswerError(
                    f"{name} = {omega:g} rad/s came; a level needs an angular frequency above zero"
                )

    @property
    def quanta(self) -> tuple[float, ...]:
        """See `Dispersion.quanta`; in the order x, y, z."""
        return tuple(HBAR * self.values[name] for name in self.levels if name in self.values)
