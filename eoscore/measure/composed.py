"""Route: a one-to-one function of an energy whose measure is known, as sqrt(U^2 + a^2 r^2) or -U exp(-2 r^2/w^2)."""

from __future__ import annotations

from math import inf
from typing import TYPE_CHECKING

import numpy as np

from eoscore.formula.field import Field
from eoscore.measure.base import FloatArray, Foot, Measure, Nodes
from eoscore.measure.bottom import beginning
from eoscore.measure.chain import Chain, falls, linked, peeled
from eoscore.measure.landscape import survey
from eoscore.measure.powers import Powers
from eoscore.measure.rules import log_panels
from eoscore.measure.sampled import Sampled

if TYPE_CHECKING:
    from collections.abc import Callable

    from numpy.typing import ArrayLike

    from eoscore.measure.landscape_record import Landscape

__all__ = ["Composed", "composed"]

HUGE = 1e120  # J or what u is counted in: beyond all walls
FAINT, STRONG = 1e-60, 1e5  # J: where the first power is looked for in a measure without top


def composed(field: Field, measure_of: Callable[[Field, Landscape], Measure]) -> Measure | None:
    """Omega(v) = Omega_u(F^-1(v)) of V = F(u(x)); None where V is no such function."""
    operations, inner = peeled(field.formula)
    bent = any(op not in ("shift", "times") for op, _ in operations)
    if not bent or inner.op == "variable":
        return None
    if falls(operations):
        operations, inner = [*operations, ("times", -1.0)], -inner
    within = Field(field.coordinates, inner, field.walls)
    landscape = survey(within)
    if not landscape.holds or landscape.bottom is None:
        return None
    chain = linked(operations, landscape.bottom.value)
    return None if chain is None else _of(measure_of(within, landscape), chain)


def _of(inner: Measure, chain: Chain) -> Measure:
    top = chain.forth(inner.top)
    route = f"function of {inner.route}"
    terms, steps = inner.powers(), chain.back_polynomial()
    if terms is not None and steps is not None and all(k == round(k) for _, k in terms):
        whole = sum((c * steps ** round(k) for c, k in terms), 0 * steps)
        found = [(float(c), float(k)) for k, c in enumerate(whole.coef.tolist()) if c > 0]
        return Powers(found, top, error=inner.error + 1e-15, route=route)

    def omega(v: FloatArray) -> FloatArray:
        with np.errstate(over="ignore"):
            return inner.volume(np.minimum(chain.back(v), HUGE))

    v = np.geomspace(1e-14 * top, top / 2, 1200) if top < inf else np.geomspace(FAINT, STRONG, 4000)
    exponent, scale = beginning(v, omega(v))
    if not inner.breaks:
        return Composed(inner, chain, exponent, min(scale, top), top, route)
    breaks = tuple(chain.forth(b) for b in inner.breaks)
    error = inner.error + 1e-15
    return Sampled(omega, exponent, scale=min(scale, top), top=top, error=error, route=route, breaks=breaks)


class Composed(Measure):
    """The measure of F(u) for the measure of u, exactly."""

    def __init__(
        self, inner: Measure, chain: Chain, exponent: float, scale: float, top: float, route: str
    ) -> None:
        super().__init__(exponent, top=top, error=inner.error + 1e-15, route=route, scale=scale)
        self.inner, self.chain = inner, chain

    def volume(self, v: ArrayLike) -> FloatArray:
        """See `Measure.volume`."""
        with np.errstate(divide="ignore", over="ignore"):
            return self.inner.volume(self.chain.back(np.clip(np.asarray(v, dtype=float), 0.0, self.top)))

    def density(self, v: ArrayLike) -> FloatArray:
        """See `Measure.density`."""
        energy = np.asarray(v, dtype=float)
        held = (energy > 0) & (energy < self.top)
        energy = np.where(held, energy, min(self.scale, 1.0))
        u = self.chain.back(energy)
        return np.where(held, self.inner.density(u) * self.chain.back_slope(energy), 0.0)

    def nodes(self, upto: float = inf) -> Nodes:
        """See `Measure.nodes`."""
        end = self.end(upto)
        edge = min(end, self.scale) * 2.0**-52
        foot = Foot(float(self.volume(edge)) / edge**self.exponent, self.exponent, edge)
        if end < self.top / 2:
            v, dv = log_panels(edge, end)
        else:  # Omega may diverge at the top: the panels are graded towards it, too
            low, d_low = log_panels(edge, self.top / 2)
            rest, d_rest = log_panels(max(self.top - end, self.top * 2.0**-48), self.top / 2)
            v, dv = np.concatenate([low, (self.top - rest)[::-1]]), np.concatenate([d_low, d_rest[::-1]])
        return Nodes(v, dv * self.density(v), foot)
