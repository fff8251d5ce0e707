"""Hypothesis strategies for the nodes of Tarn, as a parser could have built them."""

from __future__ import annotations

from hypothesis import strategies as st

from eoscore.language import nodes
from eoscore.language.reserved import LINE_WORDS
from eoscore.source import Source, Span

NOWHERE = Span(Source("<tree>", ""), 0, 0)

NAMES = [
    "x",
    "w_0",
    "T_c",
    "N",
    "e",
    "E",
    "μ",
    "ω1",
    "_",
    "um",
    "K",
    "uniform",
    "even",
    "geometric",
    *LINE_WORDS,
]
names = st.sampled_from(NAMES)
idents = names.map(lambda name: nodes.Ident(name, span=NOWHERE))
factors = st.tuples(
    st.sampled_from(["m", "um", "nK", "a0", "J", "G", "kHz", "W", "deg"]), st.sampled_from([-3, -1, 1, 2, 12])
)
units = st.lists(factors, min_size=1, max_size=4).map(
    lambda found: nodes.UnitText(tuple(found), span=NOWHERE)
)


@st.composite
def numbers(draw: st.DrawFn) -> nodes.Number:
    whole, places = draw(st.integers(0, 10**6)), draw(st.text("0123456789", max_size=6))
    exponent = draw(st.none() | st.integers(-20, 20))
    text = f"{whole}.{places}" if places else str(whole)
    text += "" if exponent is None else f"e{exponent}"
    bracket = draw(st.none() | st.integers(0, 999))
    sigma = None if bracket is None else float(f"{bracket}e{(exponent or 0) - len(places)}")
    return nodes.Number(text, float(text), sigma, draw(st.none() | units), span=NOWHERE)


leaves = st.one_of(numbers(), names.map(lambda name: nodes.Name(name, span=NOWHERE)))


@st.composite
def expressions(draw: st.DrawFn, depth: int = 3) -> nodes.Expr:
    kind = (
        draw(st.sampled_from(["leaf", "leaf", "binary", "binary", "negative", "call", "if"]))
        if depth
        else "leaf"
    )
    inner = expressions(depth - 1)
    match kind:
        case "binary":
            return nodes.Binary(draw(st.sampled_from("+-*/^")), draw(inner), draw(inner), span=NOWHERE)
        case "negative":
            return nodes.Negative(draw(inner), span=NOWHERE)
        case "call":
            return nodes.Call(draw(idents), draw(_some(inner)), span=NOWHERE)
        case "if":
            return nodes.If(draw(conditions(depth - 1)), draw(inner), draw(inner), span=NOWHERE)
    return draw(leaves)


@st.composite
def conditions(draw: st.DrawFn, depth: int = 1) -> nodes.Condition:
    kind = draw(st.sampled_from(["compare", "compare", "and", "or", "not"])) if depth > 0 else "compare"
    inner = conditions(depth - 1)
    match kind:
        case "and" | "or":
            return nodes.Logic(kind, (draw(inner), draw(inner)), span=NOWHERE)
        case "not":
            return nodes.Logic("not", (draw(inner),), span=NOWHERE)
    value = expressions(max(depth - 1, 0))
    return nodes.Compare(
        draw(st.sampled_from(["<", "<=", ">", ">="])), draw(value), draw(value), span=NOWHERE
    )


def _some(items: st.SearchStrategy[object], least: int = 0) -> st.SearchStrategy[tuple[object, ...]]:
    return st.lists(items, min_size=least, max_size=3).map(tuple)


small = expressions(1)


def _build(kind: type[nodes.Node], *parts: st.SearchStrategy[object]) -> st.SearchStrategy[nodes.Node]:
    return st.builds(kind, *parts, span=st.just(NOWHERE))


values = _build(nodes.Definition, idents, st.none(), expressions())
functions = _build(nodes.Definition, idents, _some(idents, 1), expressions(), _some(conditions()))
definitions = values | functions
assignments = _build(nodes.Definition, idents, st.none(), small)
isotopes = _build(nodes.Isotope, st.sampled_from(["Sr", "Yb", "K"]), st.integers(1, 300))
dispersions = _build(nodes.DispersionChoice, idents, _some(assignments))
gas_lines = (
    definitions | isotopes | dispersions | _build(nodes.Statistics, idents) | _build(nodes.Treatment, idents)
)
blocks = st.one_of(
    _build(nodes.Gas, idents, _some(gas_lines)),
    _build(nodes.Trap, idents, _some(definitions)),
    _build(nodes.States, idents, _some(definitions | _build(nodes.Anchor, small, small))),
)
spans = st.one_of(
    _build(nodes.Range, st.sampled_from(["even", "geometric"]), small, small, small),
    _build(nodes.Listing, _some(small, 1)),
)
axes = _build(nodes.Axis, idents, spans)
places = st.none() | idents
finds = _build(nodes.Find, _some(idents, 1), idents, places, _some(idents), _some(assignments), _some(axes))
derives = _build(nodes.Derive, _some(idents, 1), idents, places, _some(assignments))
uses = st.one_of(
    names.map(lambda name: nodes.Use(name, False, span=NOWHERE)),
    st.just(nodes.Use("lab/light.tarn", True, span=NOWHERE)),
)
entries = (definitions, blocks, finds, derives, uses)


@st.composite
def files(draw: st.DrawFn) -> nodes.File:
    kinds = draw(st.lists(st.sampled_from(entries), max_size=4))
    return nodes.File(tuple(draw(kind) for kind in kinds), span=NOWHERE)
