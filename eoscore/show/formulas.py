"""The formulas of a `derive` as lines of text: the formula, its value, what it needs, how it came about."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from eoscore.show.prefix import quantity

if TYPE_CHECKING:
    from collections.abc import Iterator, Mapping

    from eoscore.answer.record import DerivedAnswer

__all__ = ["formula_lines", "small_words"]


def formula_lines(answer: DerivedAnswer) -> Iterator[str]:
    """Every quantity with its notes; conditions and steps are told once, after all of them."""
    told: dict[str, None] = {}
    for name, formula in answer.formulas.items():
        yield from _lines(name, formula)
        told.update((f"where {each}", None) for each in formula.get("conditions", ()))
        told.update((f"- {each}", None) for each in formula.get("steps", ()))
    if told:
        yield "  How it was derived:"
        yield from (f"    {line}" for line in told)


def _lines(name: str, formula: Mapping[str, Any]) -> Iterator[str]:
    value, unit = formula.get("value"), formula.get("unit", "1")
    if formula.get("sympy") is None:
        number = "" if value is None else f" (numerically {quantity(value, unit)})"
        yield f"  {name}: no formula{number}, because {formula.get('why')}"
        return
    side = f"    for {formula['side']}" if "side" in formula else ""
    yield f"  {formula['text']}{side}"
    if value is not None:
        yield f"    = {quantity(value, unit)}"
    elif "numerical" in formula:
        yield f"    no number, because {formula['why']}"
    if "scale" in formula:
        yield f"    with {formula['scale']['text']}"
    for expansion in formula.get("expansions", ()):
        here = "" if expansion["value"] is None else f" = {quantity(expansion['value'], unit)}"
        yield f"    {expansion['limit']}: {expansion['text']}{here}"
        yield f"      {small_words(expansion)}"
    if "jump" in formula:
        yield f"    heat capacity jump at T_c: {formula['jump']['text']}"
    for term in formula.get("first_order", {}).values():
        yield f"    beyond the ideal, infinite gas, relative: {term['text']} = {term['value']:.4g}"
    if slopes := formula.get("sensitivities"):
        yield "    d ln T_c / d ln: " + ", ".join(
            f"{symbol} {_slope(slope)}" for symbol, slope in slopes.items()
        )


def small_words(expansion: Mapping[str, Any]) -> str:
    """What is small in an expansion, its value where there is one, and how far the leading terms reach."""
    value = expansion["small_value"]
    return f"{expansion['small_text']}{'' if value is None else f' = {value:.3g}'}; {expansion['range']}"


def _slope(slope: str | float) -> str:
    return slope if isinstance(slope, str) else f"{slope:.6g}"
