"""Reference values for the laws: what an energy formula gives when SciPy integrates it, and nothing else."""

from __future__ import annotations

from functools import lru_cache, partial
from itertools import pairwise
from typing import TYPE_CHECKING

import numpy as np

from eoscore.gas.momentum import ball

if TYPE_CHECKING:
    from collections.abc import Callable, Sequence

    from numpy.typing import NDArray

    from eoscore.gas.dispersion import Dispersion
    from eoscore.measure.base import FloatArray

__all__ = ["SCAN", "inside", "partition", "volume_below"]

SCAN = np.geomspace(1e-40, 1e-12, 5_000)  # |p| in kg m/s, from below any trap to above any accelerator
FADED = 60.0  # e^-60 = 9e-27 is dropped


def inside(dispersion: Dispersion, momenta: Sequence[FloatArray]) -> NDArray[np.bool_]:
    """Where the momenta (one array per component) lie inside every wall."""
    given = dict(zip(dispersion.field.coordinates, momenta, strict=True))
    zone = np.ones(np.broadcast_shapes(*(p.shape for p in momenta)), dtype=bool)
    for wall in dispersion.field.walls:
        zone &= np.asarray(wall.evaluate(given)) > 0
    return zone


def partition(dispersion: Dispersion, beta: float, d: int) -> tuple[float, float]:
    """int d^dp e^{-beta (E - min E)} in (kg m/s)^d, and an estimate of its error."""
    return (_isotropic if dispersion.field.coordinates == ("p",) else _cartesian)(dispersion, beta, d)


def volume_below(dispersion: Dispersion, energy: float, d: int) -> float:
    """The volume in (kg m/s)^d where an isotropic E - min E < energy, by root finding."""
    limit = _least(dispersion) + energy

    def below(p: FloatArray) -> FloatArray:
        return np.where(inside(dispersion, [p]), limit - dispersion.energy_at(p), -np.inf)

    shells = _stretches(below)
    return ball(d) * sum(hi**d - lo**d for lo, hi in shells)


@lru_cache(maxsize=8)
def _least(dispersion: Dispersion) -> float:
    """The least energy of an isotropic formula, refined about the lowest point of the scan."""
    from scipy.optimize import minimize_scalar

    energy = np.where(inside(dispersion, [SCAN]), dispersion.energy_at(SCAN), np.inf)
    k = int(np.argmin(energy))
    if k in (0, len(SCAN) - 1):
        return float(energy[k])
    ends = (float(np.log(SCAN[k - 1])), float(np.log(SCAN[k + 1])))
    found = minimize_scalar(
        lambda log_p: float(dispersion.energy_at(np.exp(log_p))),
        bounds=ends,
        method="bounded",
        options={"xatol": 1e-12},
    )
    return min(float(energy[k]), float(found.fun))


def _stretches(function: Callable[[FloatArray], FloatArray]) -> list[tuple[float, float]]:
    """The intervals of |p| where a function is positive, their ends by bisection to all digits."""
    held = function(SCAN) > 0
    ends = [0.0] if held[0] else []
    for k in np.flatnonzero(held[1:] != held[:-1]):
        lo, hi = np.log(SCAN[k]), np.log(SCAN[k + 1])
        for _ in range(60):
            middle = (lo + hi) / 2
            same = (function(np.exp(np.array([middle]))) > 0)[0] == held[k]
            lo, hi = (middle, hi) if same else (lo, middle)
        ends.append(float(np.exp((lo + hi) / 2)))
    return list(zip(ends[::2], [*ends[1::2], *([SCAN[-1]] if held[-1] else [])], strict=True))


def _isotropic(dispersion: Dispersion, beta: float, d: int) -> tuple[float, float]:
    from scipy.integrate import quad

    least = _least(dispersion)

    def filled(p: FloatArray) -> FloatArray:
        return np.where(inside(dispersion, [p]), FADED - beta * (dispersion.energy_at(p) - least), -np.inf)

    def integrand(p: float) -> float:
        return float(d * ball(d) * p ** (d - 1) * np.exp(-beta * (dispersion.energy_at(p) - least)))

    value = error = 0.0
    for lo, hi in _stretches(filled):
        for a, b in pairwise([lo, *(lo + (hi - lo) * np.array([1e-4, 1e-2, 0.1, 0.3, 1.0]))]):
            part, off = quad(integrand, a, b, epsabs=0, epsrel=1e-12, limit=200)
            value, error = value + part, error + off
    return value, error


