"""A cosine over its zone: the tight-binding band, modified Bessel I."""

from __future__ import annotations

import sympy as sp

from eoscore.symbolic.integrals.rule import BETA, Boltzmann, Solve, Task
from eoscore.symbolic.scaled import ScaledI

__all__ = ["band"]


def band(task: Task, solve: Solve) -> Boltzmann | None:  # noqa: ARG001 - every rule has the same signature
    """int over one period of e^{beta J cos(k x)} dx = (2 pi/k) I_0(beta J) (DLMF 10.32.1)."""
    if len(task.axes) != 1 or task.walls or task.axes[0].radius:
        return None
    axis = task.axes[0]
    x = axis.symbol
    wave = sp.Wild("k", exclude=[x], properties=[lambda k: k != 0])
    size = sp.Wild("J", exclude=[x], properties=[lambda j: j != 0])
    constant, varying = sp.expand(_linear(task.function)).as_independent(x, as_Add=True)
    match = varying.match(size * sp.cos(wave * x))
    if match is None or not axis.high.is_finite:
        return None
    periods = sp.cancel((axis.high - axis.low) * match[wave] / (2 * sp.pi))
    amplitude = sp.Abs(match[size])
    if not periods.is_integer:
        return None
    integral = (axis.high - axis.low) * ScaledI(0, 0, BETA * amplitude)
    return Boltzmann(
        constant - amplitude,
        integral,
        (f"{x}: a cosine over its zone, modified Bessel I_0(beta*{amplitude})",),
    )


def _linear(function: sp.Expr) -> sp.Expr:
    """Squares of sines and cosines as cosines of twice the angle."""
    angle = sp.Wild("angle")
    halved = function.replace(sp.sin(angle) ** 2, (1 - sp.cos(2 * angle)) / 2)
    return halved.replace(sp.cos(angle) ** 2, (1 + sp.cos(2 * angle)) / 2)
