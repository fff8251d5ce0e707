"""Where a formula is not smooth: the expressions that vanish on its creases, edges and tips."""

from __future__ import annotations

from typing import TYPE_CHECKING

from eoscore.formula import margin
from eoscore.formula.expression import Formula
from eoscore.formula.structure import summands
from eoscore.formula.tape import ordered

if TYPE_CHECKING:
    from collections.abc import Iterable, Sequence

__all__ = ["creases"]


def creases(f: Formula, names: Sequence[str]) -> tuple[tuple[Formula, ...], ...]:
    """Groups of formulas of these variables; f may have a crease where all of one group are 0, and nowhere else.

    u for |u| and the sign of u, a - b for the greater or the lesser of a and b, the margin of a choice, and u, v,
    ... together for the root of a sum of their squares. Poles and the ends of a domain do not count.
    """
    found: dict[tuple[int, ...], tuple[Formula, ...]] = {}
    for node in ordered([f]):
        if isinstance(node, Formula) and not node.variables.isdisjoint(names):
            for group in _of(node):
                if group and all(not one.variables.isdisjoint(names) for one in group):
                    found[tuple(one.serial for one in group)] = group
    return tuple(found.values())


def _of(node: Formula) -> Iterable[tuple[Formula, ...]]:
    match node.op:
        case "abs" | "sign":
            return [node.operands]
        case "min" | "max":
            return [(node.operands[0] - node.operands[1],)]
        case "choose":
            return [(edge,) for edge in _edges(margin(node.condition))]
        case "sqrt":
            return [_roots(node.operands[0])]
        case "pow" if node.operands[1].op == "constant" and 0 < node.operands[1].value < 1:
            return [_roots(node.operands[0])]
    return []


def _edges(edge: Formula) -> list[Formula]:
    """The margins of the comparisons of which a condition is made."""
    parts, waiting = [], [edge]
    while waiting:
        part = waiting.pop()
        if part.op in ("min", "max"):
            waiting.extend(part.operands)
        else:
            parts.append(part)
    return parts


def _roots(total: Formula) -> tuple[Formula, ...]:
    """u, v, ... of a sum of squares c u^2 + d v^2 + ...; nothing for another sum."""
    found: list[Formula] = []
    for term in summands(total):
        bases = [part for part in (term.operands if term.op in ("mul", "div") else (term,)) if part.variables]
        square = len(bases) == 1 and bases[0].op == "pow" and bases[0].operands[1].op == "constant"
        if not square or bases[0].operands[1].value % 2:
            return ()
        found.append(bases[0].operands[0])
    return tuple(found)
