"""The likely mend where two dimensions do not meet."""

from __future__ import annotations

from functools import cache
from typing import TYPE_CHECKING

from eoscore.language.kind import PURE, Dim, Wild, dimension, told

if TYPE_CHECKING:
    from eoscore.language.units import Dimension

__all__ = ["mend"]


@cache
def _bridges() -> dict[Dimension, str]:
    """What the ratio of two dimensions suggests: wanted / given -> words, `{}` standing for what was given."""
    return {
        dimension(
            "J.s"
        ): "multiply {} by h (or by hbar, if it is an angular frequency) to make an energy of it",
        dimension("J/K"): "multiply {} by k_B to make an energy of it",
        dimension("m2/s2"): "multiply {} by c^2 to make an energy of it",
        dimension("J/T"): "multiply {} by a magnetic moment, such as mu_B, to make an energy of it",
        dimension("J.m2/W"): "multiply {} by a light shift per intensity (J.m2/W) to make an energy of it",
        dimension("J/m"): "is a force (J/m) missing in {}?",
        dimension("J/m2"): "is a spring constant (J/m2), such as m*omega^2, missing in {}?",
        dimension("kg"): "is the mass m missing in {}?",
        dimension("m"): "is a length missing in {}?",
        dimension("s-1"): "is a frequency missing in {}?",
        dimension("kg.m/s2"): "is a weight, such as m*g_n, missing in {}?",
    }


def mend(given: Dim, wanted: Dim, words: str) -> str | None:
    """A hint that would turn `given` into `wanted`, None where none is likely; `words` is the text at fault."""
    if isinstance(given, Wild) or isinstance(wanted, Wild):
        return None
    if given == PURE and words.replace(".", "").isdigit():
        return f"give `{words}` a unit of {told(wanted)}, on the same line"
    bridge = _bridges().get(wanted / given)
    return bridge.format(f"`{words}`") if bridge is not None else None
