"""Nodes for sums over a measure at temperatures of one stretch."""

from __future__ import annotations

from math import ceil, inf, log
from typing import TYPE_CHECKING

import numpy as np
from numpy.polynomial.chebyshev import chebvander

from eoscore.constants import K_B
from eoscore.errors import NoAnswerError
from eoscore.measure import Foot, Nodes
from eoscore.measure.rules import RATIO, legendre, log_panels

if TYPE_CHECKING:
    from eoscore.measure import Measure
    from eoscore.state.reading import FloatArray

__all__ = ["REACH", "rule_for", "smooth_rule"]

LOW, FAINT = 1e-5, 1e-10  # of kT, and of the states below kT: as high and as full a foot may be
REACH = 45.0  # e^-45 = 3e-20 is dropped
NEGLIGIBLE = 1e-17
SOARING, MODEST = 1e3, 4.5  # times the growth by the power at the bottom, or by this one
LONGER = 8  # times the reach is made half as long again
AGREED = 1e-12  # relative, between the weights and the difference of Omega over the panels
MARGINAL = 2.5  # below, -dN/dalpha close to saturation comes from the foot
ORDER = 22  # of a panel in ln v over a factor 8: x^8 e^-x to 1e-14
POINTS = 26  # of a condensed panel
AT_BREAK = 44  # of a panel that ends at a break, in the fourth root of the distance to it


def rule_for(measure: Measure, low: float, high: float) -> Nodes:
    """int g dOmega for Bose and Boltzmann functions g of E/kT, kT from `low` to `high` (J), mu at or below 0.

    The foot reaches up to where it would show that Omega is no pure power, or that f is not 1/t there: much higher
    than a rule for every kT could let it, so that fewer nodes are needed. The weights must add up to the
    difference of Omega, else the measure's own nodes are taken. NoAnswerError where the sums do not end.
    """
    end = min(measure.top, REACH * high)
    if _soars(measure, high, end):
        return _with_low_foot(measure.nodes(_enough(measure, high)), low)
    edge = min(_edge(measure, low), end / 8)
    v, w = _panels(measure, edge, end)
    k = measure.exponent
    first, last = (float(measure.volume(e)) for e in (edge, end))
    if abs(first + w.sum() - last) > max(AGREED, measure.error) * last:
        return _condensed(_with_low_foot(measure.nodes(end), low), end)
    return Nodes(v, w, Foot(first / edge**k, k, edge))


def smooth_rule(measure: Measure, low: float, high: float) -> Nodes:
    """The same for functions of sqrt(v), as local densities are, by the measure's own nodes: it may be rough.

    The foot reaches up to LOW kT, or to where it holds the share FAINT.
    """
    end = min(measure.top, REACH * high)
    rule = measure.nodes(end)
    if rule.foot.exponent == 0:
        return rule
    edge = max(low * min(LOW, FAINT ** (1 / rule.foot.exponent)), rule.foot.edge)
    above = rule.v > edge
    share = rule.foot.volume + float(rule.w[~above].sum())
    foot = Foot(share / edge**rule.foot.exponent, rule.foot.exponent, edge)
    return _condensed(Nodes(rule.v[above], rule.w[above], foot), end)


def _soars(measure: Measure, kT: float, end: float) -> bool:
    """Whether Omega grows much faster than at the bottom, as it does where V rises like a logarithm."""
    if end == measure.top or measure.powers() is not None:
        return False
    first, last = (float(measure.volume(e)) for e in (kT, end))
    return bool(last > SOARING * first * (end / kT) ** max(measure.exponent, MODEST))


def _enough(measure: Measure, kT: float) -> float:
    """The energy above which nothing counts at kT."""
    first, reach = float(measure.volume(kT)), REACH
    for _ in range(LONGER):
        last = float(measure.volume(reach * kT))
        if last == inf:
            break
        if log(last / first) < reach + 0.8 * log(NEGLIGIBLE):
            return reach * kT
        reach *= 1.5
    raise NoAnswerError(
        f"V rises so slowly far out that the sum over states does not end at T = {kT / K_B:.3g} K; lower T or N, or "
        "give the trap walls (`where`) or an E_max"
    )


