"""Words of other rooms as a page sets them: `m^-3` as m⁻³, `-5.7e-05 m` as −57 µm."""

from __future__ import annotations

import re

from eoscore.show.prefix import quantity

__all__ = ["raised", "with_prefixes"]

_LENGTH = r"(?<![\w.])(-?\d+(?:\.\d+)?(?:e[-+]?\d+)?) m(?![\w^/])"
_FIGURES = str.maketrans("-0123456789", "⁻⁰¹²³⁴⁵⁶⁷⁸⁹")


def raised(text: str) -> str:
    """The text with every `^` and whole number behind a unit as raised figures."""
    return re.sub(r"(?<=[A-Za-z])\^(-?\d+)", lambda found: found[1].translate(_FIGURES), text)


def with_prefixes(text: str) -> str:
    """The text with every length in m in the prefix that fits."""
    return re.sub(_LENGTH, lambda found: quantity(float(found[1]), "m"), text)
