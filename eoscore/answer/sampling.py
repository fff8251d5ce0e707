"""Sampled intervals: the answer for many draws of the uncertain literals, where first derivatives may mislead.

Every literal is drawn from the normal distribution of its value and standard deviation (JCGM 101:2008, the
supplement to the GUM on Monte Carlo), with a seed of its own: a name used twice stays one variable, in all questions
and in all chunks of a grid alike.
"""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING, Final

import numpy as np

from eoscore.answer.assembly import values_of
from eoscore.answer.record import Interval
from eoscore.errors import EoscoreError

if TYPE_CHECKING:
    from collections.abc import Iterator, Mapping

    from numpy.typing import NDArray

    from eoscore.answer.chain import Chain
    from eoscore.answer.record import Finding

__all__ = ["COVERAGE", "with_intervals"]

COVERAGE: Final = 0.6827  # of the normal distribution within one standard deviation
_SEED: Final = 20260
_FEWEST: Final = 0.5  # of the samples must have an answer, or the interval would be one of the others


def with_intervals(chain: Chain, findings: Mapping[str, Finding], samples: int) -> dict[str, Finding]:
    """The findings with an `interval` where they have a standard deviation; `samples` draws, none for 0."""
    names = [name for name, finding in findings.items() if finding.sigma is not None]
    if not samples or not names:
        return dict(findings)
    drawn: dict[str, list[NDArray[np.float64]]] = {name: [] for name in names}
    for literals in _draws(chain, samples):
        answers = _answers(chain, literals, names)
        for name in names:
            drawn[name].append(_shaped(answers.get(name), findings[name]))
    return {
        name: replace(finding, interval=_interval(finding, np.stack(drawn[name])))
        if name in drawn
        else finding
        for name, finding in findings.items()
    }


def _draws(chain: Chain, samples: int) -> Iterator[dict[int, float]]:
    literals = chain.program.literals_of(chain.whole or chain.question)
    columns = {
        each.index: np.random.default_rng([_SEED, each.index]).normal(each.value, each.sigma, samples)
        for each in literals
    }
    for number in range(samples):
        yield {index: float(column[number]) for index, column in columns.items()}


def _answers(chain: Chain, literals: Mapping[int, float], names: list[str]) -> dict[str, NDArray[np.float64]]:
    """The values of one draw; none where it makes no sense, such as a length below zero."""
    try:
        with np.errstate(all="ignore"):
            parts = chain.parts(literals)
    except EoscoreError:
        return {}
    return {name: values_of(chain.grid, [part.readings[name] for part in parts]) for name in names}


def _shaped(values: NDArray[np.float64] | None, finding: Finding) -> NDArray[np.float64]:
    """The values in the shape of the finding; a draw without an answer does not know of a last axis."""
    if values is None:
        return np.full(finding.value.shape, np.nan)
    missing = finding.value.ndim - values.ndim
    return np.broadcast_to(values.reshape(values.shape + (1,) * missing), finding.value.shape)


def _interval(finding: Finding, drawn: NDArray[np.float64]) -> Interval:
    answered = np.mean(np.isfinite(drawn), axis=0)
    ends = np.full((2, *finding.value.shape), np.nan)
    told = answered >= _FEWEST
    with np.errstate(invalid="ignore"):
        ends[:, told] = np.nanquantile(drawn[:, told], [(1 - COVERAGE) / 2, (1 + COVERAGE) / 2], axis=0)
    return Interval(ends[0], ends[1], answered, len(drawn), COVERAGE)
