"""The contract of a dispersion: how the energy of one particle depends on its momentum."""

from __future__ import annotations

from abc import ABC, abstractmethod
from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING, Any, ClassVar

import numpy as np

from eoscore.errors import NoAnswerError
from eoscore.gas.local import local_density, local_pressure
from eoscore.gas.momentum import momentum_measure
from eoscore.gas.rest import boltzmann_of
from eoscore.language.signature import Parameter, Signature

if TYPE_CHECKING:
    from collections.abc import Mapping

    from numpy.typing import ArrayLike

    from eoscore.formula.field import Field
    from eoscore.measure.base import FloatArray, Measure

__all__ = ["Branch", "Dispersion", "Parameter"]


@dataclass(frozen=True)
class Branch:
    """Particles (charge 1) or antiparticles (charge -1): mu' = charge mu - gap, gap in J; both feel the trap."""

    charge: int
    gap: float


class Dispersion(ABC):
    """The energy of one particle as a function of its momentum, and all that follows from it alone.

    A plugin is a subclass with `name`, `energy` and `origin`; the rest has a general numerical default, which is
    always a safe answer and which a plugin may replace by a closed form. An instance belongs to one gas: `mass`
    in kg (None for a gas without one) and `values`, the SI value of every parameter that was given or has a
    default. It never changes after it was built.

    Laws (`eoscore.testing.check_dispersion` tries them all):

    1. `energy` is a Tarn expression in J, of the momenta in `momentum` (kg m/s), the parameters, `m` and the
       constants; finite and real inside the `walls`. Its least value counts as zero everywhere else.
    2. The volume of momentum space below an energy is finite for every energy: an energy that repeats itself or
       stays bounded needs `walls`, Tarn expressions in kg m/s that are positive inside the zone.
    3. `momentum_measure(d)`: Omega(E) = int d^dp / h^d over E(p) - min E < E, states per m^d of one spin state;
       it rises with E and equals what quadrature of the formula gives.
    4. `partition(beta, d)`: K(b) = int d^dp / h^d e^{-b(E - min E)} in m^-d for b in 1/J of any shape; positive,
       falling with b, equal to int e^{-bE} dOmega.
    5. `local_pressure(mu, T, d, statistics)` in J/m^d rises with mu, `local_density(...)` in m^-d is its
       derivative by mu; both tend to (kT, 1) K(1/kT) e^{mu/kT} where e^{mu/kT} is small.
    6. `branches`: one for particles alone; with antiparticles a second of charge -1.
    7. `quanta`: hbar omega in J of each direction held as oscillator levels; 3 to 7 then speak of the other
       directions. Each name in `levels` is a parameter that holds one direction where it is given.
    8. `symbolic_energy()` is the energy in SymPy, over symbols named as in `energy`; `symbolic_partition(...)` is
       K(b), or None, which is always safe. Both agree with the numbers.
    """

    name: ClassVar[str]
    origin: ClassVar[str]  # where the formula comes from: a paper, a handbook, "this laboratory"
    parameters: ClassVar[tuple[Parameter, ...]] = ()
    momentum: ClassVar[tuple[str, ...]] = ("p",)  # or ("px",), ("px", "py"), ("px", "py", "pz")
    walls: ClassVar[tuple[str, ...]] = ()
    levels: ClassVar[tuple[str, ...]] = ()
    needs_mass: ClassVar[bool] = True

    def __init__(self, mass: float | None = None, values: Mapping[str, float] | None = None) -> None:
        self.mass = mass
        defaults = {p.name: p.default for p in self.parameters if p.default is not None}
        self.values: dict[str, float] = {**defaults, **(values or {})}
        self._measures: dict[int, Measure] = {}
        self._complete()
        self.check()

    @property
    @abstractmethod
    def energy(self) -> str:
        """The energy as a Tarn expression; a plain class attribute will do."""

    def _complete(self) -> None:
        known = {p.name for p in self.parameters}
        if strange := sorted(self.values.keys() - known):
            raise NoAnswerError(f"the dispersion {self.name} has no parameter {strange[0]}; {_listed(known)}")
        missing = known - self.values.keys() - set(self.levels)
        if missing:
            raise NoAnswerError(f"the dispersion {self.name} needs {', '.join(sorted(missing))}")

    def check(self) -> None:
        """Refuse, with NoAnswerError, values that make no sense; by default a missing or negative mass alone."""
        if self.mass is not None and not self.mass >= 0:
            raise NoAnswerError(f"m = {self.mass:g} kg came; a mass is not negative")
        if self.needs_mass:
            _ = self.checked_mass

    @property
    def checked_mass(self) -> float:
        """The mass in kg, for a dispersion that needs one."""
        if self.mass is None:
            raise NoAnswerError(f"the dispersion {self.name} needs the mass of the particle; none is given")
        return self.mass

    @classmethod
    def signature(cls) -> Signature:
        """What the language must know to read this dispersion in a file."""
        return Signature(cls.name, cls.parameters, cls.needs_mass, cls.levels, cls.momentum)

    @cached_property
    def field(self) -> Field:
        """The energy as a formula of the momenta, with the walls of its zone."""
        from eoscore.gas.energy_text import compiled

        return compiled(self)

    def energy_at(self, *momenta: ArrayLike) -> FloatArray:
        """The energy in J at momenta in kg m/s (one array per name in `momentum`), as the formula counts it."""
        given = dict(zip(self.field.coordinates, momenta, strict=True))
        return np.asarray(self.field.formula.evaluate(given))

    def momentum_measure(self, d: int) -> Measure:
        """Momentum-space volume over h^d below an energy, per m^d of place (law 3).

        NoAnswerError where this energy has no sense in d dimensions, or where the volume is infinite. A plugin
        replaces this one; everybody asks `measure`, which makes it once.
        """
        return momentum_measure(self.field, d)

    def measure(self, d: int) -> Measure:
        """`momentum_measure(d)`, kept."""
        if d not in self._measures:
            self._measures[d] = self.momentum_measure(d)
        return self._measures[d]

    def partition(self, beta: ArrayLike, d: int) -> FloatArray:
        """K(b) in m^-d, of the shape of b (law 4)."""
        beta = np.asarray(beta, dtype=float)
        rest = boltzmann_of(self.measure(d), 1 / beta.ravel(), np.zeros(beta.size))
        return np.real(rest(beta)[0]).astype(float)

    @property
    def branches(self) -> tuple[Branch, ...]:
        """Particles alone, unless a plugin knows of antiparticles (law 6)."""
        return (Branch(1, 0.0),)

    @property
    def quanta(self) -> tuple[float, ...]:
        """No direction is held as levels, unless a plugin says so (law 7)."""
        return ()

    def local_density(self, mu: ArrayLike, T: ArrayLike, d: int, statistics: str) -> FloatArray:
        """Particles per m^d and spin state at mu (J, from the least energy) and T (K), broadcast (law 5).

        Inf where a Bose gas at mu = 0 has no finite density; NoAnswerError for bosons at mu > 0.
        """
        return local_density(self.measure(d), mu, T, statistics)

    def local_pressure(self, mu: ArrayLike, T: ArrayLike, d: int, statistics: str) -> FloatArray:
        """Pressure of one spin state in J/m^d at mu and T as in `local_density` (law 5)."""
        return local_pressure(self.measure(d), mu, T, statistics)

    def symbolic_energy(self) -> Any:
        """The energy as a SymPy expression over real symbols named as in `energy` (law 8)."""
        from eoscore.gas.energy_text import symbolic

        return symbolic(self)

    def symbolic_partition(self, beta: Any, d: int) -> Any:  # noqa: ARG002 - SymPy expressions
        """K(b) as a SymPy expression of the positive symbol `beta`, or None where no closed form is known (law 8)."""
        return None


def _listed(known: set[str]) -> str:
    return f"its parameters are {', '.join(sorted(known))}" if known else "it has no parameters"
