"""Bessel functions without their exponential, and their derivatives, which neither overflow nor cancel.

d^k/dx^k of e^-x I_n(x) is a difference of nearly equal numbers when it is written out; in the sums over l it is
kept whole, and written out only for the reader.
"""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import numpy as np
import sympy as sp
from scipy import special

if TYPE_CHECKING:
    from numpy.typing import NDArray

__all__ = ["ScaledI", "ScaledK", "scaled", "scaled_i", "scaled_k", "written_out"]

_LARGE, _TERMS = 30.0, 20


class ScaledI(sp.Function):  # type: ignore[misc] # SymPy is not typed
    """ScaledI(n, k, x) = d^k/dx^k of e^-x I_n(x)."""

    nargs = 3

    def fdiff(self, argindex: int = 3) -> sp.Expr:
        """The next derivative; the orders are numbers."""
        return _next(self, argindex)

    def plain(self) -> sp.Expr:
        """In terms of `besseli`."""
        return _plain(self, lambda n, x: sp.exp(-x) * sp.besseli(n, x))


class ScaledK(sp.Function):  # type: ignore[misc]
    """ScaledK(n, k, x) = d^k/dx^k of e^x K_n(x)."""

    nargs = 3

    def fdiff(self, argindex: int = 3) -> sp.Expr:
        """The next derivative; the orders are numbers."""
        return _next(self, argindex)

    def plain(self) -> sp.Expr:
        """In terms of `besselk`."""
        return _plain(self, lambda n, x: sp.exp(x) * sp.besselk(n, x))


def _next(function: sp.Expr, argindex: int) -> sp.Expr:
    if argindex != 3:
        raise sp.function.ArgumentIndexError(function, argindex)
    n, k, x = function.args
    return function.func(n, k + 1, x)


def _plain(function: sp.Expr, of: Any) -> sp.Expr:
    n, k, x = function.args
    at = sp.Symbol("x'", positive=True)
    return sp.diff(of(n, at), at, k).subs(at, x)


def scaled(expression: sp.Expr) -> sp.Expr:
    """Modified Bessel functions as their scaled forms times the exponential."""
    expression = expression.replace(sp.besselk, lambda n, x: ScaledK(n, 0, x) * sp.exp(-x))
    return expression.replace(sp.besseli, lambda n, x: ScaledI(n, 0, x) * sp.exp(x))


def written_out(expression: sp.Expr) -> sp.Expr:
    """The same in Bessel functions that everybody knows."""
    found = expression.atoms(ScaledI, ScaledK)
    return expression.xreplace({f: f.plain() for f in found}) if found else expression


def scaled_i(n: Any, k: Any, x: NDArray[np.float64]) -> NDArray[np.float64]:
    """d^k/dx^k of e^-x I_n(x) for k = 0, 1, 2; above x = 30 by DLMF 10.40.1, term by term."""
    near = np.minimum(x, _LARGE)
    level = [special.ive(n + shift, near) for shift in range(-2, 3)]
    return np.where(
        x < _LARGE, _differences(level, int(k), -1.0), _far(n, int(k), x, -1.0) / np.sqrt(2 * np.pi)
    )


def scaled_k(n: Any, k: Any, x: NDArray[np.float64]) -> NDArray[np.float64]:
    """d^k/dx^k of e^x K_n(x) for k = 0, 1, 2; above x = 30 by DLMF 10.40.2, term by term."""
    near = np.minimum(x, _LARGE)
    level = [special.kve(n + shift, near) for shift in range(-2, 3)]
    # (-1)^n K_n obeys the same recurrences as I_n.
    turned = [(-1.0) ** shift * value for shift, value in zip(range(-2, 3), level, strict=True)]
    return np.where(
        x < _LARGE, _differences(turned, int(k), 1.0), _far(n, int(k), x, 1.0) * np.sqrt(np.pi / 2)
    )


def _differences(level: list[NDArray[np.float64]], k: int, sign: float) -> NDArray[np.float64]:
    """From orders n - 2 ... n + 2: each derivative is the mean of the neighbours, + sign for the exponential."""
    for _ in range(k):
        inner = [(a + b) / 2 + sign * c for a, c, b in zip(level[:-2], level[1:-1], level[2:], strict=True)]
        level = inner
    return level[len(level) // 2]


def _far(n: Any, k: int, x: NDArray[np.float64], sign: float) -> NDArray[np.float64]:
    """d^k/dx^k of sum sign^j a_j(n) x^{-1/2 - j}."""
    x = np.maximum(x, _LARGE)
    total, size = np.zeros_like(x), 1.0
    for j in range(_TERMS):
        fall = np.prod([-0.5 - j - i for i in range(k)])
        total = total + size * fall * x ** (-0.5 - j - k)
        size *= sign * (4 * float(n) ** 2 - (2 * j + 1) ** 2) / (8 * (j + 1))
    return total