def _edge(measure: Measure, low: float) -> float:
    """The end of the foot: its share of N is x^(k-1), x = edge/kT, and its error there x^2, and edge/scale."""
    k = measure.exponent
    if k == 0:
        return low * 2.0**-60
    share = max(k - 1.0, 0.0)
    x = min(NEGLIGIBLE ** (1 / (share + 2)), 1e-5)
    if measure.scale < inf:
        x = min(x, (NEGLIGIBLE * measure.scale / low) ** (1 / (share + 1)))
        if k < MARGINAL:
            x = min(x, 1e-13 * measure.scale / low)
    return float(low * x)


def _panels(measure: Measure, start: float, end: float) -> tuple[FloatArray, FloatArray]:
    """Nodes and weights dOmega between the foot and the end, split at breaks and before a top."""
    marks = [b for b in measure.breaks if start < b < end]
    if end == measure.top and measure.powers() is None:
        marks.append(end)
    parts: list[tuple[FloatArray, FloatArray]] = []
    lo, after_break = start, False
    for mark in marks:
        middle = (lo + mark) / 2
        left = min(2 * lo, middle) if after_break else lo
        right = max(mark / 2, left)
        parts += [_from_break(lo, left)] if after_break else []
        parts += [log_panels(left, right, ORDER)] if right > left else []
        v, dv = _from_break(0.0, mark - right)
        parts.append((mark - v[::-1], dv[::-1]))
        lo, after_break = mark, True
    if lo < end:
        left = min(2 * lo, end) if after_break else lo
        parts += [_from_break(lo, left)] if after_break else []
        parts += [log_panels(left, end, ORDER)] if end > left else []
    v, dv = (np.concatenate(columns) for columns in zip(*parts, strict=True))
    return v, dv * measure.density(v)


def _from_break(lo: float, hi: float) -> tuple[FloatArray, FloatArray]:
    t, w = legendre(AT_BREAK)
    return lo + (hi - lo) * t**4, (hi - lo) * 4 * t**3 * w


def _with_low_foot(rule: Nodes, low: float) -> Nodes:
    """A measure's own rule, with a foot that is low enough for kT = low."""
    foot = rule.foot
    edge = low * 2.0**-40
    if foot.edge <= edge or foot.exponent == 0:
        return rule
    v, dv = log_panels(edge, foot.edge)
    w = foot.coefficient * foot.exponent * v ** (foot.exponent - 1) * dv
    lower = Foot(foot.coefficient, foot.exponent, edge)
    return Nodes(np.concatenate([v, rule.v]), np.concatenate([w, rule.w]), lower)


def _condensed(rule: Nodes, end: float) -> Nodes:
    """A long rule on fewer nodes: the same for every polynomial in ln v of degree 25 on panels of a factor 8.

    Each weight goes to Chebyshev points by the interpolation polynomials there, whatever made the measure rough.
    """
    edge = rule.foot.edge
    count = ceil(log(end / edge) / log(RATIO))
    if rule.v.size <= count * POINTS:
        return rule
    place = np.log(rule.v / edge) / log(end / edge) * count
    which = np.clip(place.astype(int), 0, count - 1)
    modes = chebvander(2 * (place - which) - 1, POINTS - 1) * rule.w[:, None]
    moments = np.array([modes[which == panel].sum(axis=0) for panel in range(count)])
    x = np.cos(np.pi * (np.arange(POINTS)[::-1] + 0.5) / POINTS)
    back = chebvander(x, POINTS - 1) * np.where(np.arange(POINTS) > 0, 2.0, 1.0) / POINTS
    v = edge * (end / edge) ** ((np.arange(count)[:, None] + (1 + x) / 2) / count)
    return Nodes(v.ravel(), (moments @ back.T).ravel(), rule.foot)
