"""Whether an expression is zero, a power, or free of a symbol, without `sympy.simplify`.

`simplify` costs seconds on what a look at the tree, or at three points, settles in a millisecond.
"""

from __future__ import annotations

from random import Random
from typing import TYPE_CHECKING

import mpmath
import sympy as sp

from eoscore.symbolic.evaluate import compiled

if TYPE_CHECKING:
    from collections.abc import Callable, Iterable

__all__ = ["constant_in", "log_slope", "monomial", "vanishes"]

_POINTS, _DIGITS, _ZERO = 3, 40, mpmath.mpf(10) ** -28


def monomial(expression: sp.Expr, x: sp.Symbol) -> tuple[sp.Expr, sp.Expr] | None:
    """(c, n) with expression = c x^n for every x > 0 and c, n free of x; None where it is no such power."""
    if x not in expression.free_symbols:
        return expression, sp.Integer(0)
    if expression == x:
        return sp.Integer(1), sp.Integer(1)
    if isinstance(expression, sp.Pow) and x not in expression.exp.free_symbols:
        inner = monomial(expression.base, x)
        return None if inner is None else (inner[0] ** expression.exp, inner[1] * expression.exp)
    if isinstance(expression, sp.Abs):
        inner = monomial(expression.args[0], x)
        return None if inner is None else (sp.Abs(inner[0]), inner[1])
    if not isinstance(expression, (sp.Mul, sp.Add)):
        return None
    parts = [monomial(part, x) for part in expression.args]
    found = [part for part in parts if part is not None]
    if len(found) < len(parts):
        return None
    if isinstance(expression, sp.Mul):
        return sp.Mul(*(c for c, _ in found)), sp.expand(sp.Add(*(n for _, n in found)))
    first = found[0][1]
    same = all(sp.expand(n - first) == 0 for _, n in found)
    return (sp.Add(*(c for c, _ in found)), first) if same else None


def vanishes(expression: sp.Expr) -> bool:
    """Whether an expression is zero for all values of its symbols: to 28 digits at three scattered points."""
    if expression == 0:
        return True
    symbols = sorted(expression.free_symbols, key=str)
    terms = sp.Add.make_args(expression)
    try:
        functions = [compiled(term, symbols) for term in terms]
        return all(_zero_at(functions, symbols, seed) for seed in range(_POINTS))
    except (ValueError, TypeError, ZeroDivisionError, ArithmeticError):
        return False


def _zero_at(functions: list[Callable[..., mpmath.mpf]], symbols: list[sp.Symbol], seed: int) -> bool:
    random = Random(seed)  # noqa: S311 - points anywhere will do
    with mpmath.workdps(_DIGITS):
        at = [mpmath.mpf(random.uniform(0.3, 1.7)) * _sign(symbol, random) for symbol in symbols]
        values = [function(*at) for function in functions]
        return bool(abs(mpmath.fsum(values)) <= _ZERO * mpmath.fsum(map(abs, values)))


def _sign(symbol: sp.Symbol, random: Random) -> int:
    return 1 if symbol.is_nonnegative else random.choice((-1, 1))


def constant_in(expression: sp.Expr, symbols: Iterable[sp.Symbol]) -> sp.Expr | None:
    """The expression written without `symbols` where it does not depend on them, else None."""
    held = sorted(set(symbols) & expression.free_symbols, key=str)
    if not held:
        return expression
    fixed = expression.subs(dict(zip(held, (sp.Integer(n) for n in (1, 2, 3, 5)), strict=False)))
    if fixed.free_symbols & set(held) or (fixed.is_number and not fixed.is_finite):
        return None
    return sp.cancel(fixed) if vanishes(expression - fixed) else None


def log_slope(expression: sp.Expr, x: sp.Symbol) -> sp.Expr:
    """d ln(expression) / d ln x, factor by factor."""
    power = monomial(expression, x)
    if power is not None:
        return power[1]
    slopes = [_factor_slope(factor, x) for factor in sp.Mul.make_args(expression)]
    return sp.factor(sp.together(sp.Add(*slopes)))


def _factor_slope(factor: sp.Expr, x: sp.Symbol) -> sp.Expr:
    if isinstance(factor, sp.Pow) and x not in factor.exp.free_symbols:
        return factor.exp * log_slope(factor.base, x)
    return x * sp.diff(factor, x) / factor
