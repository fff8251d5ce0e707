"""Single expressions outside a file, such as the energy text of a plugin, to formulas."""

from __future__ import annotations

from typing import TYPE_CHECKING

from eoscore.errors import Complaint, TarnError
from eoscore.language import nodes
from eoscore.language.checker import Checker
from eoscore.language.demand import must_match
from eoscore.language.faults import Faults
from eoscore.language.kind import Kind
from eoscore.language.lower import Lowering
from eoscore.language.parse import parse
from eoscore.language.scope import Named, Scope, constant_scope

if TYPE_CHECKING:
    from collections.abc import Mapping

    from eoscore.formula import Formula
    from eoscore.language.units import Dimension

__all__ = ["compile_text", "expression_of"]


def expression_of(text: str) -> nodes.Expr:
    """The expression that a text holds, TarnError where it holds none."""
    file = parse(f"text = {text}", "<expression>")
    first, *rest = file.entries
    if isinstance(first, nodes.Definition) and not rest and not first.where:
        return first.value
    message = f"`{text[:60]}` is not one expression"
    raise TarnError([Complaint.at(file.span, message, "write a single expression, without `where`")])


def compile_text(
    text: str,
    variables: Mapping[str, Dimension],
    values: Mapping[str, tuple[float, Dimension]],
    result: Dimension,
) -> Formula:
    """An expression as a formula of `variables`, the names in `values` at their SI values.

    Raises TarnError where the text does not read, or its dimension is not `result`.
    """
    expr, faults = expression_of(text), Faults()
    named = {name: Named(name, given=Kind(dim, value)) for name, (value, dim) in values.items()}
    around = Scope("the values given", constant_scope(), named)
    parameters = tuple(nodes.Ident(name, span=expr.span) for name in variables)
    definition = nodes.Definition(nodes.Ident("text", span=expr.span), parameters, expr, span=expr.span)
    function = Named("text", definition, around)
    kind = Checker(faults).function(function, [Kind(dim) for dim in variables.values()])
    must_match(kind, result, expr.span, "the expression", faults)
    faults.raise_if_any()
    return Lowering({}, {}).function(function, tuple(variables))[0]
