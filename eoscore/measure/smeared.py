"""A sampled measure joined with powers, through the nodes that resolve it."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.measure.powers import Powers
from eoscore.measure.rules import quartering

if TYPE_CHECKING:
    from collections.abc import Callable

    from numpy.typing import NDArray

    from eoscore.measure.base import FloatArray, Foot
    from eoscore.measure.sampled import Sampled
    from eoscore.measure.table import Table

__all__ = ["footed", "smeared"]

CLEAR = 8.0  # feet above the bottom: below, the sampled measure is taken as its pure power
BLOCK = 64  # energies taken at once
GRADES, ORDER = 6, 14  # panels of the rules close to E, and their nodes
APART = 0.25  # of a piece of a panel: so far above its end its own nodes serve


def smeared(a: Sampled, b: Powers, energies: FloatArray) -> FloatArray:
    """int dOmega_a(v) Omega_b(E - v) at energies (n,), whatever waves and steps Omega_a has.

    The nodes of a serve wherever E - v is not small beside their piece of a panel; the others have rules of their own,
    graded towards E.
    """
    table = a.table(float(energies.max()))
    pieces = table.pieces
    v, w = table.rule(*pieces)
    ends = np.array([table.energy(pieces[0], s) for s in pieces[1:]])
    blocks = [energies[i : i + BLOCK] for i in range(0, energies.size, BLOCK)]
    whole = np.concatenate([_far(b, e, v, w, ends) + _near(table, b, e, ends) for e in blocks])
    whole += footed(a.footing, b.volume, energies)
    return np.where(energies < CLEAR * a.foot, _pure(a, b, energies), whole)


def _beyond(e: FloatArray, ends: FloatArray) -> NDArray[np.bool_]:
    """Whether energies (n,) lie well above pieces (m,): (n, m)."""
    first, last = ends
    return np.asarray(e[:, None] > last + APART * (last - first))


def _far(b: Powers, e: FloatArray, v: FloatArray, w: FloatArray, ends: FloatArray) -> FloatArray:
    far = _beyond(e, ends)
    some = far.any(axis=0)
    height = np.where(far[:, some, None], e[:, None, None] - v[some], 0.0)
    return np.asarray(np.einsum("nmk,mk->n", np.where(far[:, some, None], b.volume(height), 0.0), w[some]))


def _near(table: Table, b: Powers, e: FloatArray, ends: FloatArray) -> FloatArray:
    """The share of the pieces that hold E or end close below it."""
    row, piece = np.nonzero(~_beyond(e, ends) & (e[:, None] > ends[0]))
    which, low = table.pieces[0][piece], table.pieces[1][piece]
    high: FloatArray = table.pieces[2][piece]
    held = np.flatnonzero(e[row] < ends[1][piece])
    high[held] = table.local(which[held], e[row[held]])
    t, dt = quartering(GRADES, ORDER)
    length = (high - low)[:, None]
    s = high[:, None] - length * t**2
    v = table.energy(which[:, None], s)
    part = table.rise(which[:, None], s, v) * b.volume(np.maximum(e[row, None] - v, 0.0))
    return np.asarray(np.bincount(row, (part * (2 * t * dt) * length).sum(axis=1), e.size), dtype=float)


def footed(foot: Foot, volume: Callable[[FloatArray], FloatArray], energies: FloatArray) -> FloatArray:
    """The share of the foot, whose power is the weight of a Gauss rule."""
    from scipy.special import roots_jacobi

    if foot.exponent == 0:
        return foot.volume * volume(energies)
    x, w = roots_jacobi(12, 0.0, foot.exponent - 1)
    inner = volume(energies[:, None] - foot.edge * (1 + x) / 2)
    return np.asarray(foot.volume * (inner @ w) / w.sum())


def _pure(a: Sampled, b: Powers, energies: FloatArray) -> FloatArray:
    """The same where a is a pure power."""
    from eoscore.measure.convolve import convolve

    c = float(a.volume(a.foot)) / a.foot**a.exponent
    return convolve(Powers([(c, a.exponent)]), Powers(b.terms)).volume(energies)
