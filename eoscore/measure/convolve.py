"""The measure of a sum of independent energies: the convolution of their measures."""

from __future__ import annotations

from functools import partial
from itertools import pairwise
from math import inf
from typing import TYPE_CHECKING

import numpy as np

from eoscore.errors import NoAnswerError
from eoscore.measure.changed import Changed
from eoscore.measure.crowded import Crowd
from eoscore.measure.powers import Powers
from eoscore.measure.rules import graded, legendre, quartering
from eoscore.measure.sampled import Sampled
from eoscore.measure.smeared import smeared
from eoscore.measure.smeared_crowd import SmearedCrowd

if TYPE_CHECKING:
    from collections.abc import Callable, Iterator

    from eoscore.measure.base import FloatArray, Measure

    Rule = tuple[FloatArray, FloatArray, FloatArray | None]  # v, dv, exact distance of v from a break

__all__ = ["convolve"]

ROUNDING = 2e-13  # of the quadrature below, measured against Beta functions
BLOCK = 64  # energies taken at once, so that the arrays stay in the cache
POWER = 2  # v leaves a break as t^2, which takes 1/sqrt out of a density


def convolve(a: Measure, b: Measure) -> Measure:
    """Omega(E) = int dOmega_a(v) Omega_b(E - v): how much of both spaces lies below E together.

    Sums of powers combine exactly, C1 v^k1 with C2 v^k2 to C1 C2 v^(k1+k2) Gamma(k1+1) Gamma(k2+1) /
    Gamma(k1+k2+1) (DLMF 5.12.1); a flat floor is a factor; all else is graded quadrature. The top is the lower
    one of the two: whichever piece leaks first lets the particle out.
    """
    top = min(a.top, b.top)
    error = a.error + b.error
    route = a.route if b.powers() else b.route if a.powers() else f"{a.route} * {b.route}"
    for one, other in ((a, b), (b, a)):
        factor = _factor(one)
        if factor is not None:
            return other.scaled(factor).cut(top)
    for one, other in ((a, b), (b, a)):
        if isinstance(one, SmearedCrowd) and other.powers():
            return convolve(convolve(other, one.other), one.crowd).cut(top)
    for one, other in ((a, b), (b, a)):
        _refuse_infinite(one, other.exponent, top)
    terms_a, terms_b = a.powers(), b.powers()
    if terms_a and terms_b:
        terms = [(c1 * c2 * _joined(k1, k2), k1 + k2) for c1, k1 in terms_a for c2, k2 in terms_b]
        return Powers(terms, top, error=error, route=route)
    for one, other in ((a, b), (b, a)):
        if isinstance(one, Crowd):
            return SmearedCrowd(one, other, top)
    return _sampled(a, b)


def _sampled(a: Measure, b: Measure, parent: Sampled | None = None, kT: float = inf) -> Sampled:
    """The convolution as a function of energy; with a parent, for sums at temperatures up to kT."""

    def ease(kT: float) -> Sampled:
        if not isinstance(b if isinstance(_origin(a), Sampled) else a, Powers):
            return joined  # the general rules ask for the density at places of their own
        pair = a.eased(kT), b.eased(kT)
        return joined if pair == (a, b) else _sampled(*pair, joined, kT)

    joined = Sampled(
        _function(a, b),
        a.exponent + b.exponent,
        scale=min(a.scale, b.scale),
        foot=max([m.foot for m in (_origin(a), _origin(b)) if isinstance(m, Sampled)], default=None),
        top=min(a.top, b.top),
        error=lambda v: a.error_below(v) + b.error_below(v) + ROUNDING,
        route=a.route if b.powers() else b.route if a.powers() else f"{a.route} * {b.route}",
        breaks=_joined_breaks(a, b),
        kT=kT,
        ease=ease if parent is None else None,
        parent=parent,
    )
    return joined


def _function(a: Measure, b: Measure) -> Callable[[FloatArray], FloatArray]:
    """Omega of the two together as a function of energies."""
    for one, other in ((a, b), (b, a)):
        whole = _origin(one)
        if isinstance(whole, Sampled) and isinstance(other, Powers):
            factor = one.factor if isinstance(one, Changed) else 1.0
            return partial(smeared, whole, Powers([(factor * c, k) for c, k in other.terms]))
    return partial(_volume, a, b)


def _origin(measure: Measure) -> Measure:
    """The measure itself, or the one of which it is a multiple or a part."""
    return measure.origin if isinstance(measure, Changed) else measure


def _factor(measure: Measure) -> float | None:
    """The volume of a measure that is nothing but a flat floor without top."""
    terms = measure.powers()
    return terms[0][0] if terms and len(terms) == 1 and terms[0][1] == 0 else None


