"""T_c from N_c(T) = N: explicit for one power, else an equation with its root."""

from __future__ import annotations

from typing import TYPE_CHECKING

import mpmath
import numpy as np
import sympy as sp

from eoscore.symbolic.evaluate import compiled
from eoscore.symbolic.quantities import K_B, NUMBER, TEMPERATURE, Model, critical_number

if TYPE_CHECKING:
    from collections.abc import Callable, Mapping

    from eoscore.symbolic.partition import Power

_COLDEST, _HOTTEST = 1e-30, 1e40  # K

__all__ = ["explicit", "heat_capacity_jump", "number_at", "number_of", "root"]


def explicit(power: Power) -> sp.Expr:
    """k_B T_c = (N / (size zeta(a)))^{1/a}."""
    return (NUMBER / (power.size * sp.zeta(power.exponent))) ** (1 / power.exponent) / K_B


def heat_capacity_jump(power: Power, exponent: float) -> sp.Expr:
    """C_N(T_c-) - C_N(T_c+) = a^2 zeta(a)/zeta(a - 1) N k_B for a > 2, and nothing below; `exponent` is a's value.

    V. Bagnato, D. E. Pritchard, D. Kleppner, Phys. Rev. A 35, 4354 (1987).
    """
    a = power.exponent
    if exponent <= 2:
        return sp.Integer(0)
    return a**2 * sp.zeta(a) / sp.zeta(a - 1) * NUMBER * K_B


def number_at(model: Model, values: Mapping[sp.Symbol, float]) -> Callable[[float], float]:
    """N_c as a function of T in K."""
    return number_of(critical_number(model), values)


def number_of(
    expression: sp.Expr, values: Mapping[sp.Symbol, float], free: sp.Symbol = TEMPERATURE
) -> Callable[[float], float]:
    """An expression as a function of one of its symbols, T in K by default, in SI units."""
    symbols = [s for s in expression.free_symbols if s != free]
    function = compiled(expression, [free, *symbols])
    fixed = [mpmath.mpf(values[s]) for s in symbols]

    def at(temperature: float) -> float:
        with mpmath.workdps(20):
            return float(mpmath.re(function(mpmath.mpf(temperature), *fixed)))

    return at


def root(count: Callable[[float], float], number: float) -> float:
    """T in K with N_c(T) = number; N_c rises with T, so that a bracket is found by stepping in log T.

    Raises ValueError where none is found between 1e-30 K and 1e40 K.
    """
    from scipy.optimize import brentq  # 0.3 s to import, and only an implicit T_c wants it

    def excess(log_t: float) -> float:
        found = count(float(np.exp(log_t)))
        return float(np.log(found / number)) if found > 0 else -np.inf

    low, high = np.log(1e-7), np.log(1e-7)
    step = np.log(10.0)
    while excess(low) > 0 and low > np.log(_COLDEST):
        low -= step
    while excess(high) < 0 and high < np.log(_HOTTEST):
        high += step
    if excess(high) < 0 or excess(low) > 0:
        msg = f"N_c(T) = N has no root between {_COLDEST:g} K and {_HOTTEST:g} K"
        raise ValueError(msg)
    if not (np.isfinite(excess(low)) and excess(low) <= 0 <= excess(high)):
        low = high - step
    return float(np.exp(brentq(excess, low, high, xtol=1e-15, rtol=1e-14)))
