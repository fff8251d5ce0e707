"""The Fermi function F_s(eta) = -Li_s(-e^eta) for every real order, to the last bits.

Beyond eta = 0 it is a part that grows as a power and its own mirror image, F_s(eta) = Y_s(eta) - cos(pi s) F_s(-eta)
(Jonquiere's formula, DLMF 25.12.13; see `matsubara`), which has nothing to cancel and no special orders:

- eta <= 0: z - z v Q(v) with z = e^eta, the polynomial in v = z / (c + z), c = 1 + sqrt 2, which puts the cut of
  the function, z <= -1, equally far from both ends of the range of v.
- Whole orders: Y_s is the polynomial 2 sum_k eta(2k) eta^(s-2k) / (s-2k)!, and 0 for s < 0.
- Half orders: cos(pi s) = 0, and Y_s is the function. Y_s is a polynomial of degree 20 (to 32) on each of five panels
  whose widths grow with the distance to the poles +-i pi (the error falls by 6.5 with each degree), and beyond 32
  eta^s times one in 1 / eta^2: Sommerfeld's expansion, made the best for that range.
- Orders below -1/2 change sign: there z Q(v) would cancel, and two polynomials in eta stand for -4.5 < eta < -1/2,
  and Taylor's series for |eta| < 1/2, since the even whole ones of them vanish at eta = 0.

Polynomials are good to some 1e-17 of the function. Near the other zeros of orders below -1 the error is that of a
rounded eta. Method: D. Wood, "The computation of polylogarithms" (1992); J. M. Blakemore, Solid-State Electron. 25,
1067 (1982) for the ranges.
"""

from __future__ import annotations

import math
from bisect import bisect_left
from itertools import pairwise
from typing import TYPE_CHECKING, overload

import numpy as np

from eoscore.gas.blocks import BLOCK, blockwise, horner, horner_scalar
from eoscore.gas.fermi_table import EDGES, SHOULDER, FermiTable, fermi_table
from eoscore.gas.precise import checked_order

if TYPE_CHECKING:
    from numpy.typing import ArrayLike

    from eoscore.gas.blocks import Block

__all__ = ["fermi"]


def _below(table: FermiTable, eta: Block) -> Block:
    """F for eta <= 0, as a new array."""
    z = np.exp(eta)
    v = np.add(z, table.centre)
    np.divide(z, v, out=v)
    result = horner(table.below, v)
    result *= v
    result *= z
    np.subtract(z, result, out=result)
    for low, (origin, coefficients) in zip(SHOULDER, (*table.shoulder, (0.0, table.middle)), strict=False):
        near = np.flatnonzero(eta > low) if table.middle else ()
        if len(near):
            result[near] = horner(coefficients, eta.take(near) - origin)
    return result


def _whole_part(table: FermiTable, eta: Block) -> Block:
    result = np.full(eta.size, table.whole[-1])
    for coefficient in table.whole[-2::-1]:
        # Not times a rounded square: its error would count once for each term.
        result *= eta
        result *= eta
        result += coefficient
    if table.order % 2:
        result *= eta
    return result


def _whole(table: FermiTable, eta: Block) -> Block:
    """F for a whole order: the mirror image everywhere, and the polynomial where eta > 0."""
    result = _below(table, -np.abs(eta))
    above = np.flatnonzero(eta > 0)
    if above.size:
        beyond = result[above] * table.mirror
        if table.whole:
            beyond += _whole_part(table, eta.take(above))
        result[above] = beyond
    return result


def _far(table: FermiTable, eta: Block) -> Block:
    inverse = 1.0 / eta
    result = horner(table.far, inverse * inverse)
    if table.mirror == 0.0 and 0 < table.order < 8:
        result *= np.sqrt(eta)
        for _ in range(int(table.order)):
            result *= eta
        return result
    result *= np.power(eta, table.order)
    return result


