"""The laws of a dispersion as a ready test, for the plugins of eoscore and for anyone's own.

    from eoscore.testing import check_dispersion

    def test_laws():
        check_dispersion(MyDispersion, values={"tunnelling": 6.6e-32, "spacing": 5e-7})

The references are made here from the energy formula alone, by SciPy's quadrature and root finding and by SymPy
at 30 digits, and share nothing with the measure of the dispersion.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from functools import cached_property
from typing import TYPE_CHECKING

import numpy as np

from eoscore.constants import K_B, M_U, H
from eoscore.errors import EoscoreError, LawError
from eoscore.gas.by_quadrature import SCAN, inside, partition, volume_below
from eoscore.gas.door import admitted
from eoscore.gas.rest import boltzmann_of

if TYPE_CHECKING:
    from collections.abc import Callable, Iterator, Mapping, Sequence

    from eoscore.gas.dispersion import Dispersion
    from eoscore.measure.base import FloatArray

__all__ = ["check_dispersion"]

STATISTICS = ("bose", "fermi", "classical")


def check_dispersion(
    dispersion: type[Dispersion] | Dispersion,
    *,
    mass: float | None = None,
    values: Mapping[str, float] | None = None,
    temperatures: Sequence[float] = (1e-7, 300.0),
    rises: bool = True,
    tolerance: float = 1e-8,
) -> None:
    """Try every law of `Dispersion` and raise LawError (an AssertionError) with all that are broken.

    dispersion: a class, which is built with `mass` (kg; 84 u if it needs one and none is given) and `values` (SI),
    or an instance. temperatures (K) set the energies that are tried. rises=False is for an energy whose least
    value is not at p = 0, or which has a dip. tolerance: relative, of closed forms against quadrature.
    PluginError where the class would not be let in at all.
    """
    if isinstance(dispersion, type):
        admitted(dispersion.name, dispersion)
        given = mass if mass is not None or not dispersion.needs_mass else 84 * M_U
        dispersion = dispersion(given, values)
    broken = list(_momentum_laws(dispersion, rises=rises))
    if not broken:
        top = 3 - len(dispersion.quanta)
        momentum = dispersion.field.coordinates
        for d in range(1, top + 1) if momentum == ("p",) else (len(momentum),):
            for T in temperatures:
                case = Case(dispersion, d, K_B * T, tolerance)
                for law in LAWS:
                    broken += [f"d = {d}, T = {T:g} K: {reason}" for reason in _tried(law, case)]
    if broken:
        raise LawError(dispersion.name, broken)


@dataclass(frozen=True)
class Case:
    """A dispersion in d dimensions at an energy kT (J)."""

    dispersion: Dispersion
    d: int
    kT: float  # noqa: N815 - the field's own name
    tolerance: float
    _kept: dict[float, tuple[float, float]] = field(default_factory=dict)

    @cached_property
    def betas(self) -> FloatArray:
        """Inverse energies about 1/kT."""
        return np.array([0.3, 1.0, 3.0]) / self.kT

    def partition(self, beta: float) -> tuple[float, float]:
        """K(b) in m^-d by quadrature of the energy formula, and the error of it."""
        if beta not in self._kept:
            value, error = partition(self.dispersion, beta, self.d)
            self._kept[beta] = value / H**self.d, error / H**self.d
        return self._kept[beta]


def _tried(law: Callable[[Case], Iterator[str]], case: Case) -> list[str]:
    try:
        return list(law(case))
    except EoscoreError as fault:
        return [f"{law.__name__.strip('_')} has no answer: {fault}"]


def _momentum_laws(dispersion: Dispersion, *, rises: bool) -> Iterator[str]:
    """Laws 1, 2, 6 and 7: what can be seen from the formula and the declarations."""
    first, *others = dispersion.branches
    if (first.charge, first.gap) != (1, 0) or any(b.charge != -1 or not b.gap >= 0 for b in others):
        yield f"branches = {dispersion.branches}; wanted particles (1, 0 J) first, then antiparticles (-1, gap >= 0)"
    held = [name for name in dispersion.levels if name in dispersion.values]
    if len(dispersion.quanta) != len(held) or not all(q > 0 for q in dispersion.quanta):
        yield f"quanta = {dispersion.quanta} for the levels {held}; wanted one positive energy for each"
    for axis, name in enumerate(dispersion.field.coordinates):
        momenta = [
            SCAN if i == axis else np.zeros_like(SCAN) for i in range(len(dispersion.field.coordinates))
        ]
        energy = dispersion.energy_at(*momenta)
        zone = inside(dispersion, momenta)
        if not np.all(np.isfinite(energy[zone])):
            yield f"the energy is not finite at {name} = {SCAN[zone][~np.isfinite(energy[zone])][0]:.3g} kg m/s"
        elif zone[-1] and not energy[-1] > np.max(energy[: -len(SCAN) // 10]):
            yield f"the energy does not rise beyond all bounds with {name}; it needs walls, the edge of a zone"
        elif rises and dispersion.field.coordinates == ("p",):
            down = np.diff(energy[zone]) < -1e-12 * np.abs(energy[zone][1:])
            if np.any(down):
                yield f"the energy falls with |p| at {SCAN[zone][1:][down][0]:.3g} kg m/s (allow it: rises=False)"


def _measure_law(case: Case) -> Iterator[str]:
    """Law 3: Omega by root finding of E(p), where the energy is isotropic; that it rises, always."""
    measure = case.dispersion.measure(case.d)
    energies = case.kT * np.array([0.1, 1.0, 10.0])
    volumes = measure.volume(energies)
    if not np.all(np.diff(volumes) >= 0) or not np.all(volumes > 0):
        yield f"momentum_measure: Omega = {volumes} at E = {energies} J; wanted rising positive numbers"
    if case.dispersion.field.coordinates == ("p",):
        for energy, volume in zip(energies, volumes, strict=True):
            wanted = volume_below(case.dispersion, energy, case.d) / H**case.d
            yield from _compared(f"momentum_measure: Omega({energy:.3g} J)", volume, wanted, case.tolerance)


def _partition_law(case: Case) -> Iterator[str]:
    """Laws 3 and 4: K(b) as given, and from the measure, against quadrature of the formula."""
    of_measure = boltzmann_of(case.dispersion.measure(case.d), 1 / case.betas, np.zeros(3))(case.betas)[0]
    given = np.asarray(case.dispersion.partition(case.betas, case.d))
    if given.shape != (3,):
        yield f"partition: shape {given.shape} came for three values of beta"
        return
    for beta, own, measured in zip(case.betas, given, np.real(of_measure), strict=True):
        wanted, error = case.partition(beta)
        tolerance = case.tolerance + 10 * error / wanted
        yield from _compared(f"partition: K({beta:.3g}/J)", own, wanted, tolerance)
        yield from _compared(
            f"momentum_measure: int e^(-bE) dOmega at b = {beta:.3g}/J", measured, wanted, tolerance
        )


def _pressure_laws(case: Case) -> Iterator[str]:
    """Law 5: P rises, n = dP/dmu (Richardson differences), the classical limit."""
    T, step = case.kT / K_B, 1e-3 * case.kT
    for kind in STATISTICS:
        mu = case.kT * np.array([-5.0, -1.0, -0.1])
        shifts = step * np.array([[-2.0], [-1.0], [1.0], [2.0]])
        P = case.dispersion.local_pressure(mu + shifts, T, case.d, kind)
        if not np.all(np.diff(P, axis=0) > 0):
            yield f"local_pressure of a {kind} gas does not rise with mu about {mu} J"
        slope = (P[0] - 8 * P[1] + 8 * P[2] - P[3]) / (12 * step)
        n = case.dispersion.local_density(mu, T, case.d, kind)
        for at, own, wanted in zip(mu, n, slope, strict=True):
            yield from _compared(
                f"local_density of a {kind} gas at mu = {at:.3g} J (dP/dmu)", own, wanted, 1e-6
            )
        thermal, off = case.partition(case.betas[1])
        wanted, loose = thermal * np.exp(-30.0), 1e-6 + 10 * off / thermal
        thin = case.dispersion.local_density(-30 * case.kT, T, case.d, kind)
        yield from _compared(f"local_density of a thin {kind} gas", float(thin), wanted, loose)
        thin = case.dispersion.local_pressure(-30 * case.kT, T, case.d, kind) / case.kT
        yield from _compared(f"local_pressure/kT of a thin {kind} gas", float(thin), wanted, loose)


def _symbolic_energy_law(case: Case) -> Iterator[str]:
    """Law 8: the energy in SymPy against the numbers, as rises above the energy at a very small momentum."""
    expression = case.dispersion.symbolic_energy()
    names = case.dispersion.field.coordinates
    along = [SCAN] * len(names)
    energy = np.where(inside(case.dispersion, along), case.dispersion.energy_at(*along), -np.inf)
    start = _evaluated(expression, case.dispersion, dict.fromkeys(names, SCAN[0]))
    for rise in (0.1, 1.0, 10.0):
        k = int(np.argmax(energy > min(energy[0] + rise * case.kT, 0.9 * np.max(energy))))
        wanted = _evaluated(expression, case.dispersion, dict.fromkeys(names, SCAN[k])) - start
        yield from _compared(f"energy at {SCAN[k]:.3g} kg m/s", float(energy[k] - energy[0]), wanted, 1e-9)


def _symbolic_partition_law(case: Case) -> Iterator[str]:
    import sympy as sp

    beta = sp.Symbol("beta", positive=True)
    expression = case.dispersion.symbolic_partition(beta, case.d)
    if expression is not None:
        exact = _evaluated(expression, case.dispersion, {"beta": case.betas[1]})
        wanted, off = case.partition(case.betas[1])
        yield from _compared("symbolic_partition", exact, wanted, case.tolerance + 10 * off / wanted)


def _evaluated(expression: object, dispersion: Dispersion, given: Mapping[str, float]) -> float:
    """A SymPy expression at SI values, exact numbers until it is worked out with 30 digits."""
    import sympy as sp

    from eoscore.language.scope import constant_scope

    values: dict[str, float] = {
        n: k.given.value for n, k in constant_scope().names.items() if k.given and k.given.value
    }
    values |= {"m": dispersion.mass or 0.0} | dispersion.values | dict(given)
    whole = sp.sympify(expression)
    free = {symbol: sp.Rational(values[symbol.name]) for symbol in whole.free_symbols}
    # factor by factor: SymPy 1.14 gives nan for a product of a vast and a tiny one
    return float(sp.Mul(*(factor.evalf(30) for factor in sp.Mul.make_args(whole.subs(free)))))


LAWS = (_measure_law, _partition_law, _pressure_laws, _symbolic_energy_law, _symbolic_partition_law)


def _compared(what: str, came: float, wanted: float, tolerance: float) -> Iterator[str]:
    if not abs(came - wanted) <= tolerance * abs(wanted):
        yield f"{what} = {came:.15g}; the formula gives {wanted:.15g} (relative tolerance {tolerance:.1g})"
