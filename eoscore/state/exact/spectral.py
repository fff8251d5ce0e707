"""One-dimensional Schroedinger problems between two points where the wave vanishes, by Legendre points.

The kinetic energy of polynomials is exact, the potential is diagonal: for a smooth potential every level converges
faster than any power of the number of points (Manolopoulos and Wyatt, Chem. Phys. Lett. 152, 23 (1988), from memory).
At kinks of the potential one stretch ends and the next begins, and so it does for those.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.state.exact.element import lobatto, radau

if TYPE_CHECKING:
    from collections.abc import Callable, Iterator, Sequence

    from numpy.typing import NDArray

    from eoscore.state.exact.element import Element
    from eoscore.state.reading import FloatArray

    Potential = Callable[[FloatArray, NDArray[np.intp]], FloatArray]

__all__ = ["converged", "eigenvalues"]

# Pairs of grids, points on each, tried in turn. A library that shares a matrix of more than 63 rows among threads may
# lose a hundred times what it gains on a busy machine: the smallest pair mostly does.
GRIDS = ((54, 63), (80, 100), (130, 160), (220, 260), (380, 440))
WANTED = 1e-9  # relative difference of two grids that is good enough not to try the next pair
ROUGH = 1e-6  # an error below that another grid does not make much smaller is one of rounding
PATIENCE = 100  # points after which a smooth potential converges fast
CLOSE = 1e-6  # of the longest problem: kinks nearer to one another, or to an end, are one
FEWEST = 4  # points of a stretch at least, however short it is
SIDE = 1e-11  # of a stretch: the potential at an end is that just inside, since it may jump there


def eigenvalues(
    potential: Potential,
    low: FloatArray,
    high: FloatArray,
    kinetic: float,
    count: int,
    points: int,
    *,
    planar: bool = False,
    kinks: Sequence[float] = (),
) -> FloatArray:
    """The lowest `count` levels (J) of -kinetic d^2/dx^2 + V between each low and high, kinetic = hbar^2/2m in J m^2.

    low, high: (problems,), m; `potential` takes places (some, points) and the problems they belong to (some,), and
    gives J. The levels: (problems, count). kinks: places where V is not smooth, m, ascending.
    planar: of -kinetic (d^2/dx^2 + (1/x) d/dx) + V, whose waves may have any value at low = 0.
    """
    levels = np.empty((low.size, count))
    for which, edges in _alike(low, high, kinks):
        own = _energies(potential, which, edges, kinetic, points, planar=planar)
        levels[which] = own[:, :count]
    return levels


def _alike(
    low: FloatArray, high: FloatArray, kinks: Sequence[float]
) -> Iterator[tuple[NDArray[np.intp], FloatArray]]:
    """Problems with the same kinks inside, and the edges of their stretches (some, stretches + 1)."""
    apart = CLOSE * float((high - low).max())
    places = np.array([k for last, k in zip([-np.inf, *kinks], kinks, strict=False) if k - last > apart])
    inside = (low[:, None] + apart < places) & (places < high[:, None] - apart)
    for row in np.unique(inside, axis=0):
        which = np.flatnonzero(np.all(inside == row, axis=1))
        between = np.broadcast_to(places[row], (which.size, int(row.sum())))
        yield which, np.column_stack([low[which], between, high[which]])


def _energies(
    potential: Potential,
    which: NDArray[np.intp],
    edges: FloatArray,
    kinetic: float,
    points: int,
    *,
    planar: bool,
) -> FloatArray:
    """All energies on grids of so many points: rows of problems with equally many stretches."""
    elements = _elements(edges, points, planar=planar)
    size = sum(each.x.size - 1 for each in elements) + 1
    weight, height, matrix = (np.zeros((which.size, size, *rest)) for rest in ((), (), (size,)))
    first = 0
    for k, each in enumerate(elements):
        part = slice(first, first + each.x.size)
        first += each.x.size - 1
        low, half = edges[:, k, None], (edges[:, k + 1] - edges[:, k])[:, None] / 2
        inner = np.clip(each.x, -1 + SIDE, 1 - SIDE)
        place = low + half * (1 + each.x)
        own = each.weight * half * (place if planar else 1.0)
        weight[:, part] += own
        height[:, part] += own * potential(low + half * (1 + inner), which)
        slopes = low[:, :, None] * each.still + half[:, :, None] * each.rising if planar else each.still
        matrix[:, part, part] += slopes * (kinetic / half[:, :, None])
    start = 0 if planar else 1  # waves vanish at the ends
    weight, height, matrix = weight[:, start:-1], height[:, start:-1], matrix[:, start:-1, start:-1]
    matrix /= np.sqrt(weight[:, :, None] * weight[:, None, :])
    diagonal = np.arange(weight.shape[1])
    matrix[:, diagonal, diagonal] += height / weight
    return np.asarray(np.linalg.eigvalsh(matrix))


def _elements(edges: FloatArray, points: int, *, planar: bool) -> list[Element]:
    """Points by length, and some more for each of several stretches; one alone has its waves away from its ends."""
    lengths = np.diff(edges, axis=1)
    share = (lengths / lengths.sum(axis=1)[:, None]).max(axis=0)
    several = share.size > 1
    more = max(FEWEST, min(points // 8, 2 * points // share.size)) if several else 0
    each = np.round(points * share / share.sum()).astype(int) + more
    first = (
        radau(int(each[0]) + 1, even=not several) if planar else lobatto(int(each[0]) + 2, even=not several)
    )
    return [first, *(lobatto(int(n) + 2, even=False) for n in each[1:])]


def converged(
    potential: Potential,
    low: FloatArray,
    high: FloatArray,
    kinetic: float,
    count: int,
    *,
    planar: bool = False,
    noise: float = 0.0,
    kinks: Sequence[float] = (),
) -> tuple[FloatArray, float]:
    """`eigenvalues` on the first pair of grids that agree, and how far these are apart, relative.

    noise: the relative error of levels that comes with the rounding of the potential.
    """
    best, least = np.empty(0), np.inf
    for pair in GRIDS:
        if pair[0] < 2 * count and pair != GRIDS[-1]:
            continue
        first, second = (
            eigenvalues(potential, low, high, kinetic, count, points, planar=planar, kinks=kinks)
            for points in pair
        )
        error = float(np.max(np.abs(first - second) / (np.gradient(second, axis=1) + np.abs(second))))
        stuck = error > least / 4 and (least < ROUGH or pair[0] > PATIENCE)
        if error < least:
            best, least = second, error
        if error < WANTED + noise or stuck:
            break
    return best, least
