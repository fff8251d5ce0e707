"""T_c far above a band of finite width: the first two terms, with the number that the lattice alone decides."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np
import sympy as sp

from eoscore.symbolic.evaluate import in_double
from eoscore.symbolic.integrals.rule import BETA
from eoscore.symbolic.quantities import K_B, NUMBER
from eoscore.symbolic.scaled import ScaledI, scaled

if TYPE_CHECKING:
    from collections.abc import Callable

    from numpy.typing import NDArray

__all__ = ["above_band"]

_NODES = 60


def above_band(whole: sp.Expr) -> tuple[sp.Expr, sp.Expr] | None:
    """(leading, correction) of T_c = leading (1 + correction) from N_c = W k_B T - Z1(0)/2 + O(1/T).

    W is the integral of Z1 over beta, and the rest is Euler and Maclaurin's (DLMF 2.10.1). For a cubic lattice it
    holds Watson's integral 0.505..., Q. J. Math. 10, 266 (1939). None where Z1 is no product of Bessel functions I
    of one width, or where W diverges.
    """
    known = scaled(whole)
    bessels = sorted(known.atoms(ScaledI), key=str)
    if not bessels:
        return None
    rate, x = sp.cancel(bessels[0].args[2] / BETA), sp.Symbol("x'", positive=True)
    size, shape = sp.powsimp(known.subs(BETA, x / rate)).as_independent(x, as_Add=False)
    if shape.free_symbols != {x} or BETA in rate.free_symbols:
        return None
    at = in_double(shape, [x])
    with np.errstate(all="ignore"):  # a trap around the lattice makes the start infinite
        start, far = (float(at(np.array([each]))[0]) for each in (0.0, 1e12))
    if not np.isfinite(start) or far * 1e12 > 1e-3:  # as x^(-3/2) or faster
        return None
    width = sp.Float(_integral(at), 12)
    zero = sp.nsimplify(start, rational=True)
    return NUMBER * rate / (K_B * size * width), size * zero / (2 * NUMBER)


def _integral(at: Callable[..., NDArray[np.float64]]) -> float:
    """Over all x > 0: Gauss and Legendre's rule up to 1, and in 1/sqrt(x) beyond, where the shape is smooth."""
    node, weight = np.polynomial.legendre.leggauss(_NODES)
    t, w = (node + 1) / 2, weight / 2
    return float(np.sum(w * at(t)) + np.sum(w * 2 * t**-3 * at(t**-2)))
