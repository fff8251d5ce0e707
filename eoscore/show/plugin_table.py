"""The installed dispersions as tables: what each is, where it comes from, what it takes."""

from __future__ import annotations

from typing import IO, TYPE_CHECKING

from eoscore.show.prefix import written
from eoscore.show.table import columns, console_on, put

if TYPE_CHECKING:
    from eoscore.language.signature import Parameter

__all__ = ["print_plugins"]


def print_plugins(stream: IO[str]) -> None:
    """List every installed dispersion: name, package, formula, source, and its parameters with their units.

    A refused plugin is listed with the reason of its refusal.
    """
    from eoscore.gas.registry import installed

    console = console_on(stream)
    for plugin in installed():
        console.print(f"{plugin.name}  (package {plugin.package})", style="bold")
        if plugin.kind is None:
            console.print(f"  {plugin.refusal}")
            continue
        console.print(f"  E = {plugin.kind.energy}")
        console.print(f"  from: {plugin.kind.origin}")
        signature = plugin.kind.signature()
        needs = "needs a mass" if signature.needs_mass else "needs no mass"
        console.print(f"  {needs}; momentum: {', '.join(signature.momentum)}")
        if signature.parameters:
            _print_parameters(signature.parameters, stream)


def _print_parameters(parameters: tuple[Parameter, ...], stream: IO[str]) -> None:
    table = columns("  parameter", "unit", "default", "what it is")
    for parameter in parameters:
        default = "-" if parameter.default is None else written(parameter.default)
        table.add_row(f"  {parameter.name}", parameter.unit, default, parameter.doc)
    put(console_on(stream), table)
