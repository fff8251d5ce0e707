"""Levels above the known ones where these stagger, as they do about their smooth count where V has kinks.

Waves come back from a kink in a phase that turns from level to level, so that N(E_n) = n + 1/2 + q + d_n with d_n of
both signs. A sum that fades out over many levels, while the integral fades in, does not see what turns.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np
from scipy.special import erfc

from eoscore.measure.rules import legendre
from eoscore.state.exact.tail import NODES, WALL, edges_of, slopes_of

if TYPE_CHECKING:
    from collections.abc import Callable

    from eoscore.state.reading import FloatArray

__all__ = ["SEEN", "TURNED", "faded"]

SEEN = 0.7  # of the highest known level: how far up a kink may turn a wave for its levels to be known
TURNED = 0.1  # of a level that may be lost or won where waves come to reach a kink

SHARE = 0.55  # of the known levels over which their sum fades
REACH = 6.5  # standard deviations on either side in which it does: 4e-11 is left
PANELS = 5  # of the integral meanwhile


def faded(
    energies: FloatArray,
    count: Callable[[FloatArray], FloatArray],
    top: float,
    breaks: tuple[float, ...] = (),
    walls: FloatArray | None = None,
) -> tuple[FloatArray, FloatArray]:
    """Energies and weights that stand for all levels of a line up to `top`, J from its bottom; see `tail.ladder`."""
    known = energies.size
    width = SHARE * known / (2 * REACH)
    middle = known - 1 - REACH * width
    first = np.interp(middle - REACH * width, np.arange(known), energies)
    inner = np.linspace(first, energies[-1], PANELS + 1)
    outer = edges_of(energies[None, -1:], np.zeros((1, 1)), max(top, float(energies[-1])), breaks)[0]
    marks = np.array([b for b in breaks if first < b < energies[-1]])
    edges = np.sort(np.concatenate([inner, outer[1:], marks]))
    x, w = legendre(NODES)
    e = edges[:-1, None] + np.diff(edges)[:, None] * x
    number = count(e.ravel()).reshape(e.shape) - 0.5 - _excess(energies, count, width)(e)
    weight = w * (number @ slopes_of().T) * (1 - _left(number, middle, width))
    parts = [(energies, _left(np.arange(float(known)), middle, width)), (e.ravel(), weight.ravel())]
    if walls is not None and walls.size:
        share = np.where(walls > energies[-1], -WALL, 0.0)
        parts.append((np.maximum(walls, energies[-1]), share))
    return np.concatenate([p for p, _ in parts]), np.concatenate([q for _, q in parts])


def _left(n: FloatArray, middle: float, width: float) -> FloatArray:
    """The share of level n that its sum counts."""
    return np.asarray(erfc((n - middle) / (2**0.5 * width)) / 2)


def _excess(
    energies: FloatArray, count: Callable[[FloatArray], FloatArray], width: float
) -> Callable[[FloatArray], FloatArray]:
    """q + d_n without what turns, as a function of the energy: q + a/N + b/N^2 through means over many levels."""
    known = energies.size
    n = np.arange(known)
    number = count(energies)
    excess = number - (n + 0.5)
    quarter = np.round(excess[known // 2 :].mean() / WALL) * WALL
    weight = np.exp(-(((n - known * np.array([[0.45], [0.75]])) / (1.5 * width)) ** 2))
    weight /= weight.sum(axis=1)[:, None]
    rows = np.stack([weight @ number**-1.0, weight @ number**-2.0], axis=1)
    a, b = np.linalg.solve(rows, weight @ (excess - quarter))

    def smooth(e: FloatArray) -> FloatArray:
        whole = count(e.ravel()).reshape(e.shape)
        return np.asarray(quarter + a / whole + b / whole**2)

    return smooth