def _cartesian(dispersion: Dispersion, beta: float, d: int) -> tuple[float, float]:
    """Tensor Gauss-Legendre in panels over the box that holds the thermal particles; two orders give the error."""
    box = [_extent(dispersion, beta, axis, d) for axis in range(d)]
    grids = [_grid(dispersion, box, order) for order in (14, 11)]
    least = _lowest(dispersion, *grids[0][:2])
    fine, rough = (_summed(np.exp(-beta * (energy - least)), weights) for _, energy, weights in grids)
    return fine, abs(fine - rough)


def _extent(dispersion: Dispersion, beta: float, axis: int, d: int) -> list[tuple[float, float]]:
    """The stretches of one momentum that hold thermal particles while the others are zero, either sign."""
    found: list[tuple[float, float]] = []
    for sign in (-1.0, 1.0):
        held = partial(_held, dispersion, beta, axis, d, sign)
        found += [(min(sign * a, sign * b), max(sign * a, sign * b)) for a, b in _stretches(held)]
    return found


def _held(dispersion: Dispersion, beta: float, axis: int, d: int, sign: float, p: FloatArray) -> FloatArray:
    """Positive where a particle with this momentum along one axis is thermal."""
    scan, at = ([sign * q if i == axis else np.zeros_like(q) for i in range(d)] for q in (SCAN, p))
    least = np.min(dispersion.energy_at(*scan)[inside(dispersion, scan)])
    return np.where(inside(dispersion, at), FADED - beta * (dispersion.energy_at(*at) - least), -np.inf)


Grid = tuple["list[FloatArray]", "FloatArray", "list[FloatArray]"]


def _grid(dispersion: Dispersion, box: list[list[tuple[float, float]]], order: int) -> Grid:
    """Momenta, energies (inf outside the zone) and weights of the tensor rule."""
    x, w = np.polynomial.legendre.leggauss(order)
    nodes, weights = [], []
    for stretches in box:
        edges = [np.linspace(lo, hi, 5) for lo, hi in stretches]
        pairs = [(a, b) for e in edges for a, b in pairwise(e)]
        nodes.append(np.concatenate([(a + b) / 2 + (b - a) / 2 * x for a, b in pairs]))
        weights.append(np.concatenate([(b - a) / 2 * w for a, b in pairs]))
    momenta = list(np.meshgrid(*nodes, indexing="ij", sparse=True))
    return momenta, np.where(inside(dispersion, momenta), dispersion.energy_at(*momenta), np.inf), weights


def _summed(total: FloatArray, weights: list[FloatArray]) -> float:
    for each in reversed(weights):
        total = total @ each
    return float(total)


def _lowest(dispersion: Dispersion, momenta: list[FloatArray], energy: FloatArray) -> float:
    """The least energy, by the simplex of Nelder and Mead from the lowest point of the grid, within the zone."""
    from scipy.optimize import minimize

    where = np.unravel_index(int(np.argmin(energy)), energy.shape)
    start = np.array([axis.ravel()[k] for axis, k in zip(momenta, where, strict=True)])
    scale = max(float(np.abs(axis).max()) for axis in momenta)
    unit = max(abs(float(energy[where])), float(np.min(energy[energy > energy[where]]) - energy[where]))

    def lowered(x: FloatArray) -> float:
        at = [np.asarray(scale * each) for each in x]
        free = inside(dispersion, at)
        return float(dispersion.energy_at(*at) - energy[where]) / unit if free else np.inf

    found = minimize(lowered, start / scale, method="Nelder-Mead", options={"xatol": 1e-9, "fatol": 1e-12})
    return float(energy[where] + unit * min(found.fun, 0.0))
