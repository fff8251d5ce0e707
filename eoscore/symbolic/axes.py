"""The coordinates of a symbolic integral: a whole line, a stretch of it, or a radius with its sphere's surface."""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import TYPE_CHECKING

import sympy as sp

if TYPE_CHECKING:
    from collections.abc import Iterable, Sequence

__all__ = ["Axis", "axes_of", "sphere", "with_walls"]


def sphere(dimension: int) -> sp.Expr:
    """Surface of the unit sphere in `dimension` dimensions, 2 pi^{d/2} / Gamma(d/2) (DLMF 5.19(iii))."""
    return 2 * sp.pi ** sp.Rational(dimension, 2) / sp.gamma(sp.Rational(dimension, 2))


@dataclass(frozen=True)
class Axis:
    """A coordinate with its range; a radius stands for `dimension` directions at once, a line for one."""

    symbol: sp.Symbol
    low: sp.Expr = -sp.oo
    high: sp.Expr = sp.oo
    dimension: int = 1
    radius: bool = False

    @property
    def weight(self) -> sp.Expr:
        """The volume element's factor: S_d r^{d-1} for a radius, 1 for a line."""
        return sphere(self.dimension) * self.symbol ** (self.dimension - 1) if self.radius else sp.Integer(1)

    @property
    def whole(self) -> bool:
        """Whether no wall cuts the axis."""
        return bool(self.high == sp.oo and self.low == (0 if self.radius else -sp.oo))


_RADII = {("rho",): 2, ("r",): 3, ("rho", "z"): 2}


def axes_of(symbols: Sequence[sp.Symbol], dimension: int | None = None) -> tuple[Axis, ...]:
    """The axes of a tuple of coordinates; `p`, `rho` and `r` are radii.

    `dimension` is that of the space when the one symbol is an isotropic momentum.
    """
    names = tuple(symbol.name for symbol in symbols)
    first = _RADII.get(names, dimension if names == ("p",) else None)
    axes = [Axis(symbol) for symbol in symbols]
    if first is not None:
        axes[0] = Axis(symbols[0], low=sp.Integer(0), dimension=first, radius=True)
    return tuple(axes)


def with_walls(
    axes: Iterable[Axis], walls: Iterable[sp.Expr]
) -> tuple[tuple[Axis, ...], tuple[sp.Expr, ...]]:
    """Turn walls that bind one axis alone into its range; the rest is returned as it came.

    A wall is an expression that is positive inside.
    """
    found, rest = list(axes), []
    for wall in walls:
        touched = [i for i, axis in enumerate(found) if axis.symbol in wall.free_symbols]
        cut = _cut(found[touched[0]], wall) if len(touched) == 1 else None
        if cut is None:
            rest.append(wall)
        else:
            found[touched[0]] = cut
    return tuple(found), tuple(rest)


def _cut(axis: Axis, wall: sp.Expr) -> Axis | None:
    """The axis cut by a wall that is linear in x, |x| or x^2; None where it is none of these."""
    x = axis.symbol
    size = sp.Symbol("size'", positive=True)
    for form, even in ((sp.Abs(x), True), (x**2, True), (x, False)):
        linear = sp.expand(wall).subs(form, size)
        if x in linear.free_symbols or sp.diff(linear, size, 2) != 0:
            continue
        slope = sp.diff(linear, size)
        bound = sp.factor(-linear.subs(size, 0) / slope)
        if not even:
            return _tighten(axis, bound, bound, lower=bool(slope.is_positive), upper=bool(slope.is_negative))
        if slope.is_negative:
            edge = sp.sqrt(bound) if form == x**2 else bound
            return _tighten(axis, -edge, edge, lower=not axis.radius, upper=True)
    return None


def _tighten(axis: Axis, low: sp.Expr, high: sp.Expr, *, lower: bool, upper: bool) -> Axis | None:
    if not (lower or upper):
        return None
    low = sp.Max(axis.low, low) if lower else axis.low
    high = sp.Min(axis.high, high) if upper else axis.high
    return replace(axis, low=low, high=high)
