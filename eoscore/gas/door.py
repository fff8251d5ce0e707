"""The door: a plugin is checked completely before it is let in, and refused with all that is wrong with it."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING, Any

from eoscore.errors import PluginError, TarnError
from eoscore.gas.dispersion import Dispersion
from eoscore.language.signature import Parameter

if TYPE_CHECKING:
    from collections.abc import Callable, Iterator

__all__ = ["admitted"]

MOMENTA = (("p",), ("px",), ("px", "py"), ("px", "py", "pz"))
Fault = tuple[str, str]  # what was found, what was wanted
NAME = re.compile(r"[^\W\d]\w*")
UNIT = re.compile(r"1|[^\W\d]+0?(-?\d+)?([./][^\W\d]+0?(-?\d+)?)*")


def admitted(name: str, found: object) -> type[Dispersion]:
    """The class behind an entry point `name`, if it keeps the contract as far as it can be read.

    PluginError names everything that was found amiss. Nothing is computed but the reading of the energy text.
    """
    if not isinstance(found, type):
        raise PluginError(name, f"{_shown(found)}, not a class", "a subclass of eoscore.gas.Dispersion")
    if not issubclass(found, Dispersion):
        raise PluginError(name, f"the class {found.__qualname__}, no dispersion", "a subclass of Dispersion")
    for checks in (_declarations, _parameters, _texts):  # each set of checks relies on those before it
        faults = list(checks(name, found))
        if faults:
            raise PluginError(name, *("; ".join(words) for words in zip(*faults, strict=True)))
    return found


def _declarations(name: str, kind: type[Dispersion]) -> Iterator[Fault]:
    """The class attributes that are single values."""
    own = vars_of(kind)
    if own.get("name") != name:
        yield f"name = {own.get('name')!r}", f"name = {name!r}, as its entry point is called"
    if not _is_text(own.get("origin")):
        yield f"origin = {own.get('origin')!r}", "origin: where the formula comes from, in words"
    if not _is_text(own.get("energy")) and not isinstance(own.get("energy"), property):
        yield "no energy formula", 'energy: a Tarn expression in J, such as "p^2/(2*m)"'
    if own["momentum"] not in MOMENTA:
        wanted = " or ".join(map(str, MOMENTA))
        yield f"momentum = {own['momentum']!r}", f"momentum: {wanted}"
    if not _all_are(str, own["walls"]):
        yield f"walls = {own['walls']!r}", "walls: a tuple of Tarn expressions in kg m/s"
    if not isinstance(own["needs_mass"], bool):
        yield f"needs_mass = {own['needs_mass']!r}", "needs_mass: True or False"
    for method in sorted(kind.__abstractmethods__ - {"energy"}):
        yield f"the method {method} left abstract", f"a body for {method}"


def _parameters(_: str, kind: type[Dispersion]) -> Iterator[Fault]:
    own = vars_of(kind)
    if not _all_are(Parameter, own["parameters"]):
        yield f"parameters = {own['parameters']!r}", "parameters: a tuple of Parameter"
        return
    names = [p.name for p in kind.parameters]
    for parameter in kind.parameters:
        yield from _one_parameter(parameter, names, kind.momentum)
    levels = own["levels"]
    if not _all_are(str, levels) or not set(levels) <= set(names):
        yield f"levels = {levels!r}", "levels: a tuple of names of its parameters"


def _one_parameter(parameter: Parameter, names: list[str], momentum: tuple[str, ...]) -> Iterator[Fault]:
    shown = f"a parameter {parameter.name!r}"
    if not NAME.fullmatch(parameter.name):
        yield shown, "a Tarn name: a letter or _, then letters, digits, _"
    if names.count(parameter.name) > 1:
        yield f"{shown} twice", "each parameter once"
    if parameter.name in {*momentum, *_taken()}:
        yield shown, "a name that is neither a momentum nor a constant nor a function of Tarn"
    if not UNIT.fullmatch(parameter.unit) or _refusal(lambda: _unit(parameter.unit)):
        yield f"{shown} in the unit {parameter.unit!r}", "a unit of Tarn, such as J, kg.m/s, s-1, or 1"


def _texts(_: str, kind: type[Dispersion]) -> Iterator[Fault]:
    """The energy and its walls read as Tarn and have the right dimension, at any values."""
    values = {p.name: 1.0 if p.default is None else p.default for p in kind.parameters}
    trial = object.__new__(kind)  # no values of a real gas are known yet, so __init__ has nothing to check
    trial.mass, trial.values = (1.0 if kind.needs_mass else None), values
    fault = _refusal(lambda: trial.field)
    if fault is not None:
        wanted = f"a Tarn expression in J of {', '.join(kind.momentum)}, its parameters and the constants"
        yield f"energy = {kind.energy!r}, which does not read: {fault}", wanted


def _unit(text: str) -> object:
    from eoscore.language.kind import unit

    return unit(text)


def _taken() -> frozenset[str]:
    from eoscore.language.builtin import BUILTINS
    from eoscore.language.reserved import RESERVED
    from eoscore.language.scope import constant_scope

    return RESERVED | {"m"} | BUILTINS.keys() | constant_scope().names.keys()


def _refusal(attempt: Callable[[], object]) -> str | None:
    """Why an attempt failed, in one line; None where it did not."""
    try:
        attempt()
    except TarnError as fault:
        return "; ".join(complaint.message for complaint in fault.complaints)
    except Exception as fault:  # noqa: BLE001 - a stranger's class may fail in any way, and is refused for it
        return f"{type(fault).__name__}: {fault}"
    return None


def vars_of(kind: type[Dispersion]) -> dict[str, Any]:
    """The class attributes as they stand, inherited ones too, descriptors not resolved."""
    merged: dict[str, Any] = {}
    for base in reversed(kind.__mro__):
        merged.update(vars(base))
    if merged["energy"] is vars(Dispersion)["energy"]:
        merged["energy"] = None
    return merged


def _is_text(value: object) -> bool:
    return isinstance(value, str) and bool(value.strip())


def _all_are(kind: type, value: object) -> bool:
    return isinstance(value, tuple) and all(isinstance(item, kind) for item in value)


def _shown(found: object) -> str:
    return f"{type(found).__name__} {found!r:.60}"
