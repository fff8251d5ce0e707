"""What a name must be: its dimension and the range of its value, told in words where it is not."""

from __future__ import annotations

from typing import TYPE_CHECKING

from eoscore.language.kind import PURE, Kind, Wild, alike, dimension, told
from eoscore.language.mend import mend
from eoscore.language.rules import short

if TYPE_CHECKING:
    from collections.abc import Sequence

    from eoscore.language.faults import Faults
    from eoscore.language.units import Dimension
    from eoscore.source import Span

__all__ = ["above_zero", "must_be", "must_be_positive", "must_match"]


def must_be(kind: Kind, units: Sequence[str], span: Span, what: str, faults: Faults) -> bool:
    """Whether a value has one of the dimensions of these units; a fault if not. `what` opens the sentence."""
    wanted = [dimension(unit) for unit in units]
    if any(alike(kind.dimension, dim) for dim in wanted):
        return True
    expected = " or ".join(told(dim) for dim in wanted)
    bridge = None if kind.dimension == PURE else mend(kind.dimension, wanted[0], short(span))
    hint = bridge or _unit_hint(kind, units)
    faults.add(span, f"{what} must be {expected}, `{short(span)}` is {told(kind.dimension)}", hint)
    return False


def must_match(kind: Kind, wanted: Dimension, span: Span, what: str, faults: Faults) -> bool:
    """Whether a value has this dimension; a fault if not."""
    if alike(kind.dimension, wanted):
        return True
    hint = mend(kind.dimension, wanted, short(span))
    faults.add(span, f"{what} must be {told(wanted)}, `{short(span)}` is {told(kind.dimension)}", hint)
    return False


def must_be_positive(kind: Kind, span: Span, what: str, faults: Faults) -> bool:
    """Whether a constant value is above zero; a fault if it is not, nothing said where it has no value."""
    if kind.dimension is Wild.FAULTY or kind.value is None or kind.value > 0:
        return kind.value is not None
    faults.add(span, above_zero(what, kind.value, short(span)), "check its sign and its unit")
    return False


def above_zero(what: str, value: float, words: str) -> str:
    """The sentence for a value that must be above zero; that of a literal is not repeated."""
    is_literal = words.lstrip("-(").startswith(tuple("0123456789."))
    return f"{what} must be above 0, but `{words}` came" + (
        "" if is_literal else f", which is {value:g} in SI"
    )


def _unit_hint(kind: Kind, units: Sequence[str]) -> str:
    if kind.dimension == PURE:
        return f"give it a unit, such as {units[0]}"
    return (
        "write it without a unit" if units[0] == "1" else f"a value in {' or '.join(units)} is expected here"
    )