def _above(table: FermiTable, panel: int, eta: Block) -> Block:
    """F for eta > 0 in one panel."""
    if table.middle and panel == 1:
        near = eta <= -SHOULDER[-1]
        if near.any():
            return np.where(near, horner(table.middle, eta), _power_and_mirror(table, panel, eta))
    return _power_and_mirror(table, panel, eta)


def _power_and_mirror(table: FermiTable, panel: int, eta: Block) -> Block:
    if panel == len(EDGES):
        result = _far(table, eta)
    else:
        origin, coefficients = table.panels[panel - 1]
        result = horner(coefficients, eta - origin if origin else eta)
    if table.mirror:
        mirror = _below(table, -eta)
        mirror *= table.mirror
        result += mirror
    return result


def _sorted(table: FermiTable, eta: Block) -> Block:
    """F for any other order: the points sorted by panel, each panel at once."""
    panel, starts = np.zeros(eta.size, dtype=np.uint8), [0]
    for edge in EDGES:
        beyond = eta > edge
        panel += beyond
        starts.append(eta.size - int(np.count_nonzero(beyond)))
    parts = [(index, part) for index, part in enumerate(pairwise([*starts, eta.size])) if part[0] < part[1]]
    if len(parts) == 1:
        return _one(table, parts[0][0], eta)
    order = np.argsort(panel, kind="stable")
    gathered = eta.take(order)
    for index, (start, stop) in parts:
        gathered[start:stop] = _one(table, index, gathered[start:stop])
    result = np.empty(eta.size)
    result[order] = gathered
    return result


def _one(table: FermiTable, panel: int, eta: Block) -> Block:
    return _above(table, panel, eta) if panel else _below(table, eta)


def _scalar_below(table: FermiTable, eta: float) -> float:
    if table.middle and eta > SHOULDER[0]:
        if eta > SHOULDER[-1]:
            return horner_scalar(table.middle, eta)
        origin, coefficients = table.shoulder[bisect_left(SHOULDER, eta) - 1]
        return horner_scalar(coefficients, eta - origin)
    z = math.exp(eta)
    return z - z * (z / (table.centre + z) * horner_scalar(table.below, z / (table.centre + z)))


def _scalar(table: FermiTable, eta: float) -> float:
    if table.middle and abs(eta) <= -SHOULDER[-1]:
        return horner_scalar(table.middle, eta)
    mirror = _scalar_below(table, -abs(eta))
    if not eta > 0:
        return mirror
    if table.order == round(table.order):
        power = float(_whole_part(table, np.array([eta]))[0]) if table.whole else 0.0
    elif eta > EDGES[-1]:
        power = float(np.power(eta, table.order)) * horner_scalar(table.far, 1.0 / eta / eta)
    else:
        origin, coefficients = table.panels[bisect_left(EDGES, eta) - 1]
        power = horner_scalar(coefficients, eta - origin)
    return power + table.mirror * mirror


@overload
def fermi(s: float, eta: float, out: None = None) -> float: ...
@overload
def fermi(s: float, eta: ArrayLike, out: Block | None = None) -> Block: ...
def fermi(s: float, eta: float | ArrayLike, out: Block | None = None) -> Block | float:
    """-Li_s(-e^eta) for a real order s in [-6, 30] and any eta, elementwise; nothing has a unit.

    It is the Fermi-Dirac integral with 1/Gamma(s) in front (DLMF 25.12.14 has the index s - 1), continued to s <= 0.
    The result has the shape of eta, or is a float where eta is one; it is written to `out` where that is given.
    ValueError is raised for an order out of range and for an `out` of another shape or type.
    """
    table = fermi_table(checked_order(s))
    if out is None and isinstance(eta, float | int):
        return _scalar(table, float(eta))
    values = np.asarray(eta, dtype=np.float64)
    if table.order == round(table.order):
        return blockwise(lambda block: _whole(table, block), values, out)[()]
    # Sorted by panel, a block falls into seven parts: four times the size keeps each worth its calls.
    return blockwise(lambda block: _sorted(table, block), values, out, 4 * BLOCK)[()]
