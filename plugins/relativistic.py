"""The relativistic particle without its rest energy, E = sqrt(m^2 c^4 + p^2 c^2) - m c^2."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from eoscore.constants import C, H
from eoscore.errors import NoAnswerError
from eoscore.gas import Branch, Dispersion, Parameter
from eoscore.gas.momentum import ball
from eoscore.measure.powers import Powers
from eoscore.measure.sampled import Sampled

if TYPE_CHECKING:
    from eoscore.measure.base import Measure

__all__ = ["Relativistic"]


class Relativistic(Dispersion):
    """p^2 c^2 = E^2 + 2 E m c^2 holds exactly, so Omega(E) = ball(d) (E^2 + 2 E m c^2)^{d/2} / (h c)^d.

    The energy text is the same function without the difference of two nearly equal numbers. With antiparticles
    the conserved number is particles minus antiparticles, mu' = -mu - 2 m c^2 on this scale of energy.
    """

    name = "relativistic"
    origin = "H. E. Haber, H. A. Weldon, Phys. Rev. Lett. 46, 1497 (1981)"
    energy = "p^2/(m + sqrt(m^2 + (p/c)^2))"
    parameters = (
        Parameter(
            "antiparticles",
            "1",
            0.0,
            "1 where antiparticles are there too and only the difference is conserved",
        ),
    )

    def check(self) -> None:
        """See `Dispersion.check`."""
        super().check()
        if self.values["antiparticles"] not in (0, 1):
            came = self.values["antiparticles"]
            raise NoAnswerError(f"antiparticles = {came:g} came; write 1 for a gas with them, 0 without")

    def momentum_measure(self, d: int) -> Measure:
        """See `Dispersion.momentum_measure`; a sum of powers for d = 2 and for mass zero."""
        rest, factor = self.checked_mass * C**2, ball(d) / (H * C) ** d
        if rest == 0:
            return Powers([(factor, d)])
        if d == 2:
            return Powers([(factor, 2), (2 * rest * factor, 1)])
        return Sampled(
            lambda E: factor * (E * (E + 2 * rest)) ** (d / 2), d / 2, scale=rest, route="closed form"
        )

    @property
    def branches(self) -> tuple[Branch, ...]:
        """See `Dispersion.branches`."""
        particles = Branch(1, 0.0)
        if self.values["antiparticles"] == 0:
            return (particles,)
        return particles, Branch(-1, 2 * self.checked_mass * C**2)

    def symbolic_energy(self) -> Any:
        """The usual form, which SymPy reads best."""
        import sympy as sp

        p, m, c = sp.symbols("p m c", positive=True)
        return sp.sqrt(m**2 * c**4 + p**2 * c**2) - m * c**2

    def symbolic_partition(self, beta: Any, d: int) -> Any:
        """K(b) = 2 (m c/h)^d (2 pi/x)^{(d-1)/2} e^x K_{(d+1)/2}(x), x = b m c^2 (from DLMF 10.32.8)."""
        if self.mass == 0:
            return None
        import sympy as sp

        m, c, h = sp.symbols("m c h", positive=True)
        x = beta * m * c**2
        bessel = sp.exp(x) * sp.besselk(sp.Rational(d + 1, 2), x)
        return 2 * (m * c / h) ** d * (2 * sp.pi / x) ** sp.Rational(d - 1, 2) * bessel
