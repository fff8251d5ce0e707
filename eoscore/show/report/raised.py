"""Powers of units as raised figures: `m^-3` as m⁻³."""

from __future__ import annotations

import re

__all__ = ["raised"]

_FIGURES = str.maketrans("-0123456789", "⁻⁰¹²³⁴⁵⁶⁷⁸⁹")


def raised(text: str) -> str:
    """The text with every `^` and whole number behind a unit as raised figures."""
    return re.sub(r"(?<=[A-Za-z])\^(-?\d+)", lambda found: found[1].translate(_FIGURES), text)
