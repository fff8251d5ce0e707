"""Quasi-homogeneous F without a closed prefactor: the power is exact, the prefactor an honest number."""

from __future__ import annotations

from math import prod
from typing import TYPE_CHECKING

import numpy as np
import sympy as sp

from eoscore.symbolic.algebra import monomial
from eoscore.symbolic.evaluate import in_double
from eoscore.symbolic.integrals.rule import BETA, Boltzmann, Solve, Task

if TYPE_CHECKING:
    from collections.abc import Callable

    from numpy.typing import NDArray

__all__ = ["homogeneous"]

_SIZES, _AGREED = (61, 121), 1e-12


def homogeneous(task: Task, solve: Solve) -> Boltzmann | None:  # noqa: ARG001 - every rule has the same signature
    """Powers k_i with F(s^k_i x_i) = s F; Omega(v) = Omega_1 v^k, k = sum of them.

    Omega_1 = (1/k) int over the unit sphere of (sum k_i u_i^2) F(u)^{-k}, by quadrature in each octant.
    """
    if task.walls or len(task.axes) not in (2, 3) or any(axis.radius or not axis.whole for axis in task.axes):
        return None
    symbols = [axis.symbol for axis in task.axes]
    powers = _scaling(task.function, symbols)
    function = task.function.subs(list(task.values))
    if powers is None or function.free_symbols != set(symbols):
        return None
    number = _omega(in_double(function, symbols), [float(p) for p in powers])
    if number is None:
        return None
    k = sp.Add(*powers)
    name = sp.Symbol("Omega_" + "".join(map(str, symbols)), positive=True)
    words = f"volume in m^{len(symbols)} where {task.function} < 1 J"
    told = ", ".join(f"{s} {p}" for s, p in zip(symbols, powers, strict=True))
    step = f"quasi-homogeneous with powers {told}: Omega(v) = {name} v^({k})"
    return Boltzmann(
        sp.Integer(0),
        sp.gamma(k + 1) * name * BETA**-k,
        (step,),
        (),
        ((name, number, words, frozenset(task.function.free_symbols)),),
    )


def _scaling(function: sp.Expr, symbols: list[sp.Symbol]) -> list[sp.Expr] | None:
    """Solve sum k_i n_i = 1 over the terms c prod |x_i|^n_i of F; the choice nearest to equal powers."""
    outward = {s: sp.Symbol(f"{s}'", positive=True) for s in symbols}
    rows = []
    for term in sp.Add.make_args(sp.expand(function)):
        laws = [monomial(term.subs(outward), outward[s]) for s in symbols]
        if any(law is None or not law[1].is_number for law in laws):
            return None
        rows.append([law[1] for law in laws if law is not None])
    matrix, ones = sp.Matrix(rows), sp.ones(len(rows), 1)
    powers = matrix.pinv() * ones
    return list(powers) if matrix * powers == ones and all(p > 0 for p in powers) else None


def _omega(function: Callable[..., NDArray[np.float64]], powers: list[float]) -> float | None:
    """Omega_1 in coordinates in which F is 1 at unit distance along each axis; None where it is not positive."""
    scales = [_scale(function, powers, i) for i in range(len(powers))]
    found = [prod(scales) * _over_sphere(function, powers, scales, size) for size in _SIZES]
    good = np.isfinite(found[1]) and found[1] > 0 and abs(found[0] - found[1]) < _AGREED * found[1]
    return found[1] if good else None


def _scale(function: Callable[..., NDArray[np.float64]], powers: list[float], axis: int) -> float:
    at = [np.array(float(i == axis)) for i in range(len(powers))]
    value = float(function(*at))
    return value ** -powers[axis] if value > 0 else 1.0


def _over_sphere(
    function: Callable[..., NDArray[np.float64]], powers: list[float], scales: list[float], size: int
) -> float:
    """Double exponential nodes in every quadrant or octant: kinks and weak singularities lie on its edges."""
    t = np.linspace(-3.2, 3.2, size)
    node = (1 + np.tanh(np.pi / 2 * np.sinh(t))) / 2
    weight = np.pi / 4 * np.cosh(t) / np.cosh(np.pi / 2 * np.sinh(t)) ** 2 * (t[1] - t[0])
    angle, step = np.pi / 2 * node, np.pi / 2 * weight
    around = np.concatenate([angle + quarter * np.pi / 2 for quarter in range(4)])
    steps = np.tile(step, 4)
    if len(powers) == 2:
        u, area = [np.cos(around), np.sin(around)], steps
    else:
        polar = np.concatenate([angle, angle + np.pi / 2])[:, None]
        u = [np.sin(polar) * np.cos(around), np.sin(polar) * np.sin(around), np.cos(polar) + 0 * around]
        area = np.tile(step, 2)[:, None] * steps * np.sin(polar)
    with np.errstate(all="ignore"):
        value = function(*(scale * x for scale, x in zip(scales, u, strict=True)))
        shape = sum(p * x**2 for p, x in zip(powers, u, strict=True))
        return float(np.sum(area * shape * value ** -sum(powers)) / sum(powers))
