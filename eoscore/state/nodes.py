"""Bose and classical gases over any measure, or below a top: sums over its nodes.

The nodes are fixed energies, so a state costs one exponential for each. States are told apart by their kT in
stretches of a factor 4096, since nodes reach 45 kT far.
"""

from __future__ import annotations

from functools import lru_cache
from math import ceil, inf
from typing import TYPE_CHECKING

import numpy as np

from eoscore.measure.base import Foot, Nodes
from eoscore.measure.rules import log_panels
from eoscore.state.closed import diverges
from eoscore.state.ensemble import BLOCK, EPS, Ensemble
from eoscore.state.foot import foot_means
from eoscore.state.sums import Sums

if TYPE_CHECKING:
    from collections.abc import Callable, Iterator

    from numpy.typing import NDArray

    from eoscore.measure.base import Measure
    from eoscore.state.reading import FloatArray

__all__ = ["NodeBose", "OverNodes"]

REACH = 45.0  # e^-45 = 3e-20 is dropped
STRETCH = 12  # octaves of kT that share nodes
DEEP = 2.0**-40  # the foot ends at this share of the least kT, or lower


class OverNodes(Ensemble):
    """What all sums over fixed nodes share: the nodes for each stretch of kT, and blocks of states."""

    def __init__(self, measure: Measure) -> None:
        self.measure = measure
        self.exponent = measure.exponent
        self.top = measure.top
        self.route = measure.route if measure.top == inf else f"{measure.route}, up to the escape energy"
        self._rules = lru_cache(maxsize=64)(self._rule)

    @property
    def error(self) -> float:
        """See `Ensemble.error`: of the measure, which may grow while it is asked further up, and of the rule."""
        return self.measure.error + 2000 * EPS

    def _rule(self, stretch: int) -> Nodes:
        low, high = 2.0 ** (stretch * STRETCH), 2.0 ** ((stretch + 1) * STRETCH)
        rule = _of_powers(self.measure, REACH * high) or self.measure.nodes(REACH * high)
        foot = rule.foot
        edge = min(foot.edge, low * DEEP)
        if edge == foot.edge or foot.exponent == 0:
            return rule
        v, dv = log_panels(edge, foot.edge)
        w = foot.coefficient * foot.exponent * v ** (foot.exponent - 1) * dv
        foot = Foot(foot.coefficient, foot.exponent, edge)
        return Nodes(np.concatenate([v, rule.v]), np.concatenate([w, rule.w]), foot)

    def _over(
        self, work: Callable[[FloatArray, FloatArray, Nodes], tuple[FloatArray, ...]], *columns: FloatArray
    ) -> tuple[FloatArray, ...]:
        """work(alpha, kT, nodes) of states that share nodes, in blocks; results put back in order."""
        alpha, kT = columns
        results: list[FloatArray] = []
        for where, rule in self._stretches(kT):
            for part in np.array_split(where, ceil(where.size * rule.v.size / BLOCK)):
                with np.errstate(over="ignore", under="ignore"):
                    got = work(alpha[part], kT[part], rule)
                results = results or [np.full(kT.shape, np.nan) for _ in got]
                for whole, piece in zip(results, got, strict=True):
                    whole[part] = piece
        return tuple(results)

    def _stretches(self, kT: FloatArray) -> Iterator[tuple[NDArray[np.intp], Nodes]]:
        keys = np.floor(np.log2(kT) / STRETCH).astype(int)
        for key in np.unique(keys):
            yield np.flatnonzero(keys == key), self._rules(int(key))

    def below(self, number: FloatArray) -> FloatArray:
        """See `Ensemble.below`: bisection of Omega in ln E, from the pure power at the bottom."""
        return energy_below(self.measure, number)

    def boltzmann(self, kT: FloatArray) -> tuple[FloatArray, FloatArray]:
        """See `Ensemble.boltzmann`."""
        z, e = self._over(_boltzmann, np.zeros_like(kT), kT)
        return z, e


class NodeBose(OverNodes):
    """Bosons over any measure."""

    statistics = "bose"

    @property
    def condenses(self) -> bool:
        """See `Ensemble.condenses`."""
        return self.exponent > 1

    @property
    def why_not(self) -> str:
        """See `Ensemble.why_not`."""
        return diverges(self.exponent)

    def number(self, alpha: FloatArray, kT: FloatArray) -> tuple[FloatArray, FloatArray]:
        """See `Ensemble.number`."""
        n, b = self._over(_bose_count, alpha, kT)
        return n, b

    def all_sums(self, alpha: FloatArray, kT: FloatArray) -> Sums:
        """See `Ensemble.all_sums`."""
        return Sums(*self._over(_bose_sums, alpha, kT))


