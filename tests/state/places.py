"""Places that are nothing but their measure, and gases of one line, so that the state room is tried alone."""

from __future__ import annotations

from math import inf, pi

from eoscore.constants import HBAR, K_B, M_U
from eoscore.gas import gas_of
from eoscore.language.facts import GasFacts
from eoscore.measure import Measure, Powers, Sampled
from eoscore.place import Place, UniformPlace, VolumePlace
from eoscore.state import hold

MASS = 86.909180529 * M_U


class Bare(Place):
    """A place of some measure."""

    def __init__(self, measure: Measure, dimension: int = 3, top: float = inf) -> None:
        self.name, self.dimension, self.top = "bare", dimension, top
        self._measure = measure.cut(top)

    @property
    def measure(self) -> Measure:
        return self._measure


def gas(statistics="bose", *, degeneracy=1.0, a_s=None, mass=MASS, dispersion="free", **parameters):
    facts = GasFacts("probe", statistics, degeneracy, mass, a_s, None, dispersion, parameters, None)
    return gas_of(facts)


def power(p, top=inf, d=3):
    """V = k x 1 nK (r/10 um)^p in d dimensions."""
    ball = {1: 2.0, 2: pi, 3: 4 * pi / 3}[d] * (1e-5) ** d
    return Bare(Powers([(ball * (1e-9 * K_B) ** (-d / p), d / p)]), d, top)


def harmonic(f=100.0, top=inf, d=3):
    """Isotropic, f in Hz."""
    ball = {1: 2.0, 2: pi, 3: 4 * pi / 3}[d]
    k = MASS * (2 * pi * f) ** 2 / 2
    return Bare(Powers([(ball * k ** (-d / 2), d / 2)]), d, top)


def sampled(place, scale=1e-30):
    """The same place known by its function alone."""
    measure = place.measure
    return Bare(Sampled(measure.volume, measure.exponent, scale=scale, route="function"), place.dimension)


def bent(V0=2e-30):
    """Omega = C (v^1.5 + v^2 / V0^0.5): no single power."""
    C = 1e-15 / (1e-9 * K_B) ** 1.5
    return Bare(Powers([(C, 1.5), (C / V0**0.5, 2.0)]))


def box(volume=1e-13, d=3):
    return VolumePlace("box", volume, d)


def uniform(d=3):
    return UniformPlace(d)


def held(place, statistics="bose", **facts):
    return hold(gas(statistics, **facts), place)


LEVEL = HBAR * 2 * pi * 100.0
