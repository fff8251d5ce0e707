"""Expressions and conditions to text, with no bracket more than the grammar needs."""

from __future__ import annotations

from decimal import Decimal
from typing import TYPE_CHECKING, Final

from eoscore.language import nodes

if TYPE_CHECKING:
    from collections.abc import Iterable

# How tight an expression or a condition binds; what binds looser than its place asks for is bracketed.
_SUM, _PRODUCT, _SIGN, _POWER, _ATOM = range(1, 6)
_BINDING: Final = {"+": _SUM, "-": _SUM, "*": _PRODUCT, "/": _PRODUCT, "^": _POWER}
_LOGIC: Final = {"or": 1, "and": 2, "not": 3}
_COMPARISON: Final = 4


def write_expression(node: nodes.Expr, place: int = _SUM) -> str:
    """The text of an expression; `place` is how tight it must bind to stand without brackets."""
    match node:
        case nodes.Number():
            return write_number(node)
        case nodes.Name():
            return node.name
        case nodes.Call():
            return f"{node.function.name}({_listed(node.arguments)})"
        case nodes.If():
            return f"if({write_condition(node.condition)}, {_listed((node.then, node.otherwise))})"
        case nodes.Negative():
            text, binding = f"-{write_expression(node.operand, _SIGN)}", _SIGN
        case nodes.Binary():
            text, binding = _binary(node), _BINDING[node.operator]
    return text if binding >= place else f"({text})"


def _listed(values: Iterable[nodes.Expr]) -> str:
    return ", ".join(write_expression(value) for value in values)


def _binary(node: nodes.Binary) -> str:
    left, right = node.left, node.right
    if node.operator == "^":
        in_unit = isinstance(left, nodes.Number) and _has_unit(left)
        base = f"({write_expression(left)})" if in_unit else write_expression(left, _ATOM)
        return f"{base}^{write_expression(right, _SIGN)}"
    binding = _BINDING[node.operator]
    sign: str = node.operator
    if sign in "+-" or (sign == "/" and _ends_in_unit(left)):  # `5 W/x` would take x for a unit
        sign = f" {sign} "
    return write_expression(left, binding) + sign + write_expression(right, binding + 1)


def _has_unit(node: nodes.Expr) -> bool:
    return isinstance(node, nodes.Number) and node.unit is not None


def _ends_in_unit(node: nodes.Expr) -> bool:
    while isinstance(node, nodes.Binary | nodes.Negative):
        node = node.right if isinstance(node, nodes.Binary) else node.operand
    return _has_unit(node)


def write_condition(node: nodes.Condition, place: int = 1) -> str:
    """The text of a condition; `place` as in `write_expression`."""
    if isinstance(node, nodes.Compare):
        return f"{write_expression(node.left)} {node.operator} {write_expression(node.right)}"
    binding = _LOGIC[node.operator]
    if node.operator == "not":
        text = f"not {write_condition(node.operands[0], binding)}"
    else:
        first, *rest = node.operands
        parts = [write_condition(first, binding), *(write_condition(part, binding + 1) for part in rest)]
        text = f" {node.operator} ".join(parts)
    return text if binding >= place else f"({text})"


def write_number(node: nodes.Number) -> str:
    """Digits, uncertainty in concise notation, exponent, unit."""
    digits, sign, exponent = node.text.replace("E", "e").partition("e")
    if node.sigma is not None:
        last = int(exponent or 0) - len(digits.partition(".")[2])
        digits = f"{digits}({int(Decimal(repr(node.sigma)).scaleb(-last).to_integral_value())})"
    return f"{digits}{sign}{exponent}" + (f" {write_unit(node.unit)}" if node.unit else "")


def write_unit(node: nodes.UnitText) -> str:
    """A unit such as `J.m2/W`."""
    text = ""
    for symbol, exponent in node.factors:
        below = bool(text) and exponent < 0
        shown = -exponent if below else exponent
        text += ("/" if below else "." if text else "") + symbol + ("" if shown == 1 else str(shown))
    return text
