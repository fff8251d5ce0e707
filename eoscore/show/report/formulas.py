"""The formulas of a `derive` as MathML, each with its value, its limits and the steps that led to it."""

from __future__ import annotations

from html.entities import html5
from typing import TYPE_CHECKING, Any

from eoscore.show.prefix import quantity
from eoscore.show.report.markup import Markup, element, listed, together

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
        yield element("p", element("code", name), " = ", element("b", quantity(value, unit)))
    if "scale" in formula:
        yield together(element("p", "with"), _math(formula["scale"]))
    for expansion in formula.get("expansions", ()):
        yield from _expansion(expansion, unit)
    if "jump" in formula:
        yield together(element("p", "Heat capacity jump at T_c:"), _math(formula["jump"]))
    if slopes := formula.get("sensitivities"):
        shown = (f"d ln T_c / d ln {symbol} = {_slope(slope)}" for symbol, slope in slopes.items())
        yield element("details", element("summary", "Sensitivities"), listed(shown))


def _expansion(expansion: Mapping[str, Any], unit: str) -> Iterator[Markup]:
    here = "" if expansion["value"] is None else f" = {quantity(expansion['value'], unit)} here"
    small = expansion["small"].replace("**", "^")
    yield element(
        "p",
        f"{expansion['limit']}{here}; small = {small} = {expansion['small_value']:.3g}; {expansion['range']}",
    )
    yield _math(expansion) if "mathml" in expansion else element("p", element("code", expansion["text"]))


def _math(formula: Mapping[str, Any]) -> Markup:
    """The formula as a block of MathML; it scrolls by itself where it is too wide."""
    if "mathml" not in formula:
        return element("p", element("code", formula["text"]))
    inner = Markup(_letters(formula["mathml"]))
    block = element("math", inner, display="block", alttext=formula["text"])
    return element("div", block, class_="wide", tabindex="0", role="region", aria_label=formula["text"])


def _letters(mathml: str) -> str:
    """Named letters as themselves, so that the page is well-formed XML too."""
    for name in ("InvisibleTimes;", "pi;", "ApplyFunction;", "int;", "Sum;", "infin;", "dd;"):
        mathml = mathml.replace(f"&{name}", html5[name])
    return mathml


def _slope(slope: str | float) -> str:
    return slope if isinstance(slope, str) else f"{slope:.6g}"
