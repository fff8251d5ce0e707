"""T_c where several powers, or another function than a power, make N_c(T): an equation, its root, its ends."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import sympy as sp

from eoscore.symbolic.critical import number_of, root
from eoscore.symbolic.evaluate import number
from eoscore.symbolic.expansion import walked
from eoscore.symbolic.quantities import K_B, NUMBER, TEMPERATURE
from eoscore.symbolic.writing import forms, missing_words, root_forms, where, written_name

if TYPE_CHECKING:
    from collections.abc import Callable, Collection, Mapping, Sequence

    from eoscore.symbolic.expansion import Expansion

__all__ = ["implicit"]


def implicit(
    count: sp.Expr,
    expanded: Sequence[Expansion],
    values: Mapping[sp.Symbol, float],
    tidied: Callable[[sp.Expr], sp.Expr],
) -> dict[str, Any]:
    """The entry of a T_c that solves count(T) = N; its number, slopes and reach where `values` has all symbols.

    count: N_c as an expression in T. tidied: how an expression is written.
    """
    count = tidied(count)
    number_symbol = tidied(NUMBER)
    values = {**values, number_symbol: values[NUMBER]} if NUMBER in values else dict(values)
    used = (count.free_symbols | {number_symbol}) - {TEMPERATURE}
    known = {s: v for s, v in values.items() if s in used}
    given = where(known.items())
    equation = root_forms("T_c", count, number_symbol, given)
    entry = {**equation, "closed": False, "equation": equation["sympy"], "where": given}
    entry |= {"value": None, "unit": "K"}
    entry["why"] = missing_words(used - set(known))
    here: dict[sp.Symbol, float] | None = None
    if entry["why"] is None:
        entry["value"] = temperature = root(number_of(count, known), known[number_symbol])
        here = {**known, TEMPERATURE: temperature}
        entry["sensitivities"] = _slopes(count, number_symbol, here)
    walk = walked(count, here) if here and expanded else []
    several = [_written(expansion, walk, number_symbol, here, tidied, given) for expansion in expanded]
    several.sort(key=lambda e: e["small_value"] or 0.0)
    return entry | ({"expansion": several[0], "expansions": several} if several else {})


def _slopes(count: sp.Expr, total: sp.Symbol, here: Mapping[sp.Symbol, float]) -> dict[str, float]:
    """d ln T_c / d ln of every symbol, by the implicit function theorem."""
    slope = number(sp.diff(count, TEMPERATURE), here) * here[TEMPERATURE]
    slopes = {written_name(total.name): here[total] / slope}
    for symbol in sorted(set(here) - {K_B, total, TEMPERATURE}, key=str):
        slopes[written_name(symbol.name)] = -number(sp.diff(count, symbol), here) * here[symbol] / slope
    return slopes


def _written(
    expansion: Expansion,
    walk: Sequence[tuple[float, float]],
    total: sp.Symbol,
    here: Mapping[sp.Symbol, float] | None,
    tidied: Callable[[sp.Expr], sp.Expr],
    given: Collection[str],
) -> dict[str, Any]:
    leading, correction, small = (
        tidied(part) for part in (expansion.leading, expansion.correction, expansion.small)
    )
    whole = leading if correction == 0 else sp.Mul(leading, 1 + correction, evaluate=False)
    smallness = forms("small", small, given)
    entry = {**forms("T_c", whole, given), "limit": expansion.limit}
    entry |= {"small": smallness["sympy"], "small_text": smallness["text"]}
    if here is None:
        return entry | {"small_value": None, "range": "small -> 0", "value": None}
    size = number(small, here)
    reach = expansion.reach(walk, (whole, small), total, here)
    good = f"within 1 % up to small = {reach:.2g}" if reach is not None else "not within 1 % near this N"
    # Two terms of a series say nothing where the next one is as large as they are.
    value = number(whole, here) if size < 1 else None
    return entry | {"small_value": size, "range": f"small -> 0; {good}", "value": value}
