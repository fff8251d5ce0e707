"""The free particle, E = p^2/(2 m)."""

from __future__ import annotations

from typing import Any

from eoscore.constants import H
from eoscore.errors import NoAnswerError
from eoscore.gas import Dispersion
from eoscore.gas.momentum import ball
from eoscore.measure.powers import Powers

__all__ = ["Free"]


class Free(Dispersion):
    """Omega(E) = ball(d) (2 m E)^{d/2} / h^d, and K(b) = (2 pi m / (h^2 b))^{d/2}."""

    name = "free"
    origin = "L. D. Landau, E. M. Lifshitz, Statistical Physics, Part 1, section 56"
    energy = "p^2/(2*m)"

    def check(self) -> None:
        """See `Dispersion.check`."""
        super().check()
        if self.mass == 0:
            raise NoAnswerError(
                "m = 0 came; without a mass the energy is E(p) = c*p, or the dispersion relativistic"
            )

    def momentum_measure(self, d: int) -> Powers:
        """See `Dispersion.momentum_measure`."""
        return Powers([(ball(d) * (2 * self.checked_mass) ** (d / 2) / H**d, d / 2)])

    def symbolic_partition(self, beta: Any, d: int) -> Any:
        """See `Dispersion.symbolic_partition`."""
        import sympy as sp

        m, h = sp.symbols("m h", positive=True)
        return (2 * sp.pi * m / (h**2 * beta)) ** sp.Rational(d, 2)
