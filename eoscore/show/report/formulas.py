"""The formulas of a `derive` as MathML, each with its value, its limits and the steps that led to it."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from eoscore.show.formulas import small_words
from eoscore.show.prefix import quantity, written
from eoscore.show.report.markup import Markup, element, table, together
from eoscore.show.report.raised import raised

if TYPE_CHECKING:
    from collections.abc import Iterator, Mapping

    from eoscore.answer.record import DerivedAnswer

__all__ = ["formulas"]


def formulas(answer: DerivedAnswer) -> Markup:
    """Every quantity with its formula; the steps stand once, below all of them."""
    told: dict[str, None] = {}
    parts: list[Markup] = []
    for name, formula in answer.formulas.items():
        parts.append(element("div", *_formula(name, formula), class_="formula"))
        told.update((f"where {each}", None) for each in formula.get("conditions", ()))
        told.update((each, None) for each in formula.get("steps", ()))
    if told:
        steps = element("ol", *(element("li", step) for step in told))
        parts.append(element("details", element("summary", "How it was derived"), steps, open="open"))
    return together(*parts)


def _formula(name: str, formula: Mapping[str, Any]) -> Iterator[Markup]:
    value, unit = formula.get("value"), formula.get("unit", "1")
    if formula.get("sympy") is None:
        number = "" if value is None else f" (numerically {quantity(value, unit)})"
        yield element("p", element("code", name), f": no formula{number}, because {formula.get('why')}")
        return
    yield _math(formula)
    yield element("p", element("code", formula["text"]), class_="text")
    if "side" in formula:
        yield element("p", f"for {formula['side']}")
    if value is not None:
        yield element("p", element("code", name), " = ", element("b", raised(quantity(value, unit))))
    elif "numerical" in formula:
        yield element("p", f"no number, because {formula['why']}")
    if where := formula.get("where"):
        shown = ", ".join(f"{symbol} = {written(number)}" for symbol, number in where.items())
        yield element("p", f"where, in SI units, {shown}", class_="text")
    if "scale" in formula:
        yield together(element("p", "with"), _math(formula["scale"]))
    for expansion in formula.get("expansions", ()):
        yield from _expansion(expansion, unit)
    if "jump" in formula:
        yield together(element("p", "Heat capacity jump at T_c:"), _math(formula["jump"]))
    for term in formula.get("first_order", {}).values():
        words = f"Beyond the ideal, infinite gas, relative: {term['value']:.4g}, by"
        yield together(element("p", words), _math(term))
    if slopes := formula.get("sensitivities"):
        rows = ((element("code", symbol), _slope(slope)) for symbol, slope in slopes.items())
        yield element("p", "Sensitivities: by how many per cent T_c moves when a symbol moves by one")
        yield table(f"Sensitivities of {name}", ("symbol", "d ln T_c / d ln symbol"), rows)


def _expansion(expansion: Mapping[str, Any], unit: str) -> Iterator[Markup]:
    here = "" if expansion["value"] is None else f" = {quantity(expansion['value'], unit)} here"
    yield element("p", f"{expansion['limit']}{here}; {small_words(expansion)}")
    yield _math(expansion) if "mathml" in expansion else element("p", element("code", expansion["text"]))


def _math(formula: Mapping[str, Any]) -> Markup:
    """The formula as a block of MathML; it scrolls by itself where it is too wide."""
    if "mathml" not in formula:
        return element("p", element("code", formula["text"]))
    block = element("math", Markup(formula["mathml"]), displaystyle="true", alttext=formula["text"])
    return element("div", block, class_="wide", tabindex="0", role="group", aria_label=formula["text"])


def _slope(slope: str | float) -> str:
    return slope if isinstance(slope, str) else f"{slope:.6g}"
