"""A bound question as symbolic mathematics: Z1 of one particle, from the file's own symbols."""

from __future__ import annotations

from dataclasses import dataclass
from math import inf
from typing import TYPE_CHECKING, Any

import sympy as sp

from eoscore.language.facts import StatesFacts, TrapFacts, VolumeFacts
from eoscore.symbolic.axes import axes_of
from eoscore.symbolic.integrals import Boltzmann, boltzmann
from eoscore.symbolic.integrals.rule import BETA, Constant, Task
from eoscore.symbolic.partition import partition_of
from eoscore.symbolic.quantities import ENERGY, K_B, Model
from eoscore.symbolic.scaled import scaled
from eoscore.symbolic.signed import Signed

if TYPE_CHECKING:
    from collections.abc import Mapping

    from eoscore.language.binding import Binding
    from eoscore.state import HeldGas

__all__ = ["HBAR", "CutError", "Problem", "problem_of"]

HBAR = sp.Symbol("hbar", positive=True)
_SIGNS = {"bose": 1, "fermi": -1, "classical": 0}


class CutError(Exception):
    """The states end at an escape energy, so that no integral over all energies stands for them."""


@dataclass(frozen=True)
class Problem:
    """Z1 for the number and for the energy, as `Model` takes them, with the values of all symbols in SI.

    `steps` tells how Z1 came about, `conditions` must hold, `constants` names numbers without a closed form.
    `per` is the dimension of the unbounded place, where everything is per volume; 0 elsewhere.
    """

    number: sp.Expr
    energy: sp.Expr
    sign: int
    values: Mapping[str, float]
    steps: tuple[str, ...] = ()
    conditions: tuple[sp.Expr, ...] = ()
    constants: tuple[Constant, ...] = ()
    per: int = 0

    def model(self, *, condensed: bool) -> Model:
        """The sums of one side of the transition."""
        return Model(partition_of(self.number, self.sign), partition_of(self.energy, self.sign), condensed)


def problem_of(binding: Binding, held: HeldGas) -> Problem:
    """Z1 = levels x momenta x place.

    Raises `CutError` for a trap with an escape energy, `StopError` where an integral has no closed form.
    """
    if held.top < inf:
        raise CutError(
            f"states above {held.top:.6g} J are not counted, and no closed form is known for the rest"
        )
    known = Signed(binding.symbolic())
    if isinstance(binding.place, StatesFacts):
        whole = Boltzmann(sp.Integer(0), _of_states(known), ("rho(E) as given, its Laplace transform",))
        return _assembled(known, held, [whole])
    parts = [_momenta(known, held), _position(binding, known)]
    return _assembled(known, held, [part for part in parts if part is not None])


def _assembled(known: Signed, held: HeldGas, parts: list[Boltzmann]) -> Problem:
    degeneracy = known.of("degeneracy")
    one = sp.Mul(degeneracy if degeneracy is not None else 1, *(part.integral for part in parts))
    steps = [step for part in parts for step in part.steps]
    dispersion = held.gas.dispersion
    omegas = [sp.Symbol(name, positive=True) for name in dispersion.levels if name in dispersion.values]
    for omega in omegas:
        one *= 1 / (1 - sp.exp(-BETA * HBAR * omega))
        steps.append(f"levels n hbar {omega}: the geometric series 1/(1 - exp(-beta hbar {omega}))")
    # With nothing but levels the lowest one is the condensate, and is not counted among the excited.
    excited = one - degeneracy_of(degeneracy) if omegas and not parts else one
    number, energy = excited, one if not omegas else excited
    for branch in held.gas.branches:
        if branch.charge < 0:
            gap = 2 * _mass(known) * sp.Symbol("c", positive=True) ** 2
            number = one * (1 - sp.exp(-BETA * gap))
            energy = one * (1 + sp.exp(-BETA * gap))
            steps.append("antiparticles: the conserved number is particles minus antiparticles")
    return Problem(
        number,
        energy,
        _SIGNS[held.gas.statistics],
        _values(known, held),
        tuple(steps),
        tuple(condition for part in parts for condition in part.conditions),
        tuple(constant for part in parts for constant in part.constants),
        held.dimension if held.uniform else 0,
    )