def _refuse_infinite(measure: Measure, exponent: float, top: float) -> None:
    """Raise NoAnswerError where Omega diverges at the top too fast for a partner that begins with an exponent."""
    if measure.bounded or measure.powers() is not None or top < measure.top or top == inf:
        return
    near, nearer = measure.volume(top * (1 - np.array([1e-6, 1e-9])))
    if nearer > near * 1e3 ** (0.99 * exponent):
        raise NoAnswerError(
            "the number of states below the escape energy is infinite: towards it the region grows without bound. "
            "Give the trap an E_max below the depth"
        )


def _joined(k1: float, k2: float) -> float:
    from scipy.special import beta

    return float((k1 + k2 + 1) * beta(k1 + 1, k2 + 1))


def _joined_breaks(a: Measure, b: Measure) -> tuple[float, ...]:
    """Where a break of one meets the bottom or a break of the other, close ones taken as one."""
    sums = sorted(p + q for p in (0.0, *a.breaks) for q in (0.0, *b.breaks))
    apart = [e for e, before in zip(sums, [-inf, *sums], strict=False) if e - before > 1e-12 * e]
    return tuple(apart)


def _volume(a: Measure, b: Measure, energies: FloatArray) -> FloatArray:
    """The convolution at energies (n,).

    Split at v = E/2 and the upper half taken by parts, so that each measure enters through its own density only
    near its own bottom, where the rule is graded.
    """
    blocks = [energies[i : i + BLOCK] for i in range(0, energies.size, BLOCK)]
    floor_a, floor_b = a.floor, b.floor
    parts = [
        _half(a, b, e)
        + _half(b, a, e)
        + floor_a * b.volume(e)
        + floor_b * a.volume(e)
        - a.volume(e / 2) * b.volume(e / 2)
        for e in blocks
    ]
    return np.concatenate(parts)


def _half(a: Measure, b: Measure, energies: FloatArray) -> FloatArray:
    """int_0^{E/2} a'(v) Omega_b(E - v) dv at energies (n,)."""
    total = np.zeros_like(energies)
    for v, dv, gap in _rules(a, b, energies):
        total += np.sum(dv * a.density_beside(v, gap) * b.volume(energies[:, None] - v), axis=1)
    return total


def _rules(a: Measure, b: Measure, energies: FloatArray) -> Iterator[Rule]:
    """Rules (n, nodes) that together cover [0, E/2], with the breaks of both measures on their ends."""
    middle = energies / 2
    knots = [np.minimum(p, middle) for p in a.breaks]
    knots += [np.where(energies > q, np.minimum(energies - q, middle), middle) for q in b.breaks]
    edges = np.sort(np.array([*knots, middle]), axis=0)
    t, dt = graded(a.exponent or 1.0)
    first = edges[0] if len(edges) == 1 else edges[0] / 2
    yield first[:, None] * t, first[:, None] * dt, None
    if len(edges) > 1:
        yield _towards(a, edges[0], -first)
        for i, (lo, hi) in enumerate(pairwise(edges)):
            middle = (lo + hi) / 2
            near = np.minimum(2 * lo, middle) if i == 0 else middle
            yield _towards(a, lo, near - lo)
            if i == 0:  # the bottom of a, just below, is as near as the first break
                yield _rising(near, middle)
            yield _towards(a, hi, middle - hi)


def _rising(lo: FloatArray, hi: FloatArray) -> Rule:
    """A rule on [lo, hi], lo > 0, in equal panels of ln v."""
    x, w = legendre(12)
    panels = 16
    share = ((np.arange(panels)[:, None] + x) / panels).ravel()
    length = np.log(hi / lo)[:, None]
    v = lo[:, None] * np.exp(length * share)
    return v, v * length * np.tile(w / panels, panels), None


def _towards(a: Measure, end: FloatArray, length: FloatArray) -> Rule:
    """A rule on the stretch of a signed length that begins at `end`, for a density that is singular there.

    The distances from the nearest break of a are exact, so its density keeps its digits beside 1/sqrt.
    """
    t, dt = quartering()
    step = length[:, None] * t**POWER
    v, dv = end[:, None] + step, np.abs(length)[:, None] * POWER * t ** (POWER - 1) * dt
    if not a.breaks:
        return v, dv, None
    breaks = np.array(a.breaks)
    nearest = breaks[np.argmin(np.abs(breaks[:, None] - end), axis=0)][:, None]
    gap = (end[:, None] - nearest) + step
    return np.where(gap < 0, np.minimum(v, np.nextafter(nearest, 0.0)), np.maximum(v, nearest)), dv, gap