def _of_powers(measure: Measure, reach: float) -> Nodes | None:
    """The nodes of a sum of powers, on panels with enough nodes for x^8 e^-x; None for other measures."""
    if measure.powers() is None:
        return None
    end = min(reach, measure.top)
    edge = end * 2.0**-60
    v, dv = log_panels(edge, end, 22)
    foot = Foot(float(measure.volume(edge)) / edge**measure.exponent, measure.exponent, edge)
    return Nodes(v, dv * measure.density(v), foot)


def energy_below(measure: Measure, number: FloatArray) -> FloatArray:
    """An energy (J) within a factor 2 of where Omega reaches `number`; the top where it does not."""
    start = measure.top if measure.top < inf else (measure.breaks or (measure.scale,))[0]
    low = np.full(number.shape, start if start < inf else 1e-30)
    for _ in range(2000):
        volume = measure.volume(low)
        up, down = (2 * volume < number) & (low < measure.top), volume > 2 * number
        if not np.any(up | down):
            break
        with np.errstate(divide="ignore", invalid="ignore"):
            jump = np.clip(np.log2(number / volume) / max(measure.exponent, 0.5), -30, 30)
        low = np.minimum(np.where(up | down, low * 2.0**jump, low), measure.top)
    return low


def _boltzmann(_: FloatArray, kT: FloatArray, rule: Nodes) -> tuple[FloatArray, FloatArray]:
    weight = rule.w * np.exp(-rule.v / kT[:, None])
    z = weight.sum(axis=1) + rule.foot.volume
    k = rule.foot.exponent
    return z, (weight @ rule.v + rule.foot.volume * rule.foot.edge * k / (k + 1)) / (kT * z)


def _bose_count(alpha: FloatArray, kT: FloatArray, rule: Nodes) -> tuple[FloatArray, FloatArray]:
    f = 1 / np.expm1(rule.v / kT[:, None] + alpha[:, None])
    number = f @ rule.w
    f *= f
    foot = _bose_foot(alpha, kT, rule.foot)
    return number + foot[0], number + f @ rule.w + foot[4]


def _bose_sums(alpha: FloatArray, kT: FloatArray, rule: Nodes) -> tuple[FloatArray, ...]:
    t = rule.v / kT[:, None] + alpha[:, None]
    f = 1 / np.expm1(t)
    log = np.log1p(f)
    n = f @ rule.w
    u = f @ (rule.w * rule.v)
    y = log @ rule.w
    s = y + u / kT + alpha * n
    spread = f * (1 + f)
    b0 = spread @ rule.w
    spread *= t
    b1 = spread @ rule.w
    spread *= t
    nodes = n, u, s, y, b0, b1, spread @ rule.w
    return tuple(a + b for a, b in zip(nodes, _bose_foot(alpha, kT, rule.foot), strict=True))


def _bose_foot(alpha: FloatArray, kT: FloatArray, foot: Foot) -> tuple[FloatArray, ...]:
    """The seven sums over the foot, where x is below 1e-12: f and its kin are those at alpha plus a mean of 1/t."""
    k, mass = foot.exponent, foot.volume
    f, w, tw, ttw, log = _at_bottom(alpha)
    if k == 0:
        zero = np.zeros_like(alpha)
        return mass * f, zero, mass * (log + alpha * f), mass * log, mass * w, mass * tw, mass * ttw
    x = foot.edge / kT
    a = alpha / x
    first, second = foot_means(k, a)
    small = alpha < 1e-3
    with np.errstate(divide="ignore", invalid="ignore", over="ignore"):
        inverse = first / x
        f = np.where(small, inverse - 0.5 + alpha / 12, f)
        w = np.where(small, second / x**2 - 1 / 12, w)
        tw = np.where(small, inverse - alpha / 12, tw)
        lean = 1 - np.where(alpha > 0, a * first, 0.0)
        log = np.where(small, -np.log(-np.expm1(-(x + alpha))) + lean / k, log)
        xf = np.where(small, lean, x * k / (k + 1) * f)
        af = np.where(alpha > 0, alpha * f, 0.0)
    return mass * f, mass * kT * xf, mass * (log + xf + af), mass * log, mass * w, mass * tw, mass * ttw


def _at_bottom(alpha: FloatArray) -> tuple[FloatArray, ...]:
    """f, w, t w, t^2 w and -ln(1 - e^-t) at t = alpha, with their limits at 0."""
    with np.errstate(divide="ignore", invalid="ignore", over="ignore"):
        f = 1 / np.expm1(alpha)
        w = f * (1 + f)
        ttw = np.where(alpha > 1e-12, alpha**2 * w, 1.0)
        return f, w, np.where(alpha > 0, alpha * w, np.inf), ttw, np.log1p(f)
