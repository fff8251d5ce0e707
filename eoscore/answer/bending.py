"""Where a first derivative misleads: a condensate fraction that sets in within the uncertainty of the input."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.answer.assembly import values_of
from eoscore.answer.record import Caution
from eoscore.answer.uncertainty import labelled

if TYPE_CHECKING:
    from collections.abc import Iterator, Mapping

    from eoscore.answer.chain import Chain
    from eoscore.answer.record import Finding

__all__ = ["bending"]

_BENT = ("f_0", "N_0")  # zero above T_c, and rising at once below it
_TOLERATED = 0.2  # of the standard deviation
_ROUNDING = 1e-9  # of the value: what moves by less does not depend on the literal


def bending(chain: Chain, findings: Mapping[str, Finding]) -> Iterator[Caution]:
    """Cautions for the condensate, moved by one whole standard deviation of each literal in both directions."""
    names = [name for name in _BENT if name in findings and findings[name].sigma is not None]
    if not names:
        return
    for label, literal in labelled(chain.program.literals_of(chain.question)).items():
        if all(label not in findings[name].budget for name in names):
            continue
        ends = [chain.parts({literal.index: literal.value + s}) for s in (-literal.sigma, literal.sigma)]
        for name in names:
            low, high = (values_of(chain.grid, [part.readings[name] for part in end]) for end in ends)
            here = findings[name].value
            bend = np.abs(low + high - 2.0 * here)
            spread = np.abs(high - low)
            size = np.abs(low) + np.abs(high) + np.abs(here)
            bad = np.isfinite(bend) & (bend > _TOLERATED * spread) & (spread > _ROUNDING * size)
            if not bad.any():
                continue
            worst = np.unravel_index(np.argmax(np.where(bad, bend, 0.0)), bend.shape)
            mend = (
                "`--sample 1000` gives an interval"
                if findings[name].interval is None
                else "the sampled interval holds"
            )
            yield Caution(
                "first_derivative",
                f"{name} sets in within the uncertainty of {label}: one standard deviation down and up gives "
                f"{low[worst]:.3g} and {high[worst]:.3g} where the answer is {here[worst]:.3g}, and its standard "
                f"deviation, a first derivative, misleads there; {mend}.",
            )
