"""Polynomials hidden in formulas: the map from exponents to coefficients, exact up to rounding."""

from __future__ import annotations

from itertools import product
from typing import TYPE_CHECKING, cast

from eoscore.formula.expression import Formula
from eoscore.formula.tape import ordered

if TYPE_CHECKING:
    from collections.abc import Sequence

    from eoscore.formula.expression import Node

__all__ = ["Polynomial", "monomial", "polynomial"]

Polynomial = dict[tuple[int, ...], float]

MOST_TERMS = 400  # beyond that a formula is no longer usefully a polynomial
CANCELLED = 1e-14  # a coefficient this much smaller than what was added up is taken as zero


def polynomial(f: Formula, names: Sequence[str]) -> Polynomial | None:
    """The formula as {exponents of the names: coefficient}, or None if it is no polynomial in them.

    Coefficients that cancel to rounding are left out; the zero polynomial is empty. None also where another
    variable occurs.
    """
    if not f.variables <= set(names):
        return None
    known: dict[int, Polynomial] = {}
    for node in ordered([f]):
        terms = _terms(node, [known.get(arg.serial) for arg in node.args], names)
        if terms is not None and len(terms) <= MOST_TERMS:
            known[node.serial] = terms
    return known.get(f.serial)


def monomial(exponents: Sequence[int], names: Sequence[str]) -> Formula:
    """The product of the names to these powers."""
    result = Formula.of(1.0)
    for name, power in zip(names, exponents, strict=True):
        result = result * Formula.named(name) ** power
    return result


def _terms(node: Node, args: list[Polynomial | None], names: Sequence[str]) -> Polynomial | None:
    if node.op == "constant":
        return {(0,) * len(names): node.value} if node.value else {}
    if node.op == "variable":
        return {tuple(int(name == node.name) for name in names): 1.0}
    if node.op == "pow":
        return _power(args[0], cast("Formula", node.args[1]))
    if not args or None in args:
        return None
    inner = cast("list[Polynomial]", args)
    match node.op:
        case "neg":
            return _sum({}, inner[0], -1.0)
        case "add" | "sub":
            return _sum(inner[0], inner[1], 1.0 if node.op == "add" else -1.0)
        case "mul":
            return _product(inner[0], inner[1])
        case "div" if node.args[1].op == "constant" and node.args[1].value:
            return _sum({}, inner[0], 1 / node.args[1].value)
    return None


def _sum(a: Polynomial, b: Polynomial, factor: float) -> Polynomial:
    total = dict(a)
    for exponents, coefficient in b.items():
        _gather(total, exponents, factor * coefficient)
    return total


def _gather(total: Polynomial, exponents: tuple[int, ...], coefficient: float) -> None:
    before = total.get(exponents, 0.0)
    after = before + coefficient
    if abs(after) <= CANCELLED * abs(before):
        total.pop(exponents, None)
    else:
        total[exponents] = after


def _product(a: Polynomial, b: Polynomial) -> Polynomial | None:
    if len(a) * len(b) > MOST_TERMS**2:
        return None
    total: Polynomial = {}
    for (left, x), (right, y) in product(a.items(), b.items()):
        _gather(total, tuple(i + j for i, j in zip(left, right, strict=True)), x * y)
    return total


def _power(base: Polynomial | None, exponent: Formula) -> Polynomial | None:
    if base is None or exponent.op != "constant":
        return None
    count = exponent.value
    if not count.is_integer() or not 0 < count <= 64:
        return None
    total: Polynomial | None = base
    for _ in range(int(count) - 1):
        total = _product(total, base) if total is not None and len(total) <= MOST_TERMS else None
    return total
