"""Route: one coordinate with very many wells, as a lattice in an envelope: all stretches of the line at once."""

from __future__ import annotations

from math import inf
from typing import TYPE_CHECKING

import numpy as np

from eoscore.measure.branch import Branch
from eoscore.measure.crowded import Crowd
from eoscore.measure.landscape_pieces import FAR
from eoscore.measure.slopes import Slopes, joined, slopes, strata

if TYPE_CHECKING:
    from eoscore.measure.base import FloatArray
    from eoscore.measure.landscape_record import Landscape
    from eoscore.measure.profile import HeldLine

__all__ = ["crowd"]

UNRESOLVED = 1e-8  # tails of all series beside all space: above, V is no smooth wave
FEW = 16  # breaks that others may take as ends of panels
STRATA = 2**16  # linear stretches in place of turns that are not known
HALVINGS = 10  # of a part of a stretch to infinity, which may hold so many shoulders
GOLDEN = 0.6180339887498949
STEPS = 4.0 ** np.arange(-1, 61)  # where a stretch without end is cut, in units of the waves' height
NEAREST, FARTHEST = 1e-12, 1e24  # m, of linear stretches
NEARER = 4.0 ** -np.arange(1, 26)  # and one that levels off, from its limit in units of its height


def crowd(held: HeldLine, landscape: Landscape) -> Crowd | None:
    """Omega of a held line; None where V is no smooth wave, so that a few terms do not tell it."""
    bottom = landscape.bottom
    x, rise = _without(held.gaps, held.x, held.rise)
    if bottom is None or len(x) < 4 or not np.isfinite(rise[1:-1]).all():
        return None
    unknown = [_sampled(held, np.geomspace(a, b, STRATA), bottom.value) for a, b in held.gaps.tolist()]
    cuts = np.unique(held.gaps)
    if cuts.size:
        v = np.broadcast_to(held.formula.evaluate({held.name: cuts}), cuts.shape) - bottom.value
        order = np.argsort(np.concatenate([x, cuts]), kind="stable")
        x, rise = np.concatenate([x, cuts])[order], np.concatenate([rise, v])[order]
    low, high, first, last = x[:-1], x[1:], rise[:-1], rise[1:]
    plain = (high > low) & np.isfinite(low) & np.isfinite(high) & ~np.isin(low, held.gaps[:, 0])
    height = float(np.median(np.abs(last - first)[plain]))
    known = [_between(held, low[plain], high[plain], first[plain], last[plain])]
    for end, beside in ((0, 1), (-1, -2)):
        if np.isinf(x[end]) and rise[end] > rise[beside]:
            told, sampled = _long(held, x[[beside, end]], rise[[beside, end]], height, bottom.value)
            known, unknown = known + told, unknown + sampled
    if known[0].unresolved > UNRESOLVED * known[0].whole.sum():
        return None
    breaks = held.breaks if len(held.breaks) <= FEW else ()
    return Crowd(held.name, joined(known), joined(unknown) if unknown else None, landscape.depth, breaks)


def _without(gaps: FloatArray, x: FloatArray, rise: FloatArray) -> tuple[FloatArray, FloatArray]:
    """The turning points that do not lie in a gap."""
    known = (
        np.all([(x <= a) | (x >= b) for a, b in gaps.tolist()], axis=0)
        if len(gaps)
        else np.ones(x.shape, bool)
    )
    return x[known], rise[known]


def _between(held: HeldLine, a: FloatArray, b: FloatArray, v_a: FloatArray, v_b: FloatArray) -> Slopes:
    falls = v_a > v_b
    ends = np.stack([np.minimum(v_a, v_b), np.maximum(v_a, v_b)], axis=1)
    return slopes(held.name, held.formula, np.where(falls, b, a), np.where(falls, a, b), ends)


def _long(
    held: HeldLine, x: FloatArray, rise: FloatArray, height: float, v_min: float
) -> tuple[list[Slopes], list[Slopes]]:
    """A stretch from x[0] to infinity: what series tell of it, and what is sampled.

    Cut where V has risen by powers of 4 or come as near to its limit. Where it has shoulders without number, it is
    sampled from there on.
    """
    (start, end), (base, limit) = x.tolist(), rise.tolist()
    sign = 1 if end > 0 else -1
    branch = Branch(held.name, held.formula, start, sign, inf, base)
    nearer = float(held.formula.evaluate({held.name: sign * FAR / 10})) - v_min
    rises = height * STEPS if nearer < 0.9 * limit else (limit - base) * (1 - NEARER)
    rises = rises[(rises > 1e-12 * base) & (rises < branch.rises[-1])]
    places, levels = (
        np.append(start, start + sign * branch.reach(base + rises)),
        np.append(base, base + rises),
    )
    new = np.append(True, np.diff(places) * sign > 0)
    places, levels = places[new], levels[new]
    found: list[Slopes] = []
    for k in range(len(places) - 1):
        ends = levels[None, k : k + 2]
        part = slopes(
            held.name, held.formula, places[k : k + 1], places[k + 1 : k + 2], ends, rounds=HALVINGS
        )
        if np.any(part.tail > (UNRESOLVED + part.noise) * part.whole):
            far = start + sign * np.geomspace(max(abs(places[k] - start), NEAREST), FARTHEST, STRATA)
            return found, [_sampled(held, np.unique(np.append(places[k], far))[::sign], v_min)]
        found.append(part)
    return found, []


def _sampled(held: HeldLine, x: FloatArray, v_min: float) -> Slopes:
    """The space between neighbours of x where V has more waves than can be followed: V at a point in each.

    The points meet the waves at every phase alike (multiples of the golden ratio, Weyl 1916).
    """
    share = (GOLDEN * np.arange(len(x) - 1)) % 1
    points = x[:-1] + share * np.diff(x)
    v = np.broadcast_to(held.formula.evaluate({held.name: points}), points.shape)
    return strata(held.name, x, v - v_min)
