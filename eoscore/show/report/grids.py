"""A grid of answers as a picture."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from eoscore.show.band import band_words
from eoscore.show.figure import as_map, figure_of
from eoscore.show.prefix import quantity
from eoscore.show.report.raised import raised

if TYPE_CHECKING:
    from collections.abc import Iterator

    from eoscore.answer.record import Finding, FoundAnswer
    from eoscore.show.report.markup import Markup
    from eoscore.show.report.picture import Gallery

__all__ = ["grid_picture"]


def grid_picture(answer: FoundAnswer, gallery: Gallery) -> Markup:
    """Every quantity over the names of the grid; the words tell the range of each."""
    over = " and ".join(answer.over)
    title = f"{', '.join(answer.found)} over {over}"
    return gallery.show(figure_of(answer, bare=True), title, raised(" ".join(_words(answer))))


def _words(answer: FoundAnswer) -> Iterator[str]:
    for name, values in answer.over.items():
        unit = answer.over_units[name]
        yield f"{name} runs from {quantity(float(values[0]), unit)} to {quantity(float(values[-1]), unit)}."
    for name, finding in answer.found.items():
        yield _range(name, finding)
    if not as_map(answer) and (bands := band_words(answer.found.values())):
        yield bands


def _range(name: str, finding: Finding) -> str:
    known = finding.value[np.isfinite(finding.value)]
    if not known.size:
        return f"{name} has no value."
    low, high = (quantity(float(edge), finding.unit) for edge in (known.min(), known.max()))
    if low == high:
        return f"{name} is {low} throughout."
    return f"{name} lies between {low} and {high}."
