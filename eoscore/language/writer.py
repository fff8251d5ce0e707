"""Nodes to text in one canonical layout: what it writes is read back as the same nodes."""

from __future__ import annotations

from typing import TYPE_CHECKING

from eoscore.language import nodes
from eoscore.language.write_expression import write_condition, write_expression, write_unit

if TYPE_CHECKING:
    from collections.abc import Iterable

_INDENT = "    "
_BLOCKS = {nodes.Gas: "gas", nodes.Trap: "trap", nodes.States: "states"}


def write(node: nodes.Node) -> str:
    """The text of any node; of a file, one that ends with a line end, or "" for an empty one."""
    match node:
        case nodes.File():
            return _file(node)
        case nodes.Gas() | nodes.Trap() | nodes.States():
            lines = "".join(f"{_INDENT}{write(entry)}\n" for entry in node.entries)
            return f"{_BLOCKS[type(node)]} {node.name.name} {{\n{lines}}}"
        case nodes.Find() | nodes.Derive():
            return _question(node)
        case nodes.Definition():
            return _definition(node)
        case nodes.Compare() | nodes.Logic():
            return write_condition(node)
        case nodes.Number() | nodes.Name() | nodes.Call() | nodes.If() | nodes.Negative() | nodes.Binary():
            return write_expression(node)
    return _line(node)


def _file(node: nodes.File) -> str:
    text = ""
    for before, entry in zip((None, *node.entries), node.entries, strict=False):
        apart = isinstance(before, tuple(_BLOCKS)) or isinstance(entry, tuple(_BLOCKS))
        text += ("\n" if before and (apart or type(before) is not type(entry)) else "") + write(entry) + "\n"
    return text


def _definition(node: nodes.Definition) -> str:
    parameters = "" if node.parameters is None else f"({_names(node.parameters)})"
    where = f" where {', '.join(map(write, node.where))}" if node.where else ""
    return f"{node.name.name}{parameters} = {write(node.value)}{where}"


def _names(idents: Iterable[nodes.Ident]) -> str:
    return ", ".join(ident.name for ident in idents)


def _question(node: nodes.Find | nodes.Derive) -> str:
    verb = "find" if isinstance(node, nodes.Find) else "derive"
    parts = [f"{verb} {_names(node.quantities)} for {node.gas.name}"]
    parts += [f"in {node.place.name}"] if node.place else []
    parts += [f"from {place.name}" for place in node.origins] if isinstance(node, nodes.Find) else []
    parts += [f"with {', '.join(map(write, node.conditions))}"] if node.conditions else []
    parts += (
        [f"over {', '.join(map(write, node.over))}"] if isinstance(node, nodes.Find) and node.over else []
    )
    return " ".join(parts)


def _line(node: nodes.Node) -> str:
    match node:
        case nodes.Ident():
            return node.name
        case nodes.UnitText():
            return write_unit(node)
        case nodes.Isotope():
            return f"isotope {node.symbol}-{node.mass_number}"
        case nodes.Statistics() | nodes.Treatment() | nodes.Levels():
            return f"{type(node).__name__.lower()} {node.kind.name}"
        case nodes.DispersionChoice():
            lines = "".join(f"{_INDENT * 2}{write(parameter)}\n" for parameter in node.parameters)
            return f"dispersion {node.name.name}" + (f" {{\n{lines}{_INDENT}}}" if lines else "")
        case nodes.Anchor():
            return f"anchor N_c = {write(node.number)} at T = {write(node.temperature)}"
        case nodes.Use():
            return f'use "{node.target}"' if node.is_path else f"use {node.target}"
        case nodes.Axis():
            return f"{node.name.name} = {write(node.values)}"
        case nodes.Range():
            return f"{node.kind}({', '.join(map(write, (node.start, node.stop, node.points)))})"
        case nodes.Listing():
            return f"[{', '.join(map(write, node.values))}]"
    message = f"{type(node).__name__} is no node of a Tarn file"
    raise TypeError(message)
