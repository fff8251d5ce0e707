"""Faults of names: one that nobody knows, a function that is none, a call that its body does not fit."""

from __future__ import annotations

from typing import TYPE_CHECKING

from eoscore.language.builtin import BUILTINS
from eoscore.language.faults import Fault, listed
from eoscore.language.kind import Wild, told
from eoscore.language.rules import short

if TYPE_CHECKING:
    from collections.abc import Iterable, Sequence

    from eoscore.language import nodes
    from eoscore.language.kind import Kind
    from eoscore.language.scope import Scope

__all__ = ["faulty_call", "unknown_function", "unknown_name"]


def unknown_name(
    node: nodes.Name, scope: Scope, arguments: Iterable[str], block: str | None, *, brief: bool
) -> Fault:
    """A name that nothing around it knows; `block` is the gas or place it stands in. Brief: without a list."""
    if node.name == "m":
        message = (
            f"the mass `m` is not known in {block}" if block else "`m` is known inside a gas or a trap only"
        )
        hint = "give the gas `isotope Sr-84`, or `m = 84 u`" if block else "pass the mass as an argument"
        return Fault(node.span, message, hint)
    message = f"the name `{node.name}` is not known here"
    if brief:
        return Fault(node.span, message)
    return Fault(node.span, message, listed(node.name, [*arguments, *_names(scope, functions=False)]))


def unknown_function(node: nodes.Call, scope: Scope, *, is_number: bool, brief: bool) -> Fault:
    """A function that nothing knows, or a number that is called like one."""
    name = node.function.name
    if is_number:
        message = f"`{name}` is a number, not a function"
        return Fault(node.function.span, message, f"a product is written with `*`: {name}*(...)")
    message = f"the function `{name}` is not known here"
    if brief:
        return Fault(node.function.span, message)
    known = [*_names(scope, functions=True), *BUILTINS]
    return Fault(node.function.span, message, listed(name, known, what="known functions"))


def _names(scope: Scope, *, functions: bool) -> list[str]:
    return [
        name for each in scope.chain() for name, named in each.names.items() if named.is_function == functions
    ]


def faulty_call(node: nodes.Call, given: Sequence[Kind], wanted: Sequence[str], fault: Fault) -> Fault:
    """The fault of a call whose arguments do not fit the body, with the place in the body that says so."""
    origin = fault.origin or fault.span
    told_arguments = ", ".join(
        f"{name} {'is faulty' if kind.dimension is Wild.FAULTY else 'is ' + told(kind.dimension)}"
        for name, kind in zip(wanted, given, strict=True)
    )
    reason = fault.reason or fault.message
    message = f"`{node.function.name}` does not fit here, where {told_arguments}: {reason}"
    hint = f"see its body in {origin.source.name}, line {origin.line}: `{short(origin)}`"
    return Fault(node.span, message, hint, origin, reason, fault.is_value)
