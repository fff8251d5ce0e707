"""Quasi-homogeneous F without a closed prefactor: the power is exact, the prefactor an honest number."""

from __future__ import annotations

import itertools
from typing import TYPE_CHECKING

import mpmath
import sympy as sp

from eoscore.symbolic.evaluate import compiled
from eoscore.symbolic.integrals.rule import BETA, Boltzmann, Solve, Task

if TYPE_CHECKING:
    from collections.abc import Callable

__all__ = ["homogeneous"]

_POINTS = (sp.Rational(3, 7), sp.Rational(-5, 11), sp.Rational(13, 17), sp.Rational(-2, 3))


def homogeneous(task: Task, solve: Solve) -> Boltzmann | None:  # noqa: ARG001 - every rule has the same signature
    """Powers k_i with F(s^k_i x_i) = s F by Euler's identity; Omega(v) = Omega_1 v^k, k = sum of them.

    Omega_1 = (1/k) int over the unit sphere of (sum k_i u_i^2) F(u)^{-k}, by quadrature in each octant.
    """
    if task.walls or len(task.axes) not in (2, 3) or any(axis.radius or not axis.whole for axis in task.axes):
        return None
    symbols = [axis.symbol for axis in task.axes]
    function = task.function.subs(list(task.values))
    powers = _scaling(function, symbols) if function.free_symbols == set(symbols) else None
    if powers is None:
        return None
    k = sp.Add(*powers)
    number = _omega(compiled(function, symbols), [float(p) for p in powers])
    if number is None:
        return None
    name = sp.Symbol("Omega_1", positive=True)
    words = f"volume in m^{len(symbols)} where {task.function} < 1 J"
    step = (
        f"quasi-homogeneous with powers {dict(zip(symbols, powers, strict=True))}: Omega(v) = Omega_1 v^{k}"
    )
    return Boltzmann(sp.Integer(0), sp.gamma(k + 1) * name * BETA**-k, (step,), (), ((name, number, words),))


def _scaling(function: sp.Expr, symbols: list[sp.Symbol]) -> list[sp.Expr] | None:
    """Solve sum k_i x_i F_i = F at rational points; check at others."""
    points = list(itertools.permutations(_POINTS, len(symbols)))
    rows = []
    for point in points[:12]:
        at = dict(zip(symbols, point, strict=True))
        slopes = [sp.N((s * sp.diff(function, s)).subs(at), 40) for s in symbols]
        rows.append((*slopes, sp.N(function.subs(at), 40)))
    matrix = mpmath.matrix([[mpmath.mpf(str(x)) for x in row[:-1]] for row in rows])
    target = mpmath.matrix([mpmath.mpf(str(row[-1])) for row in rows])
    try:
        found = mpmath.lu_solve(matrix, target)
    except (ZeroDivisionError, ValueError):
        return None
    powers = [sp.nsimplify(float(p), rational=True, tolerance=1e-12) for p in found]
    for row in rows:
        got = sum(float(p) * float(x) for p, x in zip(powers, row[:-1], strict=True))
        if abs(got - float(row[-1])) > 1e-10 * abs(float(row[-1])):
            return None
    return powers if all(p > 0 for p in powers) else None


def _omega(function: Callable[..., mpmath.mpf], powers: list[float]) -> float | None:
    """Omega_1 by Gauss-Legendre in every quadrant or octant, kinks only on the coordinate planes."""
    k = sum(powers)
    quarter = mpmath.pi / 2

    def at(*u: mpmath.mpf) -> mpmath.mpf:
        value = function(*u)
        if value <= 0:
            msg = "not positive"
            raise ValueError(msg)
        return sum(p * c**2 for p, c in zip(powers, u, strict=True)) * value**-k / k

    def circle(t: mpmath.mpf) -> mpmath.mpf:
        return at(mpmath.cos(t), mpmath.sin(t))

    def ball(f: mpmath.mpf, t: mpmath.mpf) -> mpmath.mpf:
        s = mpmath.sin(t)
        return s * at(s * mpmath.cos(f), s * mpmath.sin(f), mpmath.cos(t))

    around = [i * quarter for i in range(5)]
    try:
        if len(powers) == 2:
            return float(mpmath.quad(circle, around, method="gauss-legendre"))
        return float(
            mpmath.quad(ball, around, [0, quarter, 2 * quarter], method="gauss-legendre", maxdegree=5)
        )
    except (ValueError, ZeroDivisionError):
        return None
