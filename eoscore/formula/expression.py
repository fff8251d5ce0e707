"""Formulas: immutable expressions over real numbers and named variables, every subexpression stored once.

Formulas that are built alike are the same object, so an expression that is written (or inlined) a thousand
times costs as much as one. All numbers are SI doubles without units. Every walk is iterative: depth is free.
"""

from __future__ import annotations

import threading
from itertools import count
from typing import TYPE_CHECKING, Self, TypeVar, cast
from weakref import WeakValueDictionary

from eoscore.formula import derivative as rules
from eoscore.formula.simplify import CONDITIONS, simplified
from eoscore.formula.tape import ordered, tape_of

if TYPE_CHECKING:
    from collections.abc import Callable, Mapping, Sequence

    import numpy as np
    from numpy.typing import ArrayLike, NDArray

    Packed = list[tuple[str, tuple[int, ...], float, str]]

__all__ = ["Condition", "Formula", "Node", "condition", "formula", "intern"]

AnyNode = TypeVar("AnyNode", bound="Node")


class Node:
    """A node of the graph: an operation and its arguments, or a leaf with a value or a name."""

    __slots__ = ("__weakref__", "_derivatives", "args", "name", "op", "serial", "value", "variables")
    op: str
    args: tuple[Node, ...]
    value: float
    name: str
    serial: int  # rises from arguments to users: sorting by it is a topological order
    variables: frozenset[str]
    _derivatives: dict[str, Formula]
    is_formula = False

    def __reduce__(self) -> tuple[Callable[[Packed], Node], tuple[Packed]]:
        """A flat list travels between processes: no depth, each subexpression once, the same object at the end."""
        nodes = ordered([self])
        place = {node.serial: i for i, node in enumerate(nodes)}
        rows = [(n.op, tuple(place[arg.serial] for arg in n.args), n.value, n.name) for n in nodes]
        return _unpacked, (rows,)

    def evaluate(self, values: Mapping[str, ArrayLike]) -> NDArray[np.float64]:
        """The value, with the shape of all given values broadcast together; a condition gives 0 or 1.

        Outside the domain of a function the value is nan or inf, without a warning. Raises ValueError if a
        variable has no value.
        """
        return tape_of(self).run(values)[0]

    def substitute(self, replacements: Mapping[str, Formula | float]) -> Self:
        """The same expression with variables replaced by formulas or numbers, all at once."""
        done: dict[int, Node] = {}
        for node in ordered([self]):
            if node.op == "variable" and node.name in replacements:
                done[node.serial] = Formula.of(replacements[node.name])
            elif node.variables.isdisjoint(replacements):
                done[node.serial] = node
            else:
                done[node.serial] = build(node.op, tuple(done[arg.serial] for arg in node.args))
        return cast("Self", done[self.serial])


