"""Bose and classical gases over any measure, or below a top: sums over its nodes.

The nodes are fixed energies, so a state costs one exponential for each. States are told apart by their kT in
octaves, since nodes reach 45 kT far and what lies higher costs most.
"""

from __future__ import annotations

from functools import lru_cache
from math import ceil, inf
from typing import TYPE_CHECKING

import numpy as np
from numpy.polynomial.chebyshev import chebfit, chebval

from eoscore.errors import NoAnswerError
from eoscore.state.closed import diverges
from eoscore.state.ensemble import BLOCK, EPS, Ensemble
from eoscore.state.occupation import boltzmann, bose_count, bose_sums, counter
from eoscore.state.rule import rule_for
from eoscore.state.sums import Sums

if TYPE_CHECKING:
    from collections.abc import Callable, Iterator

    from numpy.typing import NDArray

    from eoscore.measure import Measure, Nodes
    from eoscore.state.ensemble import Counter
    from eoscore.state.reading import FloatArray

__all__ = ["NodeBose", "OverNodes"]

STRETCH = 1 / 2 / 4 / 2  # octaves of kT that share nodes
CACHED = 200_000  # numbers of a block that is asked again and again
SERIES = (
    20  # terms of ln N_c in ln kT over a stretch: it is analytic for |Im ln kT| < pi/2, and falls as 9^-n
)
HOPELESS = 0.5  # relative error at which a sum is no answer
ROUGHLY = 1e-3  # of the scale of a measure: the kT of one that is known to some percent only
SHARES = np.geomspace(1e-2, 45.0, 200)  # E/kT at which the error of Omega is weighed


class OverNodes(Ensemble):
    """What all sums over fixed nodes share: the nodes for each stretch of kT, and blocks of states."""

    def __init__(self, measure: Measure) -> None:
        self.measure = measure
        self.exponent = measure.exponent
        self.top = measure.top
        self.route = (
            f"sums over nodes ({measure.route}{'' if measure.top == inf else ', up to the escape energy'})"
        )
        self._rules = lru_cache(maxsize=64)(self._rule)
        self._weighed = lru_cache(maxsize=256)(self._weigh)

    @property
    def error(self) -> float:
        """See `Ensemble.error`: of the measure, which may grow while it is asked further up, and of the rule."""
        return self.measure.error + 2000 * EPS

    def error_at(self, kT: FloatArray) -> FloatArray:
        """See `Ensemble.error_at`: of the hottest kT in each stretch. NoAnswerError where all are hopeless."""
        keys, back = np.unique(_stretch(np.where(kT > 0, kT, 1.0)), return_inverse=True)
        bounds = np.array([self._weighed(int(key)) for key in keys])
        if bounds.size and np.all(bounds > HOPELESS):
            raise NoAnswerError(
                f"the number of states of this trap could not be resolved ({self.measure.route}; its error would be "
                f"{100 * float(np.min(bounds)):.3g} %): leave walls (`where`) or an E_max about the part that matters"
            )
        return np.where(kT > 0, bounds[back.reshape(kT.shape)], 0.0)

    def _weigh(self, stretch: int) -> float:
        """The mean of `error_below` with the weight Omega (-g'), and x^2 more for U and the heat capacity."""
        kT = 2.0 ** ((stretch + 1) * STRETCH)
        measure = self.measure.eased(kT)
        energies = np.minimum(SHARES * kT, self.top)
        weight = measure.volume(energies) * SHARES**3 * np.exp(-SHARES)
        bounds = measure.error_below(energies)
        mean = float(np.sum(weight * bounds) / np.sum(weight))
        at_top = float(bounds[-1]) if self.top < SHARES[-1] * kT else 0.0
        share = np.exp(-self.top / kT) if at_top else 0.0
        least = float(measure.error_below(np.minimum(kT, self.top)))
        return max(mean, least, at_top * float(share)) + 2000 * EPS

    def _rule(self, stretch: int) -> Nodes:
        low, high = 2.0 ** (stretch * STRETCH), 2.0 ** ((stretch + 1) * STRETCH)
        return rule_for(self.measure.eased(high), low, high)

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
        keys = _stretch(kT)
        for key in np.unique(keys):
            yield np.flatnonzero(keys == key), self._rules(int(key))

    def below(self, number: FloatArray) -> FloatArray:
        """See `Ensemble.below`: bisection of Omega in ln E, from the pure power at the bottom."""
        rough = (
            self.measure.eased(ROUGHLY * self.measure.scale) if self.measure.scale < np.inf else self.measure
        )
        return energy_below(rough, number)

    def boltzmann(self, kT: FloatArray) -> tuple[FloatArray, FloatArray]:
        """See `Ensemble.boltzmann`."""
        z, e = self._over(boltzmann, np.zeros_like(kT), kT)
        return z, e


