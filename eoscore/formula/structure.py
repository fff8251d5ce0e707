"""What a formula is made of: independent summands and hidden scalings."""

from __future__ import annotations

from collections import defaultdict
from fractions import Fraction
from typing import TYPE_CHECKING, cast

import numpy as np

from eoscore.formula.expression import Formula
from eoscore.formula.polynomial import Polynomial, monomial, polynomial
from eoscore.formula.tape import ordered

if TYPE_CHECKING:
    from collections.abc import Iterable, Sequence

    from numpy.typing import NDArray

    from eoscore.formula.expression import Node

__all__ = ["additive_parts", "polynomial", "scaling_powers", "summands"]


def additive_parts(f: Formula, names: Sequence[str]) -> list[tuple[frozenset[str], Formula]]:
    """Summands that share none of the names, as fine as sums, constant factors and powers show it.

    Each part comes with the names it depends on; parts are in the order of the names. Constants stand in the
    first part, so the parts add up to the formula. Terms are multiplied out only where that splits more.
    """
    terms = summands(f)
    groups = _grouped(terms, names)
    if max((len(group) for group, _ in groups), default=0) > 1:
        finer = _grouped(_multiplied_out(terms, names), names)
        groups = finer if len(finer) > len(groups) else groups
    return groups


def summands(f: Formula) -> list[Formula]:
    """The terms of a sum, through nested sums, signs and constant factors."""
    terms: list[Formula] = []
    waiting = [(1.0, f)]
    while waiting:
        factor, node = waiting.pop()
        args = node.operands
        if node.op in ("add", "sub"):
            waiting.append((factor if node.op == "add" else -factor, args[1]))
            waiting.append((factor, args[0]))
        elif node.op == "neg":
            waiting.append((-factor, args[0]))
        elif node.op == "mul" and args[0].op == "constant":
            waiting.append((factor * args[0].value, args[1]))
        elif node.op == "div" and args[1].op == "constant" and args[1].value:
            waiting.append((factor / args[1].value, args[0]))
        else:
            terms.append(factor * node)
    return terms


def _multiplied_out(terms: Iterable[Formula], names: Sequence[str]) -> list[Formula]:
    """The terms, polynomials among them gathered as monomials."""
    gathered: Polynomial = defaultdict(float)
    size: Polynomial = defaultdict(float)
    rest = []
    for term in terms:
        expanded = polynomial(term, names)
        if expanded is None:
            rest.append(term)
            continue
        for exponents, coefficient in expanded.items():
            gathered[exponents] += coefficient
            size[exponents] += abs(coefficient)
    kept = {powers: value for powers, value in gathered.items() if abs(value) > 1e-14 * size[powers]}
    return [value * monomial(powers, names) for powers, value in kept.items()] + rest


def _grouped(terms: Iterable[Formula], names: Sequence[str]) -> list[tuple[frozenset[str], Formula]]:
    """The terms added up in groups that share no name."""
    groups: list[tuple[frozenset[str], Formula]] = []
    constants = Formula.of(0.0)
    for term in terms:
        reach = term.variables & frozenset(names)
        if not reach:
            constants = constants + term
            continue
        touched = [group for group in groups if group[0] & reach]
        groups = [group for group in groups if not group[0] & reach]
        total = term
        for other, part in reversed(touched):
            reach, total = reach | other, part + total
        groups.append((reach, total))
    groups.sort(key=lambda group: min(names.index(name) for name in group[0]))
    if not groups:
        return [(frozenset(), constants)]
    first, part = groups[0]
    return [(first, part + constants), *groups[1:]]


def scaling_powers(f: Formula, names: Sequence[str]) -> dict[str, Fraction | float] | None:
    """Powers k with f(s^k_i x_i) = s f(x) for all s > 0, or None if the formula has none.

    Free choices are resolved to the least powers, which is the symmetric choice (x y gives 1/2 each).
    """
    if f.op == "constant":
        return None
    degrees: dict[int, NDArray[np.float64]] = {}
    equal: list[NDArray[np.float64]] = []
    for node in ordered([f]):
        degree = _degree(node, [degrees[arg.serial] for arg in node.args], equal, names)
        if degree is None:
            return None
        degrees[node.serial] = degree
    rows = np.array([*equal, degrees[f.serial]])
    wanted = np.append(np.zeros(len(equal)), 1.0)
    powers = np.linalg.lstsq(rows, wanted)[0]
    if np.max(np.abs(rows @ powers - wanted)) > 1e-12:
        return None
    return {name: _rational(float(power)) for name, power in zip(names, powers, strict=True)}


def _degree(
    node: Node, args: list[NDArray[np.float64]], equal: list[NDArray[np.float64]], names: Sequence[str]
) -> NDArray[np.float64] | None:
    """The power of s in a node, linear in the unknown powers; what must vanish for it is added to `equal`."""
    nothing = np.zeros(len(names))
    match node.op:
        case "constant" | "truth" | "variable":
            return np.array([float(name == node.name) for name in names])
        case "mul":
            return args[0] + args[1]
        case "div":
            return args[0] - args[1]
        case "neg" | "abs":
            return args[0]
        case "sqrt":
            return args[0] / 2
        case "pow" if node.args[1].op == "constant":
            return args[0] * cast("Formula", node.args[1]).value
        case "sign":
            return nothing
        case "add" | "sub" | "min" | "max" | "choose":
            return _common(node.args[-2:], args[-2:], equal)
        case "less" | "less_equal" | "atan2":
            _common(node.args, args, equal)
            return nothing
        case "both" | "either":
            return nothing
    equal.extend(args)
    return nothing


def _common(
    nodes: Sequence[Node], args: list[NDArray[np.float64]], equal: list[NDArray[np.float64]]
) -> NDArray[np.float64]:
    """The power that two nodes must share; a constant 0 scales with any."""
    for node, other in zip(nodes, args[::-1], strict=True):
        if node.op == "constant" and node.value == 0:
            return other
    equal.append(args[0] - args[1])
    return args[0]


def _rational(power: float) -> Fraction | float:
    near = Fraction(power).limit_denominator(1000)
    return near if abs(float(near) - power) < 1e-13 else power