class Formula(Node):
    """A real-valued expression, built from `constant`, `variable`, operators, `call` and `choose`."""

    __slots__ = ()
    __array_ufunc__ = None  # a NumPy number on the left of an operator leaves the work to the formula
    is_formula = True

    @classmethod
    def of(cls, value: Formula | float) -> Formula:
        """A formula as it is, a number as a constant."""
        if isinstance(value, Formula):
            return value
        return intern(Formula, "constant", value=float(value))

    @classmethod
    def named(cls, name: str) -> Formula:
        """A real variable."""
        return intern(Formula, "variable", name=name)

    def derivative(self, name: str) -> Formula:
        """The exact derivative by a variable, kept for the next time it is asked for."""
        if name not in self._derivatives:
            self._derivatives[name] = rules.derive(self, name)
        return self._derivatives[name]

    def apply(self, function: str, *others: Formula | float) -> Formula:
        """`function(self, *others)` by its name; see `call`."""
        return formula(function, self, *map(Formula.of, others))

    def below(self, other: Formula | float, *, strict: bool = True) -> Condition:
        """The condition self < other, or self <= other."""
        return condition("less" if strict else "less_equal", self, Formula.of(other))

    @property
    def operands(self) -> tuple[Formula, ...]:
        """The arguments that are formulas: all, but for the condition of `choose`."""
        return tuple(arg for arg in self.args if isinstance(arg, Formula))

    @property
    def condition(self) -> Condition:
        """The condition of a `choose`. Raises ValueError for any other operation."""
        if not self.args or not isinstance(self.args[0], Condition):
            message = f"{self.op} has no condition"
            raise ValueError(message)
        return self.args[0]

    def __add__(self, other: Formula | float) -> Formula:
        return formula("add", self, Formula.of(other))

    def __radd__(self, other: float) -> Formula:
        return formula("add", self, Formula.of(other))

    def __sub__(self, other: Formula | float) -> Formula:
        return formula("sub", self, Formula.of(other))

    def __rsub__(self, other: float) -> Formula:
        return formula("sub", Formula.of(other), self)

    def __mul__(self, other: Formula | float) -> Formula:
        return formula("mul", self, Formula.of(other))

    def __rmul__(self, other: float) -> Formula:
        return formula("mul", self, Formula.of(other))

    def __truediv__(self, other: Formula | float) -> Formula:
        return formula("div", self, Formula.of(other))

    def __rtruediv__(self, other: float) -> Formula:
        return formula("div", Formula.of(other), self)

    def __pow__(self, other: Formula | float) -> Formula:
        return formula("pow", self, Formula.of(other))

    def __rpow__(self, other: float) -> Formula:
        return formula("pow", Formula.of(other), self)

    def __neg__(self) -> Formula:
        return formula("neg", self)

    def __repr__(self) -> str:
        shown = {"constant": repr(self.value), "variable": self.name}.get(self.op, f"{self.op}(...)")
        return f"<Formula {shown} of {', '.join(sorted(self.variables)) or 'nothing'}>"


class Condition(Node):
    """A comparison of formulas, or several joined by `both` and `either`."""

    __slots__ = ()

    def choose(self, a: Formula, b: Formula) -> Formula:
        """The formula a where the condition holds, b elsewhere."""
        return formula("choose", self, a, b)

    def __repr__(self) -> str:
        return f"<Condition {self.op} of {', '.join(sorted(self.variables)) or 'nothing'}>"


_nodes: WeakValueDictionary[tuple[object, ...], Node] = WeakValueDictionary()
_serials = count()
_lock = threading.Lock()


def intern(
    kind: type[AnyNode], op: str, args: tuple[Node, ...] = (), *, value: float = 0.0, name: str = ""
) -> AnyNode:
    """The one node of this operation and arguments (or value, or name), made if it is new."""
    identity = (op, *map(id, args)) if args else (op, repr(value), name)
    with _lock:
        known = _nodes.get(identity)
        if known is None:
            node = kind()
            node.op, node.args, node.value, node.name = op, args, value, name
            node.serial, node._derivatives = next(_serials), {}
            node.variables = _union(args) if args else frozenset({name} - {""})
            _nodes[identity] = known = node
    return cast("AnyNode", known)


def _unpacked(rows: Packed) -> Node:
    """The last of nodes that are given by their operation, the places of their arguments, value and name."""
    nodes: list[Node] = []
    for op, args, value, name in rows:
        kind = Condition if op in CONDITIONS else Formula
        nodes.append(intern(kind, op, tuple(nodes[i] for i in args), value=value, name=name))
    return nodes[-1]


def _union(args: Sequence[Node]) -> frozenset[str]:
    """The variables below, sharing one set wherever an argument already has them all."""
    widest = max((arg.variables for arg in args), key=len)
    return (
        widest
        if all(arg.variables <= widest for arg in args)
        else widest.union(*(arg.variables for arg in args))
    )


def build(op: str, args: tuple[Node, ...]) -> Node:
    """The node of an operation: simplified where a rule of `simplify` fits, else interned as it is."""
    result = simplified(op, args)
    if result is None:
        return intern(Condition if op in CONDITIONS else Formula, op, args)
    if isinstance(result, bool):
        return intern(Condition, "truth", value=float(result))
    return Formula.of(result) if isinstance(result, float) else result


def formula(op: str, *args: Node) -> Formula:
    """The formula of an operation."""
    return cast("Formula", build(op, args))


def condition(op: str, *args: Node) -> Condition:
    """The condition of a comparison, or of two conditions joined."""
    return cast("Condition", build(op, args))