class NodeBose(OverNodes):
    """Bosons over any measure."""

    statistics = "bose"

    def __init__(self, measure: Measure) -> None:
        super().__init__(measure)
        self._series = lru_cache(maxsize=64)(self._saturated_series)

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
        n, b = self._over(bose_count, alpha, kT)
        return n, b

    def counters(self, kT: FloatArray) -> Iterator[tuple[NDArray[np.intp], Counter]]:
        """See `Ensemble.counters`: the exponentials of the nodes are made once for each block."""
        for where, rule in self._stretches(kT):
            for part in np.array_split(where, ceil(where.size * rule.v.size / CACHED)):
                yield part, counter(kT[part], rule)

    def saturated(self, kT: FloatArray) -> FloatArray:
        """See `Ensemble.saturated`: for many states a series in ln kT for each stretch."""
        result = np.full_like(kT, np.nan)
        known = np.flatnonzero(kT > 0)
        for where, _ in self._stretches(kT[known]):
            some = known[where]
            if some.size <= SERIES:
                result[some] = super().saturated(kT[some])
            else:
                log = np.log2(kT[some]) / STRETCH
                key = int(np.floor(log[0]))
                result[some] = np.exp(chebval(2 * (log - key) - 1, self._series(key)))
        return result

    def _saturated_series(self, key: int) -> FloatArray:
        x = np.cos(np.pi * (np.arange(SERIES) + 0.5) / SERIES)
        values = np.log(super().saturated(2.0 ** (STRETCH * (key + (1 + x) / 2))))
        return np.asarray(chebfit(x, values, SERIES - 1))

    def all_sums(self, alpha: FloatArray, kT: FloatArray) -> Sums:
        """See `Ensemble.all_sums`."""
        return Sums(*self._over(bose_sums, alpha, kT))


def _stretch(kT: FloatArray) -> NDArray[np.int_]:
    return np.asarray(np.floor(np.log2(kT) / STRETCH).astype(int))


def energy_below(measure: Measure, number: FloatArray) -> FloatArray:
    """An energy (J) about where Omega reaches `number`; the top where it does not."""
    # From the bottom up: what lies near the top costs most, and is seldom needed.
    low = np.full(number.shape, measure.scale if measure.scale < inf else min(measure.top, 1e-30))
    for _ in range(2000):
        volume = measure.volume(low)
        up, down = (2 * volume < number) & (low < measure.top), volume > 2 * number
        if not np.any(up | down):
            break
        with np.errstate(divide="ignore", invalid="ignore"):
            jump = np.clip(np.log2(number / volume) / max(measure.exponent, 0.5), -30, 6)
        low = np.minimum(np.where(up | down, low * 2.0**jump, low), measure.top)
    with np.errstate(divide="ignore", invalid="ignore"):
        nearer = low * np.clip(number / volume, 0.5, 2) ** (1 / max(measure.exponent, 0.5))
    return np.where(volume > 0, np.minimum(nearer, measure.top), low)
