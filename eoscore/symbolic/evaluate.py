"""Numbers from SymPy expressions by our own walk over the tree: no code is generated."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import mpmath
import numpy as np
import sympy as sp
from scipy import special

from eoscore.symbolic.scaled import ScaledI, ScaledK, scaled, scaled_i, scaled_k
from eoscore.symbolic.series import alternating_sum, smooth_sum

if TYPE_CHECKING:
    from collections.abc import Callable, Mapping, Sequence

    from numpy.typing import NDArray


__all__ = ["compiled", "in_double", "number", "numerical_slope"]

# 1 - e^y, and prod 1/(1 - e_i) - 1, where the plain form would cancel.
_FALL, _LESS_ONE = sp.Function("fall"), sp.Function("less_one")
_ERFCX = sp.Function("erfcx")  # e^{z^2} erfc(z), where a growing exponential meets a vanishing erfc

_PRECISE: dict[Any, Callable[..., Any]] = {
    sp.exp: mpmath.exp,
    sp.log: mpmath.log,
    sp.sin: mpmath.sin,
    sp.cos: mpmath.cos,
    sp.tan: mpmath.tan,
    sp.asin: mpmath.asin,
    sp.acos: mpmath.acos,
    sp.atan: mpmath.atan,
    sp.atan2: mpmath.atan2,
    sp.sinh: mpmath.sinh,
    sp.cosh: mpmath.cosh,
    sp.tanh: mpmath.tanh,
    sp.Abs: abs,
    sp.sign: mpmath.sign,
    sp.Min: min,
    sp.Max: max,
    sp.erf: mpmath.erf,
    sp.erfc: mpmath.erfc,
    sp.gamma: mpmath.gamma,
    sp.lowergamma: lambda s, x: mpmath.gammainc(s, 0, x),
    sp.uppergamma: mpmath.gammainc,
    sp.zeta: mpmath.zeta,
    sp.polylog: mpmath.polylog,
    sp.besselj: mpmath.besselj,
    sp.besseli: mpmath.besseli,
    sp.besselk: mpmath.besselk,
    sp.elliptic_k: mpmath.ellipk,
    sp.elliptic_e: mpmath.ellipe,
    sp.Add: lambda *terms: mpmath.fsum(terms),
    sp.Mul: lambda *factors: mpmath.fprod(factors),
    sp.Pow: mpmath.power,
}

_DOUBLE: dict[Any, Callable[..., Any]] = {
    sp.exp: np.exp,
    sp.log: np.log,
    sp.sin: np.sin,
    sp.cos: np.cos,
    sp.sinh: np.sinh,
    sp.cosh: np.cosh,
    sp.tanh: np.tanh,
    sp.Abs: np.abs,
    sp.erf: special.erf,
    sp.erfc: special.erfc,
    _ERFCX: special.erfcx,
    sp.gamma: special.gamma,
    sp.zeta: special.zeta,
    ScaledI: scaled_i,
    ScaledK: scaled_k,
    _FALL: lambda y: -np.expm1(y),
    _LESS_ONE: lambda *e: np.expm1(-sum(np.log1p(-x) for x in e)),
    sp.besselj: special.jv,
    sp.Add: lambda *terms: sum(terms),
    sp.Mul: lambda *factors: np.prod(np.broadcast_arrays(*factors), axis=0),
    sp.Pow: np.power,
}


def compiled(
    expression: sp.Expr, symbols: Sequence[sp.Symbol], table: Mapping[Any, Callable[..., Any]] = _PRECISE
) -> Callable[..., Any]:
    """A function of numbers, one for each symbol; mpmath's by default.

    Raises ValueError for a function that has no numerical counterpart here.
    """
    if expression in symbols:
        place = list(symbols).index(expression)
        return lambda *at: at[place]
    if expression.is_number and not expression.args:
        digits = mpmath.mpmathify(sp.N(expression, 50))
        constant = digits if table is _PRECISE else float(digits)
        return lambda *_: constant
    if isinstance(expression, sp.Sum):
        return _sum(expression, symbols)
    if table is _PRECISE and isinstance(expression, (ScaledI, ScaledK)):
        return compiled(expression.plain(), symbols, table)
    function = table.get(expression.func)
    if function is None or not expression.args:
        msg = f"{expression} has no numerical counterpart here"
        raise ValueError(msg)
    parts = [compiled(part, symbols, table) for part in expression.args]
    return lambda *at: function(*(part(*at) for part in parts))


def _sum(expression: sp.Sum, symbols: Sequence[sp.Symbol]) -> Callable[..., Any]:
    """A sum over l from 1 on, in double precision; a factor (-1)^(l + 1) makes it alternate."""
    ((index, _, _),) = expression.limits
    alternates = expression.function.has(sp.S.NegativeOne ** (index + 1))
    body = expression.function.replace(sp.S.NegativeOne ** (index + 1), sp.Integer(1))
    term = compiled(_steady(body), [*symbols, index], _DOUBLE)
    total = alternating_sum if alternates else smooth_sum

    def added(*at: Any) -> float:
        fixed = [float(x) for x in at]
        with np.errstate(all="ignore"):
            return total(lambda l: np.asarray(term(*fixed, l) + 0 * l))  # noqa: E741 - the sum's usual index

    return added


def _steady(body: sp.Expr) -> sp.Expr:
    """The same term without overflow and cancellation in double precision."""
    body = body.replace(_is_excited, lambda e: _LESS_ONE(*(1 - f.base for f in sp.Mul.make_args(e + 1))))
    body = body.replace(_is_small, lambda e: sp.exp(-(e.args[0] ** 2)) * _ERFCX(*e.args))
    body = body.replace(_is_fall, lambda e: _FALL((1 - e).exp))
    return sp.powsimp(sp.expand_mul(scaled(body)), combine="exp")


def _is_small(expression: sp.Expr) -> bool:
    """erfc of a positive argument."""
    return isinstance(expression, sp.erfc) and bool(expression.args[0].is_nonnegative)


def _is_fall(expression: sp.Expr) -> bool:
    """1 - exp(y)."""
    return bool(expression.is_Add) and isinstance(1 - expression, sp.exp)


def _is_excited(expression: sp.Expr) -> bool:
    """prod 1/(1 - exp(y_i)) - 1: all levels but the lowest."""
    if not (expression.is_Add and sp.S.NegativeOne in expression.args):
        return False
    factors = sp.Mul.make_args(expression + 1)
    return all(isinstance(f, sp.Pow) and f.exp == -1 and _is_fall(f.base) for f in factors)


def in_double(expression: sp.Expr, symbols: Sequence[sp.Symbol]) -> Callable[..., NDArray[np.float64]]:
    """A function of arrays, one for each symbol, in double precision."""
    function: Callable[..., NDArray[np.float64]] = compiled(expression, symbols, _DOUBLE)
    return function


def number(expression: sp.Expr, values: Mapping[sp.Symbol, float]) -> float:
    """The value of an expression; every free symbol must have one.

    Raises ValueError where a symbol has none or the result is not a finite real number.
    """
    missing = expression.free_symbols - set(values)
    if missing:
        msg = f"no value for {', '.join(sorted(map(str, missing)))}"
        raise ValueError(msg)
    symbols = list(expression.free_symbols)
    with mpmath.workdps(30):
        found = mpmath.mpmathify(compiled(expression, symbols)(*(mpmath.mpf(values[s]) for s in symbols)))
        # A polylogarithm of a negative argument is real, and comes with an imaginary part of rounding.
        if abs(mpmath.im(found)) > 1e-20 * abs(found) or not mpmath.isfinite(found):
            msg = f"not a finite real number: {found}"
            raise ValueError(msg)
        return float(mpmath.re(found))


def numerical_slope(expression: sp.Expr, values: Mapping[sp.Symbol, float], x: sp.Symbol) -> float:
    """d ln(expression) / d ln x at `values`, from central differences at 40 digits: exact in double precision."""
    symbols = list(expression.free_symbols)
    function = compiled(expression, symbols)
    with mpmath.workdps(40):
        at = [mpmath.mpf(values[s]) for s in symbols]
        place = symbols.index(x)

        def along(value: mpmath.mpf) -> mpmath.mpf:
            return mpmath.log(function(*at[:place], value, *at[place + 1 :]))

        return float(mpmath.re(at[place] * mpmath.diff(along, at[place])))
