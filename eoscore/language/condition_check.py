"""The conditions and axes of a question: which names they set, with what dimensions, on how large a grid."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Final, Literal

from eoscore.language import nodes
from eoscore.language.demand import above_zero, must_be
from eoscore.language.faults import listed
from eoscore.language.kind import PURE, Kind, Wild, alike, told
from eoscore.language.mend import mend
from eoscore.language.quantities import CONDITIONS, COUNT
from eoscore.language.question import Axis, Given
from eoscore.language.rules import short
from eoscore.language.scope import constant_scope

if TYPE_CHECKING:
    from collections.abc import Sequence

    from eoscore.language.checker import Checker
    from eoscore.language.role import Roles
    from eoscore.language.scope import Named, Scope
    from eoscore.language.units import Dimension
    from eoscore.source import Span

__all__ = ["check_axis", "check_condition", "check_grid"]

MOST_POINTS: Final = 10**7  # of one axis
LARGEST_GRID: Final = 10**8
_POSITIVE: Final = ("N", "n", "T", "fugacity", "n_peak", "PSD")


def check_condition(node: nodes.Definition, roles: Roles, checker: Checker) -> Given | None:
    """A condition with its value, None with a fault where it makes no sense."""
    kind = checker.kind(node.value, roles.scopes[0])
    if not _fits(node.name, [(node.value.span, kind)], roles, checker) or kind.value is None:
        return None
    return Given(node.name.name, kind.value, _solid(kind), node, roles.of(node.name.name) != "parameter")


def check_axis(node: nodes.Axis, roles: Roles, checker: Checker) -> Axis | None:
    """An axis of a grid, None with a fault where it makes no sense."""
    spans = (
        node.values.values
        if isinstance(node.values, nodes.Listing)
        else (node.values.start, node.values.stop)
    )
    kinds = [checker.kind(expr, roles.scopes[0]) for expr in spans]
    fits = _fits(
        node.name, [(expr.span, kind) for expr, kind in zip(spans, kinds, strict=True)], roles, checker
    )
    how: Literal["even", "geometric", "list"] = "list"
    points: int | None = len(kinds)
    if isinstance(node.values, nodes.Range):
        how = node.values.kind
        points = _points(node.values.points, roles.scopes[0], checker)
        fits = fits and not (how == "geometric" and _changes_sign(node, kinds, checker))
    ends = [kind.value for kind in kinds if kind.value is not None]
    if not fits or not points or len(ends) < len(kinds):
        return None
    dim = next((kind.dimension for kind in kinds if not isinstance(kind.dimension, Wild)), PURE)
    inner = roles.of(node.name.name) != "parameter"
    return Axis(node.name.name, how, tuple(ends), points, _solid(Kind(dim)), node, inner)


def check_grid(axes: Sequence[Axis], checker: Checker) -> None:
    """A fault where the product of all axes has too many points to be worked through."""
    size = math.prod(axis.points for axis in axes)
    if size > LARGEST_GRID:
        span = axes[0].node.span.to(axes[-1].node.span)
        message = f"this grid has {size:.3g} points, more than {LARGEST_GRID:.0e}"
        checker.faults.add(span, message, "take fewer points, or split the question")


def _solid(kind: Kind) -> Dimension:
    return PURE if isinstance(kind.dimension, Wild) else kind.dimension


def _fits(name: nodes.Ident, parts: Sequence[tuple[Span, Kind]], roles: Roles, checker: Checker) -> bool:
    """Whether a name can be set, and to values of these kinds."""
    own, role = roles.known.get(name.name), roles.of(name.name)
    if role == "condition":
        fits = [_thermodynamic(name, span, kind, own, checker) for span, kind in parts]
    elif role == "coordinate":
        counted = name.name == COUNT
        what, units = (f"`{name.name}`", ("1",)) if counted else (f"the coordinate `{name.name}`", ("m",))
        fits = [must_be(kind, units, span, what, checker.faults) for span, kind in parts]
    elif own is None:
        return _unknown(name, roles, checker)
    else:
        wanted = checker.named(own)
        fits = [_like(name, span, kind, wanted, checker) for span, kind in parts]
    return all(fits)


def _thermodynamic(name: nodes.Ident, span: Span, kind: Kind, own: Named | None, checker: Checker) -> bool:
    units = CONDITIONS[name.name]
    count = len(checker.faults)
    if not must_be(kind, units, span, f"`{name.name}`", checker.faults):
        if own is not None and len(checker.faults) > count:
            message = (
                f"`{name.name}` after `with` or `over` is the condition of the gas, never a name of the file"
            )
            checker.faults.add(
                name.span, message, f"give the file's own `{name.name}` another name to set it"
            )
        return False
    if name.name in _POSITIVE and kind.value is not None and kind.value <= 0:
        checker.faults.add(span, above_zero(f"`{name.name}`", kind.value, short(span)), "check its sign")
        return False
    return True


def _like(name: nodes.Ident, span: Span, kind: Kind, wanted: Kind, checker: Checker) -> bool:
    if alike(kind.dimension, wanted.dimension):
        return True
    message = f"`{name.name}` is {told(wanted.dimension)}, but `{short(span)}` is {told(kind.dimension)}"
    hint = mend(kind.dimension, wanted.dimension, short(span))
    checker.faults.add(span, message, hint or "give it a unit of the same dimension")
    return False


def _unknown(name: nodes.Ident, roles: Roles, checker: Checker) -> bool:
    scopes = roles.scopes
    if name.name in constant_scope().names and scopes[0].find(name.name) is constant_scope().names[name.name]:
        message, hint = f"`{name.name}` is a constant", "define a name of your own to vary it"
    elif scopes[0].find(name.name) is not None:
        message, hint = f"`{name.name}` is a function and cannot be set", "set the values that it uses"
    else:
        message = f"`{name.name}` is neither a condition nor a name that can be set here"
        hint = listed(name.name, [*CONDITIONS, *roles.coordinates, *roles.known], what="can be set")
    checker.faults.add(name.span, message, hint)
    return False


def _points(expr: nodes.Expr, scope: Scope, checker: Checker) -> int | None:
    kind = checker.kind(expr, scope)
    if kind.dimension is Wild.FAULTY or kind.value is None:
        return None
    if not alike(kind.dimension, PURE) or not kind.value.is_integer() or not 1 <= kind.value <= MOST_POINTS:
        message = f"the number of points must be a whole number from 1 to {MOST_POINTS:.0e}, not `{short(expr.span)}`"
        checker.faults.add(expr.span, message, "write the number of points last, such as even(1 W, 6 W, 60)")
        return None
    return int(kind.value)


def _changes_sign(node: nodes.Axis, kinds: Sequence[Kind], checker: Checker) -> bool:
    start, stop = (kind.value for kind in kinds)
    if start is None or stop is None or start * stop > 0 or (start and stop and (start > 0) == (stop > 0)):
        return False
    message = "a geometric span cannot pass through 0: both ends must have the same sign and not be 0"
    checker.faults.add(node.values.span, message, "use even(a, b, points), or start a little away from 0")
    return True
