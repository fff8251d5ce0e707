"""Route: a quasi-homogeneous potential. Scaling each coordinate by its own power scales V, so Omega is a power."""

from __future__ import annotations

from functools import cache
from itertools import product
from math import pi
from typing import TYPE_CHECKING

import numpy as np

from eoscore.formula.structure import scaling_powers
from eoscore.measure.coordinate import inside, least, weight
from eoscore.measure.landscape_record import multiplicity
from eoscore.measure.powers import Powers

if TYPE_CHECKING:
    from collections.abc import Callable

    from eoscore.formula import Formula
    from eoscore.formula.field import Field
    from eoscore.measure.base import FloatArray, Measure

__all__ = ["homogeneous"]

ROUTE = "quasi-homogeneous"
ORDERS = (48, 72, 108, 162)  # nodes in each angle; the error falls to about its square from one to the next
LONGEST = 40.0  # decades of m
ENOUGH, ROUNDING, WORST = 5e-10, 3e-14, 1e-5  # relative differences between two rules


def homogeneous(field: Field) -> Measure | None:
    """Omega = C v^K of V(s^k1 x1, s^k2 x2, ...) = s V(x) > 0, K the sum of the powers over all dimensions.

    With x_i = s^k_i n_i and n on the unit sphere, C = 1/K int dn (sum k_i n_i^2) V(n)^-K. Walls may only cut
    off whole octants. None for another field, and where C does not converge.
    """
    names = field.coordinates
    found = scaling_powers(field.formula, names)
    if found is None or not all(found[name] > 0 for name in names):
        return None
    powers = np.array([float(found[name]) for name in names])
    if not all(_keeps(wall, names, powers) for wall in field.walls):
        return None
    axes = _units(field, powers)
    if axes is None:
        return None
    total = float(sum(found[name] * multiplicity(name) for name in names))
    constant, error = 0.0, np.inf
    for order in ORDERS:
        before, finer = constant, _angular(field, axes, powers, total, order)
        if finer is None:
            return None
        constant, error = finer, abs(finer - before) / finer
        if error <= ENOUGH:
            return Powers([(constant, total)], error=ROUNDING, route=ROUTE)
    return Powers([(constant, total)], error=max(error, ROUNDING), route=ROUTE) if error < WORST else None


def _keeps(wall: Formula, names: tuple[str, ...], powers: FloatArray) -> bool:
    """Whether a wall stays in place when the coordinates are scaled."""
    used = [name for name in names if name in wall.variables]
    found = scaling_powers(wall, used)
    if found is None:
        return False
    ratios = [float(found[name]) / powers[names.index(name)] for name in used]
    return bool(max(ratios) - min(ratios) <= 1e-12 * abs(ratios[0]))


def _units(field: Field, powers: FloatArray) -> FloatArray | None:
    """The length along each axis at which V has one and the same value, so that no direction is far away."""
    names = field.coordinates
    lengths = []
    for i, name in enumerate(names):

        def largest(x: float, name: str = name) -> float:
            along = {other: np.zeros(2) for other in names} | {name: np.array([x, -x])}
            v = np.broadcast_to(field.formula.evaluate(along), (2,))[: 1 if least(name) == 0 else 2]
            return float(np.max(v[~np.isnan(v)], initial=0.0))

        x = _seen(largest)
        if x is None:
            return None
        lengths.append(float(x * largest(x) ** -powers[i]))
    return np.array(lengths)


def _seen(v: Callable[[float], float]) -> float | None:
    """A length, 1 m if possible, at which V is neither 0 nor infinite in doubles; None where there is none."""
    if 0 < v(1.0) < np.inf:
        return 1.0
    low, high = (0.0, LONGEST) if v(1.0) == 0 else (-LONGEST, 0.0)
    for _ in range(60):
        middle = (low + high) / 2
        height = v(10.0**middle)
        if 0 < height < np.inf:
            return float(10.0**middle)
        low, high = (middle, high) if height == 0 else (low, middle)
    return None


def _angular(field: Field, axes: FloatArray, powers: FloatArray, total: float, order: int) -> float | None:
    """C by a rule of `order` nodes in each angle of each octant; None where V is not positive all round."""
    names = field.coordinates
    directions, dn = _octant(len(names), order)
    result = 0.0
    for signs in product(*[(1.0,) if least(name) == 0 else (1.0, -1.0) for name in names]):
        x = {name: s * a * n for name, s, a, n in zip(names, signs, axes, directions, strict=True)}
        held = inside(field, x)
        if not held.any():
            continue
        v = np.broadcast_to(field.formula.evaluate(x), dn.shape)
        if not held.all() or not (v > 0).all():
            return None
        worth = np.prod(
            [a * weight(name, np.abs(x[name])) for name, a in zip(names, axes, strict=True)], axis=0
        )
        flux = powers @ np.array(directions) ** 2 / total
        result += float(np.sum(dn * worth * flux * v**-total))
    return result or None


@cache
def _octant(d: int, order: int) -> tuple[tuple[FloatArray, ...], FloatArray]:
    """Directions with no negative component, as arrays of components, and their share of the sphere."""
    if d == 1:
        return (np.ones(1),), np.ones(1)
    low, high, w = _angles(order)
    if d == 2:
        return (low, high), w
    sin, cos, dw = (np.repeat(array, order) for array in (low, high, w))
    sin2, cos2, dw2 = (np.tile(array, order) for array in (low, high, w))
    return (sin * sin2, sin * cos2, cos), dw * dw2 * sin


@cache
def _angles(order: int) -> tuple[FloatArray, FloatArray, FloatArray]:
    """sin, cos and weights of angles in [0, pi/2], double exponential at both ends (Takahasi and Mori 1974)."""
    reach = 3.7
    t = np.linspace(-reach, reach, order)
    share = 1 / (1 + np.exp(-pi * np.sinh(t)))
    rest = 1 / (1 + np.exp(pi * np.sinh(t)))
    w = pi / 2 * pi * np.cosh(t) * share * rest * (t[1] - t[0])
    return np.sin(pi / 2 * share), np.sin(pi / 2 * rest), w
