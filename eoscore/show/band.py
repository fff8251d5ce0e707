"""The band around a line: the sampled interval where there is one, else one standard deviation to either side."""

from __future__ import annotations

from typing import TYPE_CHECKING, NamedTuple

if TYPE_CHECKING:
    from collections.abc import Iterable

    import numpy as np
    from numpy.typing import NDArray

    from eoscore.answer.record import Finding

__all__ = ["Band", "band_of", "band_words"]


class Band(NamedTuple):
    """The ends of a band in SI, arrays like the value's; nan where there is none."""

    low: NDArray[np.float64]
    high: NDArray[np.float64]


def band_of(finding: Finding) -> Band | None:
    """The band of a quantity; None where no input has an uncertainty."""
    if (interval := finding.interval) is not None:
        return Band(interval.low, interval.high)
    if finding.sigma is None:
        return None
    return Band(finding.value - finding.sigma, finding.value + finding.sigma)


def band_words(findings: Iterable[Finding]) -> str | None:
    """What the bands of a picture mean; None where it has none."""
    told = list(findings)
    for interval in (finding.interval for finding in told):
        if interval is not None:
            return f"Bands: where {100 * interval.coverage:.0f} % of {interval.samples} samples of the input lie."
    if any(finding.sigma is not None for finding in told):
        return "Bands: one standard deviation carried from the input."
    return None