def degeneracy_of(degeneracy: sp.Expr | None) -> sp.Expr:
    """The weight of the lowest level."""
    return sp.Integer(1) if degeneracy is None else degeneracy


def _values(known: Signed, held: HeldGas) -> dict[str, float]:
    from eoscore import constants

    always = {"hbar": constants.HBAR, "k_B": constants.K_B, "c": constants.C}
    own = {name: float(value) for name, value in held.gas.dispersion.values.items()}
    mass = {} if held.gas.mass is None else {"m": held.gas.mass}
    return {**always, **mass, **own, **known.values}


def _mass(known: Signed) -> sp.Expr:
    found = known.of("m")
    return sp.Symbol("m", positive=True) if found is None else found


def _momenta(known: Signed, held: HeldGas) -> Boltzmann | None:
    """K(beta) over (2 pi hbar)^d: inline energies by integration, plugins by their own closed form if they have one."""
    d, dispersion = held.dimension, held.gas.dispersion
    if d == 0:
        return None
    if known.energy is not None:
        walls = tuple(known.zone)
        done = boltzmann(Task(known.energy, axes_of(known.momenta, d), walls, _pairs(known, known.energy)))
        steps, integral = done.steps, done.integral / (2 * sp.pi * HBAR) ** d
        return Boltzmann(
            done.minimum, integral, ("momenta: " + "; ".join(steps),), done.conditions, done.constants
        )
    own = dispersion.symbolic_partition(BETA, d)
    if own is not None:
        integral = scaled(_named(own, known, held)).subs(sp.Symbol("h", positive=True), 2 * sp.pi * HBAR)
        return Boltzmann(sp.Integer(0), integral, (f"momenta: the partition function of {dispersion.name}",))
    energy = _named(dispersion.symbolic_energy(), known, held)
    momenta = [s for s in energy.free_symbols if s.name in dispersion.momentum]
    done = boltzmann(Task(energy, axes_of(sorted(momenta, key=str), d), (), _pairs(known, energy)))
    return Boltzmann(
        done.minimum, done.integral / (2 * sp.pi * HBAR) ** d, done.steps, done.conditions, done.constants
    )


def _named(expression: Any, known: Signed, held: HeldGas) -> Any:
    """A plugin's expression with its mass and parameters as this file's symbols."""
    renamed = {}
    for symbol in expression.free_symbols:
        if symbol.name == "m":
            renamed[symbol] = _mass(known)
        elif symbol.name in held.gas.dispersion.values:
            positive = held.gas.dispersion.values[symbol.name] > 0
            renamed[symbol] = sp.Symbol(symbol.name, **({"positive": True} if positive else {"real": True}))
    return expression.subs(renamed, simultaneous=True)


def _position(binding: Binding, known: Signed) -> Boltzmann | None:
    """Q(beta), the volume of a box, or nothing for the unbounded place (everything is then per volume)."""
    if isinstance(binding.place, TrapFacts):
        task = Task(
            known.potential, axes_of(known.coordinates), tuple(known.walls), _pairs(known, known.potential)
        )
        return boltzmann(task)
    if isinstance(binding.place, VolumeFacts):
        return Boltzmann(sp.Integer(0), known.of("volume"), ("place: the volume",))
    return None


def _pairs(known: Signed, expression: sp.Expr) -> tuple[tuple[sp.Symbol, float], ...]:
    values, free = known.values, expression.free_symbols if expression is not None else ()
    return tuple((s, values[s.name]) for s in sorted(free, key=str) if s.name in values)


def _of_states(known: Signed) -> sp.Expr:
    """The Laplace transform of rho(E); with an anchor, Z1 = N_c / zeta(a) (k_B T)^-a beta^-a."""
    if known.rho is not None:
        terms = sp.Add.make_args(sp.expand(known.rho))
        return sp.Add(*(sp.integrate(t * sp.exp(-BETA * ENERGY), (ENERGY, 0, sp.oo)) for t in terms))
    number, temperature = known.anchor or (sp.nan, sp.nan)
    exponent = known.of("exponent")
    return number / sp.zeta(exponent) * (K_B * temperature * BETA) ** -exponent
