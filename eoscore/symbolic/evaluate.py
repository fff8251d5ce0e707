"""Numbers from SymPy expressions by our own walk over the tree: no code is generated."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import mpmath
import numpy as np
import sympy as sp
from scipy import special

from eoscore.symbolic.series import alternating_sum, smooth_sum

if TYPE_CHECKING:
    from collections.abc import Callable, Mapping, Sequence

    from numpy.typing import NDArray

__all__ = ["compiled", "number", "numerical_slope"]

# Bessel functions without their exponential, so that large arguments neither overflow nor cancel.
_SCALED_I, _SCALED_K = sp.Function("scaled_i"), sp.Function("scaled_k")

# SciPy's Bessel functions refuse arguments above about 1e9, where one term of DLMF 10.40 is exact in double.
_HUGE = 1e8


def _scaled_i(order: NDArray[np.float64], x: NDArray[np.float64]) -> NDArray[np.float64]:
    return np.where(x < _HUGE, special.ive(order, np.minimum(x, _HUGE)), 1 / np.sqrt(2 * np.pi * x))


def _scaled_k(order: NDArray[np.float64], x: NDArray[np.float64]) -> NDArray[np.float64]:
    return np.where(x < _HUGE, special.kve(order, np.minimum(x, _HUGE)), np.sqrt(np.pi / (2 * x)))


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
    sp.gamma: special.gamma,
    sp.zeta: special.zeta,
    _SCALED_I: _scaled_i,
    _SCALED_K: _scaled_k,
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
    body = body.replace(sp.besselk, lambda n, x: _SCALED_K(n, x) * sp.exp(-x))
    body = body.replace(sp.besseli, lambda n, x: _SCALED_I(n, x) * sp.exp(x))
    term = compiled(sp.powsimp(sp.expand(body), combine="exp"), [*symbols, index], _DOUBLE)
    total = alternating_sum if alternates else smooth_sum

    def added(*at: Any) -> float:
        fixed = [float(x) for x in at]
        with np.errstate(all="ignore"):
            return total(lambda l: np.asarray(term(*fixed, l) + 0 * l))  # noqa: E741 - the sum's usual index

    return added


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
