"""The frozen nodes of a parsed Tarn file. Equality ignores where a node stands, so a re-read print is equal."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import TYPE_CHECKING, Literal

if TYPE_CHECKING:
    from eoscore.source import Span


@dataclass(frozen=True, kw_only=True)
class Node:
    """Anything that was written, with its place in the text."""

    span: Span = field(compare=False, repr=False)


@dataclass(frozen=True)
class Ident(Node):
    """A name where it is declared, asked for or pointed at."""

    name: str


# Expressions -----------------------------------------------------------------------------------------------


@dataclass(frozen=True)
class UnitText(Node):
    """A unit as written: `J.m2/W` is (("J", 1), ("m", 2), ("W", -1)), prefixes still inside the symbols."""

    factors: tuple[tuple[str, int], ...]


@dataclass(frozen=True)
class Number(Node):
    """A literal: its digits as written without the uncertainty, the bracketed digits, the unit.

    `value` is in the written unit; `sigma` is one standard deviation in the same unit, None without brackets.
    """

    text: str
    value: float
    sigma: float | None
    unit: UnitText | None


@dataclass(frozen=True)
class Name(Node):
    """A name used in an expression."""

    name: str


@dataclass(frozen=True)
class Call(Node):
    """A function at its arguments; `if(condition, a, b)` is an `If`."""

    function: Ident
    arguments: tuple[Expr, ...]


@dataclass(frozen=True)
class Negative(Node):
    """Unary minus."""

    operand: Expr


@dataclass(frozen=True)
class Binary(Node):
    """`left operator right`."""

    operator: Literal["+", "-", "*", "/", "^"]
    left: Expr
    right: Expr


@dataclass(frozen=True)
class If(Node):
    """`if(condition, then, otherwise)`."""

    condition: Condition
    then: Expr
    otherwise: Expr


@dataclass(frozen=True)
class Compare(Node):
    """`left operator right` with an order relation."""

    operator: Literal["<", "<=", ">", ">="]
    left: Expr
    right: Expr


@dataclass(frozen=True)
class Logic(Node):
    """`and`, `or` of two conditions, `not` of one."""

    operator: Literal["and", "or", "not"]
    operands: tuple[Condition, ...]


Expr = Number | Name | Call | Negative | Binary | If
Condition = Compare | Logic


# Declarations ----------------------------------------------------------------------------------------------


@dataclass(frozen=True)
class Definition(Node):
    """`name = value` (parameters None) or `name(parameters) = value [where ...]`."""

    name: Ident
    parameters: tuple[Ident, ...] | None
    value: Expr
    where: tuple[Condition, ...] = ()


@dataclass(frozen=True)
class Isotope(Node):
    """`isotope Sr-84`."""

    symbol: str
    mass_number: int


@dataclass(frozen=True)
class Statistics(Node):
    """`statistics bose`, `fermi` or `classical`; the word is checked later."""

    kind: Ident


@dataclass(frozen=True)
class Treatment(Node):
    """`treatment hartree_fock`: how interactions enter; the word is checked later."""

    kind: Ident


@dataclass(frozen=True)
class DispersionChoice(Node):
    """`dispersion NAME { parameter = value ... }`."""

    name: Ident
    parameters: tuple[Definition, ...]


@dataclass(frozen=True)
class Levels(Node):
    """`levels exact`: how the states of a trap are counted; the word is checked later."""

    kind: Ident


@dataclass(frozen=True)
class Anchor(Node):
    """`anchor N_c = ... at T = ...` in a states block."""

    number: Expr
    temperature: Expr


@dataclass(frozen=True)
class Gas(Node):
    """A gas block; `m`, `degeneracy`, `a_s` and `E(...)` are definitions among its entries."""

    name: Ident
    entries: tuple[Definition | Isotope | Statistics | Treatment | DispersionChoice, ...]


@dataclass(frozen=True)
class Trap(Node):
    """A trap block; `V(...)`, `volume` and `E_max` are definitions among its entries."""

    name: Ident
    entries: tuple[Definition | Levels, ...]


@dataclass(frozen=True)
class States(Node):
    """A states block; `rho(E)` and `exponent` are definitions among its entries."""

    name: Ident
    entries: tuple[Definition | Anchor, ...]


@dataclass(frozen=True)
class Use(Node):
    """`use "path.tarn"` (is_path) or `use NAME`."""

    target: str
    is_path: bool


# Questions -------------------------------------------------------------------------------------------------


@dataclass(frozen=True)
class Range(Node):
    """`even(start, stop, points)` or `geometric(start, stop, points)`."""

    kind: Literal["even", "geometric"]
    start: Expr
    stop: Expr
    points: Expr


@dataclass(frozen=True)
class Listing(Node):
    """`[v1, v2, ...]`."""

    values: tuple[Expr, ...]


@dataclass(frozen=True)
class Axis(Node):
    """`NAME = SPAN` after `over`."""

    name: Ident
    values: Range | Listing


@dataclass(frozen=True)
class Find(Node):
    """`find QUANTITIES for GAS [in PLACE] [from PLACE]* [with ...] [over ...]`.

    `origins` holds the `from` places in the order written.
    """

    quantities: tuple[Ident, ...]
    gas: Ident
    place: Ident | None
    origins: tuple[Ident, ...]
    conditions: tuple[Definition, ...]
    over: tuple[Axis, ...]


@dataclass(frozen=True)
class Derive(Node):
    """`derive QUANTITIES for GAS [in PLACE] [with ...]`."""

    quantities: tuple[Ident, ...]
    gas: Ident
    place: Ident | None
    conditions: tuple[Definition, ...]


Question = Find | Derive
Entry = Definition | Gas | Trap | States | Use | Find | Derive


@dataclass(frozen=True)
class File(Node):
    """A whole text, entries in the order written."""

    entries: tuple[Entry, ...]
