"""Uncertainty carried from the input: first derivatives of the final answer by each uncertain literal.

Each literal is one variable, so that correlations through shared names are kept. A derivative is a central
difference of the whole chain from the text to the answer; its relative error is the square of the step in units
of the literal, some 1e-7, far below what a standard deviation means.
"""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING

import numpy as np

from eoscore.answer.assembly import values_of
from eoscore.language.quantities import AT_COUNTS, AT_POSITIONS, QUANTITIES

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from numpy.typing import NDArray

    from eoscore.answer.chain import Chain, Part
    from eoscore.answer.record import Finding
    from eoscore.language.program import UncertainLiteral

__all__ = ["labelled", "with_uncertainty"]

# Steps in units of sigma and of the value: small beside the scale on which answers bend, large beside the noise.
_STEP_OF_SIGMA = 0.1
_STEP_OF_VALUE = 5e-4
# Which conditions a quantity depends on where they are given, by what the language says it needs; else on all.
_CONDITIONS = {
    "nothing": (),
    "number": ("N", "n"),
    "temperature": ("T",),
    "number and temperature": ("N", "T"),
}


def with_uncertainty(
    chain: Chain, parts: Sequence[Part], findings: Mapping[str, Finding]
) -> dict[str, Finding]:
    """The findings with `sigma` and `budget`, where a literal with an uncertainty bears on them."""
    carried: dict[str, dict[str, NDArray[np.float64]]] = {name: {} for name in findings}
    labels = labelled(chain.program.literals_of(chain.question))
    for label, literal in labels.items():
        for name, variance in _variances(chain, parts, literal).items():
            carried[name][label] = variance
    return {name: _with_variances(finding, carried[name]) for name, finding in findings.items()}


def _with_variances(finding: Finding, variances: Mapping[str, NDArray[np.float64]]) -> Finding:
    if not variances:
        return finding
    total = np.sum(list(variances.values()), axis=0)
    total = np.where(np.isfinite(finding.value), total, np.nan)
    with np.errstate(invalid="ignore", divide="ignore"):
        budget = {name: np.where(total > 0.0, part / total, np.nan) for name, part in variances.items()}
    return replace(finding, sigma=np.sqrt(total), budget=budget)


def _variances(
    chain: Chain, parts: Sequence[Part], literal: UncertainLiteral
) -> dict[str, NDArray[np.float64]]:
    """(dA/dx sigma)^2 over the grid for every quantity A that the literal bears on."""
    step = _STEP_OF_SIGMA * literal.sigma
    if literal.value:
        step = min(step, _STEP_OF_VALUE * abs(literal.value))
    up = chain.parts({literal.index: literal.value + step})
    names = [name for name in chain.names if _bears(name, parts, up)]
    if not names:
        return {}
    down = chain.parts({literal.index: literal.value - step})
    return {name: (_slope(chain, name, up, parts, down, step) * literal.sigma) ** 2 for name in names}


def _slope(
    chain: Chain, name: str, up: Sequence[Part], middle: Sequence[Part], down: Sequence[Part], step: float
) -> NDArray[np.float64]:
    """The central difference, one-sided where the answer ends on the other side."""
    above, here, below = (
        values_of(chain.grid, [part.readings[name] for part in side]) for side in (up, middle, down)
    )
    central = (above - below) / (2.0 * step)
    central = np.where(np.isfinite(central), central, (above - here) / step)
    return np.where(np.isfinite(central), central, (here - below) / step)


def _bears(name: str, parts: Sequence[Part], moved: Sequence[Part]) -> bool:
    """Whether a moved literal can change a quantity: through the gas or the place, or a condition it needs."""
    for part, other in zip(parts, moved, strict=True):
        if name not in QUANTITIES:
            if not np.array_equal(part.readings[name].value, other.readings[name].value):
                return True
            continue
        if (part.binding.gas, part.binding.place) != (other.binding.gas, other.binding.place):
            return True
        if any(not np.array_equal(part.given[c], other.given[c]) for c in _needed(name, part)):
            return True
        places = part.positions if name in AT_POSITIONS or name in AT_COUNTS else ()
        if any(not np.array_equal(part.positions[c], other.positions[c]) for c in places):
            return True
    return False


def _needed(name: str, part: Part) -> tuple[str, ...]:
    """The conditions that a quantity depends on: with S and U in place of T, lambda_T depends on both."""
    need = QUANTITIES[name]
    enough = tuple(each for each in _CONDITIONS.get(need, ()) if each in part.given)
    return enough if enough or need == "nothing" else tuple(part.given)


def labelled(literals: Sequence[UncertainLiteral]) -> dict[str, UncertainLiteral]:
    """The literals by the names they define, else by themselves with their place; never two under one label."""
    labels: dict[str, UncertainLiteral] = {}
    for literal in literals:
        place = f"line {literal.span.line}"
        label = literal.name or f"{literal.span.text} ({place})"
        if label in labels:
            label = f"{literal.name or literal.span.text} ({place}, column {literal.span.column})"
        labels[label] = literal
    return labels
