"""What each operation of a formula does to numbers: NumPy and SciPy functions by the formula's own names."""

from __future__ import annotations

import math
from functools import cache
from importlib import import_module
from typing import TYPE_CHECKING, Any

import numpy as np

if TYPE_CHECKING:
    from collections.abc import Callable

    from numpy.typing import NDArray

__all__ = ["ARITY", "OPERATORS", "elliptic_derivative", "numeric", "power_of"]

OPERATORS = ("add", "sub", "mul", "div", "neg", "pow")

# The functions that a formula may call, with their number of arguments. The last two are the exact
# derivatives of the elliptic integrals, ellipk_n(n, m) = d^n K / dm^n.
ARITY = (
    dict.fromkeys(("sqrt", "exp", "ln", "log10", "sin", "cos", "tan", "asin", "acos", "atan"), 1)
    | dict.fromkeys(("sinh", "cosh", "tanh", "abs", "sign", "erf", "ellipk", "ellipe"), 1)
    | dict.fromkeys(("atan2", "min", "max", "besselj", "ellipk_n", "ellipe_n"), 2)
)

_NUMPY: dict[str, Callable[..., Any]] = {
    "add": np.add, "sub": np.subtract, "mul": np.multiply, "div": np.divide, "neg": np.negative,
    "pow": np.power, "sqrt": np.sqrt, "exp": np.exp, "ln": np.log, "log10": np.log10, "sin": np.sin,
    "cos": np.cos, "tan": np.tan, "asin": np.arcsin, "acos": np.arccos, "atan": np.arctan,
    "atan2": np.arctan2, "sinh": np.sinh, "cosh": np.cosh, "tanh": np.tanh, "abs": np.abs, "sign": np.sign,
    "min": np.minimum, "max": np.maximum, "less": np.less, "less_equal": np.less_equal,
    "both": np.logical_and, "either": np.logical_or, "choose": np.where,
}  # fmt: skip
_SPECIAL = {"erf": "erf", "ellipk": "ellipk", "ellipe": "ellipe", "besselj": "jv"}


@cache
def numeric(op: str) -> Callable[..., Any]:
    """The function on arrays behind an operation. SciPy is imported only when a formula asks for it."""
    if op in _NUMPY:
        return _NUMPY[op]
    if op == "ellipk_n":
        return lambda n, m: elliptic_derivative(0.5, n, m)
    if op == "ellipe_n":
        return lambda n, m: elliptic_derivative(-0.5, n, m)
    function: Callable[..., Any] = getattr(import_module("scipy.special"), _SPECIAL[op])
    return function


def power_of(exponent: float) -> Callable[..., Any]:
    """The function x**exponent, several times faster than `np.power` for the exponents met in practice."""
    named: dict[float, Callable[..., Any]] = {2.0: np.square, 0.5: np.sqrt, -1.0: np.reciprocal}
    if exponent in named:
        return named[exponent]
    if exponent.is_integer() and abs(exponent) <= 64:
        return lambda x: _repeated(x, int(exponent))
    if (exponent + 0.5).is_integer() and abs(exponent) <= 8:
        return lambda x: np.sqrt(x) * _repeated(x, math.floor(exponent))
    return lambda x: np.power(x, exponent)


def _repeated(x: NDArray[np.float64], exponent: int) -> NDArray[np.float64]:
    """x**exponent by repeated squaring."""
    product, square = (x, x) if exponent % 2 else (np.ones_like(x), x)
    count = abs(exponent) >> 1
    while count:
        square = np.square(square)
        if count & 1:
            product = product * square
        count >>= 1
    return np.reciprocal(product) if exponent < 0 else product


def elliptic_derivative(a: float, n: float, m: NDArray[np.float64]) -> NDArray[np.float64]:
    """The n-th derivative of (pi/2) 2F1(a, 1/2; 1; m): of K for a = 1/2, of E for a = -1/2.

    DLMF 19.5.1, 19.5.2 and 15.5.2. Away from m = 0 the hypergeometric equation (DLMF 15.10.1) leads from the
    integrals themselves upwards; near 0, where that cancels, the hypergeometric function is taken.
    """
    special, order = import_module("scipy.special"), round(float(n))
    m = np.asarray(m, float)
    lead = math.pi / 2 * float(special.poch(a, order) * special.poch(0.5, order)) / math.factorial(order)
    near = np.abs(m) < 0.5
    low = special.hyp2f1(a + order, 0.5 + order, 1 + order, np.where(near, m, 0.0)) * lead
    away = np.where(near, 0.5, m)
    first, second = special.ellipk(away), special.ellipe(away)
    slope = (second - (1 - away) * first) / (2 * away * (1 - away))
    older, newer = (first, slope) if a > 0 else (second, (second - first) / (2 * away))
    for k in range(order - 1):
        rise = (a + k) * (0.5 + k) * older - (1 + k - (a + 1.5 + 2 * k) * away) * newer
        older, newer = newer, rise / (away * (1 - away))
    result: NDArray[np.float64] = np.where(near, low, newer if order else older)
    return result
