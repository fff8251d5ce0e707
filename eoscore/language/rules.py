"""The dimension rules of single expressions: what a number, an operator or a function makes of its operands."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from eoscore.language.builtin import BUILTINS, misfit, result
from eoscore.language.faults import Fault
from eoscore.language.kind import PURE, UNKNOWN, Dim, Kind, Wild, alike, divided, power, times, told
from eoscore.language.mend import mend
from eoscore.language.units import unit_faults, unit_of
from eoscore.language.value import COMPARISONS, binary_value, call_value, si_value

if TYPE_CHECKING:
    from collections.abc import Callable, Sequence

    from eoscore.language.nodes import Binary, Call, Compare, Expr, If, Number
    from eoscore.source import Span

    Sink = Callable[[Fault], None]

__all__ = [
    "binary",
    "builtin_call",
    "choice",
    "comparison",
    "counted",
    "finite",
    "join",
    "negative",
    "number",
    "short",
]

_VERBS = {"+": "be added", "-": "be subtracted"}


def number(node: Number, sink: Sink) -> Kind:
    """A literal in SI; the plain literal 0 fits any dimension."""
    if node.unit is None:
        if node.value == 0:
            return Kind(Wild.ZERO, 0.0)
        return Kind(PURE, finite(node.value, node, sink))
    if found := unit_faults(node.unit):
        for fault in found:
            sink(fault)
        return UNKNOWN
    return Kind(unit_of(node.unit)[1], finite(si_value(node), node, sink))


def finite(value: float | None, node: Expr, sink: Sink, *operands: Kind) -> float | None:
    """The value, or None with a fault where finite operands gave something that is no number."""
    if value is None or math.isfinite(value):
        return value
    words = (
        "has no value among the real numbers"
        if math.isnan(value)
        else "is too large for a number, or a division by 0"
    )
    shown = ", ".join(f"{kind.value:g}" for kind in operands if kind.value is not None)
    hint = f"its parts are {shown} (SI)" if shown else None
    sink(Fault(node.span, f"`{short(node.span)}` {words}", hint, is_value=True))
    return None


def negative(operand: Kind) -> Kind:
    """Unary minus changes no dimension."""
    return Kind(operand.dimension, None if operand.value is None else -operand.value)


def binary(node: Binary, left: Kind, right: Kind, sink: Sink) -> Kind:
    """The five operators."""
    if node.operator in "+-":
        dim = join(
            node.span,
            [(node.left.span, left.dimension), (node.right.span, right.dimension)],
            sink,
            node.operator,
        )
    elif node.operator == "^":
        dim = _power(node, left, right, sink)
    else:
        dim = (times if node.operator == "*" else divided)(left.dimension, right.dimension)
    if dim is Wild.FAULTY:
        return UNKNOWN
    value = binary_value(node.operator, left.value, right.value)
    if node.operator == "/" and right.value == 0:
        value = math.inf  # whatever stands above, a coordinate too
    return Kind(dim, finite(value, node, sink, left, right))


def join(span: Span, parts: Sequence[tuple[Span, Dim]], sink: Sink, verb: str) -> Dim:
    """The one dimension of parts that must be alike, a fault where they are not; a faulty part would have fitted."""
    known = [part for part in parts if not isinstance(part[1], Wild)]
    if not known:
        return Wild.FAULTY if any(dim is Wild.FAULTY for _, dim in parts) else Wild.ZERO
    (first, wanted), *others = known
    for other, dim in others:
        if not alike(dim, wanted):
            message = (
                f"these cannot {_VERBS.get(verb, verb)}: "
                f"`{short(first)}` is {told(wanted)}, `{short(other)}` is {told(dim)}"
            )
            hint = mend(dim, wanted, short(other)) or mend(wanted, dim, short(first))
            sink(Fault(span, message, hint or "both sides must have the same dimension"))
            return Wild.FAULTY
    return wanted


def comparison(node: Compare, left: Kind, right: Kind, sink: Sink) -> bool | None:
    """An order relation: whether it holds, None where a side is not constant."""
    sides = [(node.left.span, left.dimension), (node.right.span, right.dimension)]
    join(node.span, sides, sink, "be compared")
    if left.value is None or right.value is None:
        return None
    return COMPARISONS[node.operator](left.value, right.value)


def choice(node: If, holds: bool | None, then: Kind, otherwise: Kind, sink: Sink) -> Kind:
    """`if`: both branches alike; the value of one of them where the condition is constant."""
    branches = [(node.then.span, then.dimension), (node.otherwise.span, otherwise.dimension)]
    dim = join(node.span, branches, sink, "be the two branches of one `if`")
    return Kind(dim, None if holds is None else (then if holds else otherwise).value)


def _power(node: Binary, base: Kind, exponent: Kind, sink: Sink) -> Dim:
    if not alike(exponent.dimension, PURE):
        message = (
            f"an exponent must be a pure number, `{short(node.right.span)}` is {told(exponent.dimension)}"
        )
        sink(Fault(node.right.span, message, "divide it by a scale of the same dimension"))
        return Wild.FAULTY
    if base.dimension == PURE or isinstance(base.dimension, Wild):
        return base.dimension
    if exponent.dimension is Wild.FAULTY:
        return Wild.FAULTY
    if exponent.value is None:
        message = (
            f"`{short(node.left.span)}` is {told(base.dimension)}: its exponent must be a constant, "
            f"`{short(node.right.span)}` is not"
        )
        sink(Fault(node.span, message, "divide the base by a scale of the same dimension first"))
        return Wild.FAULTY
    return power(base.dimension, exponent.value)


def builtin_call(node: Call, given: Sequence[Kind], sink: Sink) -> Kind:
    """A function of Tarn at its arguments."""
    name, function = node.function.name, BUILTINS[node.function.name]
    if not function.takes(len(given)):
        wanted = f"{name}({', '.join(function.arguments)}{', ...' if function.most is None else ''})"
        sink(Fault(node.span, f"`{name}` came with {counted(len(given))}", f"write {wanted}"))
        return UNKNOWN
    dims = [kind.dimension for kind in given]
    wrong = misfit(function, dims)
    if wrong is not None and function.rule == "pure":
        argument = node.arguments[wrong].span
        message = f"`{name}` takes a pure number, `{short(argument)}` is {told(dims[wrong])}"
        sink(Fault(argument, message, "divide it by a scale of the same dimension"))
        return Kind(PURE)
    if wrong is not None:
        parts = [(argument.span, dim) for argument, dim in zip(node.arguments, dims, strict=True)]
        join(node.span, parts, sink, f"stand together in {name}")
        return UNKNOWN if function.rule == "keeps" else Kind(PURE)
    value = call_value(name, [kind.value for kind in given])
    return Kind(result(function, dims), finite(value, node, sink, *given))


def counted(arguments: int) -> str:
    """`1 argument`, `2 arguments`."""
    return f"{arguments or 'no'} argument{'' if arguments == 1 else 's'}"


def short(span: Span) -> str:
    """The words of a span on one line, cut where they are long."""
    words = " ".join(span.text.split())
    return words if len(words) <= 48 else words[:45] + "..."
