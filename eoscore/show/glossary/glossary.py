"""All entries by name, and what is near a name that nobody knows."""

from __future__ import annotations

from difflib import get_close_matches
from functools import cache
from typing import TYPE_CHECKING

from eoscore.gas.registry import installed
from eoscore.language.builtin import BUILTINS
from eoscore.language.scope import constant_scope
from eoscore.language.units import PREFIXED, PREFIXES, known_unit
from eoscore.show.glossary.cautions import CAUTIONS
from eoscore.show.glossary.constants import CONSTANTS
from eoscore.show.glossary.entry import Entry
from eoscore.show.glossary.functions import FUNCTIONS
from eoscore.show.glossary.quantities import DERIVED_ONLY, QUANTITIES
from eoscore.show.glossary.shelf import shelf_entries
from eoscore.show.glossary.units import UNITS
from eoscore.show.glossary.words import WORDS
from eoscore.state.table import QUANTITIES as STATE

if TYPE_CHECKING:
    from collections.abc import Iterator

    from eoscore.gas.dispersion import Dispersion

__all__ = ["entries_of", "glossary", "near_names"]


@cache
def glossary() -> dict[str, tuple[Entry, ...]]:
    """Every name with what it means; a name of two kinds, such as the constant and the unit `h`, has two entries."""
    found: dict[str, tuple[Entry, ...]] = {}
    for entry in _entries():
        found[entry.name] = (*found.get(entry.name, ()), entry)
    return found


def entries_of(name: str) -> tuple[Entry, ...]:
    """What a name means, units with a prefix too; empty where nobody knows it."""
    found = glossary().get(name, ())
    if name not in UNITS and known_unit(name) is not None:
        found = (*found, _prefixed(name))
    return found


def near_names(name: str, most: int = 3) -> list[str]:
    """Up to `most` known names that look like this one: first those that differ in capitals and `_` only."""
    known = glossary()
    same = [each for each in known if _bare(each) == _bare(name)]
    parts = [each for each in known if len(name) > 2 and name.lower() in each.lower()]
    alike = get_close_matches(name, known, most, 0.6)
    return list(dict.fromkeys([*same, *alike, *parts]))[:most]


def _bare(name: str) -> str:
    return name.lower().replace("_", "")


def _entries() -> Iterator[Entry]:
    for name in filter(QUANTITIES.__contains__, STATE):
        meaning, formula, source = QUANTITIES[name]
        yield Entry(name, "quantity", meaning, formula, STATE[name].unit, source)
    for name, (meaning, formula, unit, source) in DERIVED_ONLY.items():
        yield Entry(name, "quantity of `derive`", meaning, formula, unit, source)
    for name, (meaning, formula, source) in FUNCTIONS.items():
        yield Entry(name, f"function {_call(name)}", meaning, formula, _rule(name), source)
    yield from _constants()
    for name, (meaning, source) in UNITS.items():
        yield Entry(name, "unit", meaning, _in_si(name), _si(name), source)
    for name, (meaning, example) in WORDS.items():
        yield Entry(name, "word of Tarn", meaning, example)
    yield from shelf_entries()
    for plugin in installed():
        if plugin.kind is not None:
            yield _dispersion(plugin.name, plugin.kind)
    for name, (meaning, formula, source) in CAUTIONS.items():
        yield Entry(name, "caution", meaning, formula, "", source)


def _dispersion(name: str, kind: type[Dispersion]) -> Entry:
    parameters = "; ".join(f"{p.name} ({p.unit}): {p.doc}" for p in kind.signature().parameters)
    meaning = f"energy of one particle by its momentum; parameters: {parameters or 'none'}"
    return Entry(name, "dispersion", meaning, f"E = {kind.energy}", "J", kind.origin)


def _constants() -> Iterator[Entry]:
    for name, (meaning, formula, source) in CONSTANTS.items():
        kind = constant_scope().names[name].given
        value = "" if kind is None else f"{kind.value!r} {kind.dimension}".removesuffix(" 1")
        yield Entry(name, "constant", meaning, " = ".join(filter(None, (formula, value))), "", source)


def _call(name: str) -> str:
    builtin = BUILTINS[name]
    more = ", ..." if builtin.most is None else ""
    return f"{name}({', '.join(builtin.arguments)}{more})"


_RULES = {
    "pure": "takes and gives plain numbers",
    "root": "the root of the unit of its argument",
    "keeps": "the unit of its arguments",
    "drops": "a plain number",
}


def _rule(name: str) -> str:
    return _RULES[BUILTINS[name].rule]


def _si(name: str) -> str:
    known = known_unit(name)
    return "" if known is None else str(known[1])


def _in_si(name: str) -> str:
    known = known_unit(name)
    return "" if known is None else f"1 {name} = {float(known[0])!r} {known[1]}".removesuffix(" 1")


def _prefixed(name: str) -> Entry:
    prefix = next(p for p in PREFIXES if name.startswith(p) and name.removeprefix(p) in PREFIXED)
    base = name.removeprefix(prefix)
    meaning = f"{UNITS[base][0]}, times 10^{PREFIXES[prefix]}"
    return Entry(name, "unit with a prefix", meaning, _in_si(name), _si(name), UNITS[base][1])
