"""The symbolic side of a binding, independent of its formulas: SymPy expressions in the file's own symbols."""

from __future__ import annotations

import keyword
from collections.abc import Mapping
from functools import cached_property
from typing import TYPE_CHECKING, Any
from unicodedata import normalize

import sympy as sp

from eoscore.language import nodes
from eoscore.language.compile import expression_of
from eoscore.language.limits import parts
from eoscore.language.lower import conjuncts
from eoscore.language.scope import Named, constant_scope, read_in
from eoscore.language.sympy_walk import SympyWalk

if TYPE_CHECKING:
    from collections.abc import Sequence

    from eoscore.language.block import Pair
    from eoscore.language.lower import Lowering

__all__ = ["Symbolic", "symbol_name", "symbolic_text"]

_TAKEN = ("N", "T", "E", "alpha", "n")  # free symbols of the formulas to come
_RADII = ("p", "r", "rho")


def symbol_name(name: str) -> str:
    """The name of a symbol that Python reads back: a word that Python reserves gets a trailing `_`."""
    plain = normalize("NFKC", name)
    return plain + "_" if keyword.iskeyword(plain) or plain in ("None", "True", "False") else plain


def coordinate(name: str) -> Any:
    """The symbol of a coordinate: a radius is not negative, the others are real."""
    return sp.Symbol(name, nonnegative=True) if name in _RADII else sp.Symbol(name, real=True)


class Symbolic:
    """A gas in a place in SymPy; every part is None (or empty) where gas or place do not have it.

    A name that is defined by literals and constants alone, or has a value given from outside, stays a symbol
    (positive where its value is); what is built from other names is written out.
    """

    def __init__(self, pair: Pair, lowering: Lowering) -> None:
        self._pair, self._lowering = pair, lowering
        self._symbols: dict[Named, Any] = {}
        self._walk = SympyWalk(self._atom, lowering.literals)
        self._values: dict[str, float] = {}

    @property
    def values(self) -> dict[str, float]:
        """SI values of the symbols in all parts below and in what `of` gave, by their names, coordinates left out."""
        _ = (self.potential, self.walls, self.energy, self.zone, self.rho, self.anchor)
        return dict(self._values)

    @cached_property
    def potential(self) -> Any:
        """V of the coordinates."""
        return self._function(self._own("V"))

    @cached_property
    def coordinates(self) -> tuple[Any, ...]:
        """The symbols of the coordinates of V."""
        return _coordinates(self._own("V"))

    @cached_property
    def walls(self) -> tuple[Any, ...]:
        """Expressions that are positive inside the walls of V."""
        return self._margins(self._own("V"))

    @cached_property
    def energy(self) -> Any:
        """The inline E(p); that of a plugin is its own affair."""
        return self._function(self._pair.gas.energy)

    @cached_property
    def momenta(self) -> tuple[Any, ...]:
        """The symbols of the momenta of the inline E."""
        return _coordinates(self._pair.gas.energy)

    @cached_property
    def zone(self) -> tuple[Any, ...]:
        """Expressions that are positive inside the momentum zone of the inline E."""
        return self._margins(self._pair.gas.energy)

    @cached_property
    def rho(self) -> Any:
        """The density of states as a function of the positive symbol E."""
        return self._function(self._own("rho"), (sp.Symbol("E", positive=True),))

    @cached_property
    def anchor(self) -> tuple[Any, Any] | None:
        """N_c and T of the measured point of a states block."""
        place = self._pair.place
        if place is None or place.anchor is None:
            return None
        parts = (place.anchor.number, place.anchor.temperature)
        number, temperature = (self._walk.expression(part, self._pair.scope, {}) for part in parts)
        return number, temperature

    def of(self, name: str) -> Any:
        """The expression behind a name (`volume`, `exponent`, `E_max`, `m`, ...), None where nobody knows it."""
        named = self._pair.scope.find(name)
        return None if named is None or named.is_function else self._walk.name(named)

    def _own(self, name: str) -> Named | None:
        return self._pair.named(name)

    def _function(self, named: Named | None, arguments: tuple[Any, ...] | None = None) -> Any:
        if named is None:
            return None
        definition, home = read_in(named)
        return self._walk.expression(definition.value, home, _arguments(named, arguments))

    def _margins(self, named: Named | None) -> tuple[Any, ...]:
        if named is None:
            return ()
        definition, home = read_in(named)
        arguments = _arguments(named, None)
        return tuple(self._walk.margin(each, home, arguments) for each in conjuncts(definition.where))

    def _atom(self, named: Named) -> Any:
        """The symbol of a name that stays one, None for a name to be written out."""
        if named is constant_scope().names["pi"]:
            return sp.pi
        if named.definition is not None and not self._lowering.sets(named) and _has_names(named):
            return None
        if named not in self._symbols:
            value = self._lowering.value(named)
            name = self._free_name(named)
            self._symbols[named] = sp.Symbol(name, **{"positive" if value > 0 else "real": True})
            self._values[name] = value
        return self._symbols[named]

    def _free_name(self, named: Named) -> str:
        """Its own name, numbered where a constant, a coordinate or another symbol has it already."""
        name, constants = symbol_name(named.name), constant_scope().names
        if constants.get(named.name) is named:
            return name
        coordinates = {symbol.name for symbol in (*self.coordinates, *self.momenta)}
        taken = {*_TAKEN, *constants, *self._values, *coordinates}
        numbered = (f"{name}_{count}" for count in range(1, len(taken) + 2))
        return name if name not in taken else next(each for each in numbered if each not in taken)


def symbolic_text(text: str, names: Sequence[str] | Mapping[str, Any]) -> Any:
    """An expression such as the energy text of a plugin in SymPy.

    `names` maps the names of the text to SymPy expressions; of a mere list, coordinates become symbols as in a
    file, `m` a positive symbol, all others real ones. Constants are positive symbols of their names. Raises
    TarnError where the text does not read, LookupError where it holds a name that is not known.
    """
    if not isinstance(names, Mapping):
        names = {name: sp.Symbol(name, positive=True) if name == "m" else coordinate(name) for name in names}
    walk = SympyWalk(lambda named: sp.pi if named.name == "pi" else sp.Symbol(named.name, positive=True), {})
    return walk.expression(expression_of(text), constant_scope(), dict(names))


def _coordinates(named: Named | None) -> tuple[Any, ...]:
    return () if named is None else tuple(_arguments(named, None).values())


def _arguments(named: Named, given: tuple[Any, ...] | None) -> dict[str, Any]:
    names = [parameter.name for parameter in read_in(named)[0].parameters or ()]
    return dict(zip(names, given or [coordinate(name) for name in names], strict=True))


def _has_names(named: Named) -> bool:
    """Whether a definition is built from other names than constants."""
    definition, home = read_in(named)
    constants = constant_scope().names.values()
    waiting: list[nodes.Expr | nodes.Condition] = [definition.value]
    while waiting:
        node = waiting.pop()
        name = (
            node if isinstance(node, nodes.Name) else node.function if isinstance(node, nodes.Call) else None
        )
        found = home.find(name.name) if name else None
        if found is not None and found not in constants:
            return True
        waiting.extend(parts(node))
    return False
