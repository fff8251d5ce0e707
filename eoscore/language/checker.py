"""The dimension of every expression, and its value where it is constant; what does not fit becomes a fault."""

from __future__ import annotations

from typing import TYPE_CHECKING, NamedTuple, TypeVar

from eoscore.language import nodes
from eoscore.language.builtin import BUILTINS
from eoscore.language.faults import Fault
from eoscore.language.kind import UNKNOWN, Kind
from eoscore.language.missing import faulty_call, unknown_function, unknown_name
from eoscore.language.rules import binary, builtin_call, choice, comparison, counted, negative, number, short
from eoscore.language.walk import Step, every, run

if TYPE_CHECKING:
    from collections.abc import Callable, Mapping, Sequence

    from eoscore.language.faults import Faults
    from eoscore.language.scope import Named, Scope
    from eoscore.source import Span

__all__ = ["Checker"]

Result = TypeVar("Result")
_MOST_STEPS = 100_000  # for one name or expression; functions are worked through once per kind of call
_STEPS_OF_ALL = 500_000  # for a whole text: some seconds
_LISTS = 100


class _ExpansionError(Exception):
    """Functions that call functions expand into more steps than any trap needs."""


class _Frame(NamedTuple):
    """Where an expression is read: its scope, the arguments of the function around it, where faults go."""

    scope: Scope
    arguments: Mapping[str, Kind]
    sink: Callable[[Fault], None]

    def unless(self, dead: bool) -> _Frame:
        """The same frame; for a branch that is never taken, without its faults of value."""
        return (
            self._replace(sink=lambda fault: None if fault.is_value else self.sink(fault)) if dead else self
        )


class _Applied(NamedTuple):
    """What a function gives at arguments of some kinds, and the faults in its body that are theirs alone."""

    kind: Kind
    faults: tuple[Fault, ...] = ()


class Checker:
    """Checks expressions in their scopes; every name is checked once, every function once per kind of call.

    `uncertain` collects the literals with an uncertainty by the identity of their nodes, `used` the definitions
    that something refers to, `massless` the blocks that miss a mass.
    """

    def __init__(self, faults: Faults) -> None:
        self.faults = faults
        self.uncertain: dict[int, nodes.Number] = {}
        self.used: set[int] = set()
        self.massless: set[str] = set()
        self._names: dict[Named, Kind] = {}
        self._numbers: dict[int, Kind] = {}
        self._calls: dict[tuple[Named, tuple[Kind, ...]], _Applied] = {}
        self._open: dict[Named, None] = {}
        self._steps = self._all_steps = 0

    # Asked from outside ------------------------------------------------------------------------------------

    def kind(self, expr: nodes.Expr, scope: Scope) -> Kind:
        """The kind of an expression in a scope."""
        return self._guarded(
            expr.span, self._expression(expr, _Frame(scope, {}, self.faults.append)), UNKNOWN
        )

    def named(self, named: Named) -> Kind:
        """The kind of the value behind a name that is not a function."""
        if named.definition is None:
            return named.given or UNKNOWN
        return self._guarded(named.definition.name.span, self._name(named), UNKNOWN)

    def function(self, named: Named, arguments: Sequence[Kind]) -> Kind:
        """The kind of a function at arguments of known kinds; faults are told where they stand in its body."""
        if named.definition is None:
            return UNKNOWN
        step = self._applied(named, tuple(arguments), called=False)
        applied = self._guarded(named.definition.name.span, step, _Applied(UNKNOWN))
        for fault in applied.faults:
            self.faults.append(fault)
        return applied.kind

    def body(self, named: Named) -> None:
        """Looks for faults in a function's body that no argument could mend."""
        if named.definition is not None:
            self.function(named, [UNKNOWN] * len(named.definition.parameters or ()))
            self.without_walls(named.definition)

    def without_walls(self, definition: nodes.Definition) -> None:
        """A fault for walls of anything but the energy of a place or a particle."""
        if definition.where:
            span = definition.where[0].span.to(definition.where[-1].span)
            hint = f"take it out, or write {definition.name.name} with if(condition, a, b)"
            self.faults.add(span, "`where` bounds V in a trap and E in a gas only", hint)

    @property
    def _brief(self) -> bool:
        """Whether so much is at fault already that lists of near names would only cost time."""
        return len(self.faults) > _LISTS

    def _guarded(self, span: Span, step: Step[Result], otherwise: Result) -> Result:
        self._all_steps += self._steps
        self._steps = 0
        if self._all_steps > _STEPS_OF_ALL:
            self.faults.add(
                span, "checking this text takes more steps than can be worked through", "split it"
            )
            self.faults.raise_if_any()
        try:
            return run(step)
        except _ExpansionError:
            self._open.clear()
            self.faults.add(
                span,
                f"`{short(span)}` expands into more than {_MOST_STEPS:,} steps",
                "give repeated parts a name of their own, or nest fewer functions",
            )
            return otherwise

    # Steps of the walk -------------------------------------------------------------------------------------

    def _expression(self, node: nodes.Expr, frame: _Frame) -> Step[Kind]:
        self._steps += 1
        if self._steps > _MOST_STEPS:
            raise _ExpansionError
        match node:
            case nodes.Number():
                return self._number(node, frame)
            case nodes.Name():
                return (yield from self._value(node, frame))
            case nodes.Negative():
                return negative((yield self._expression(node.operand, frame)))
            case nodes.Binary():
                left = self._leaf(node.left, frame) or (yield self._expression(node.left, frame))
                right = self._leaf(node.right, frame) or (yield self._expression(node.right, frame))
                return binary(node, left, right, frame.sink)
            case nodes.If():
                holds = yield self._condition(node.condition, frame)
                then = yield self._expression(node.then, frame.unless(holds is False))
                otherwise = yield self._expression(node.otherwise, frame.unless(holds is True))
                return choice(node, holds, then, otherwise, frame.sink)
            case nodes.Call():
                return (yield from self._call(node, frame))

    def _leaf(self, node: nodes.Expr, frame: _Frame) -> Kind | None:
        """The kind of a number or of a name that is known already; most operands are such, and need no step."""
        if isinstance(node, nodes.Number):
            return self._number(node, frame)
        if not isinstance(node, nodes.Name):
            return None
        if node.name in frame.arguments:
            return frame.arguments[node.name]
        named = frame.scope.find(node.name)
        if named is None or named not in self._names:
            return None
        self.used.add(id(named.definition))
        return self._names[named]

    def _number(self, node: nodes.Number, frame: _Frame) -> Kind:
        known = self._numbers.get(id(node))
        if known is None:
            known = number(node, frame.sink)
            if node.sigma:
                self.uncertain[id(node)] = node
            if known.value is not None:
                self._numbers[id(node)] = known
        return known

    def _condition(self, node: nodes.Condition, frame: _Frame) -> Step[bool | None]:
        if isinstance(node, nodes.Compare):
            left = yield self._expression(node.left, frame)
            return comparison(node, left, (yield self._expression(node.right, frame)), frame.sink)
        parts = yield from every(self._condition(operand, frame) for operand in node.operands)
        if None in parts:
            return None
        return {"and": all(parts), "or": any(parts), "not": not parts[0]}[node.operator]

    def _value(self, node: nodes.Name, frame: _Frame) -> Step[Kind]:
        if node.name in frame.arguments:
            return frame.arguments[node.name]
        named = frame.scope.find(node.name)
        if named is None:
            self._missed(node, frame)
            return UNKNOWN
        if named.is_function:
            call = f"{node.name}({', '.join(_parameters(named))})"
            frame.sink(Fault(node.span, f"`{node.name}` is a function and wants arguments", f"write {call}"))
            return UNKNOWN
        self.used.add(id(named.definition))
        return (yield from self._name(named))

    def _missed(self, node: nodes.Name, frame: _Frame) -> None:
        """A name that nobody knows; a missing mass is told once, however often a block uses it."""
        block = next((scope.title for scope in frame.scope.chain() if scope.is_block), None)
        if node.name != "m" or block not in self.massless:
            frame.sink(unknown_name(node, frame.scope, frame.arguments, block, brief=self._brief))
        if node.name == "m" and block is not None:
            self.massless.add(block)

    def _name(self, named: Named) -> Step[Kind]:
        if named.given is not None or named.definition is None or named.home is None:
            return named.given or UNKNOWN
        if named not in self._names:
            if named in self._open:
                self._cycle(named)
                return UNKNOWN
            self._open[named] = None
            frame = _Frame(named.home, {}, self.faults.append)
            self._names[named] = yield self._expression(named.definition.value, frame)
            self._open.pop(named, None)
        return self._names[named]

    def _call(self, node: nodes.Call, frame: _Frame) -> Step[Kind]:
        given = yield from every(self._expression(argument, frame) for argument in node.arguments)
        name = node.function.name
        named = frame.scope.find(name)
        if named is not None and named.is_function and named.definition is not None:
            wanted = _parameters(named)
            if len(wanted) != len(given):
                message = f"`{name}` takes {counted(len(wanted))}, not {len(given)}"
                frame.sink(Fault(node.span, message, f"write {name}({', '.join(wanted)})"))
                return UNKNOWN
            self.used.add(id(named.definition))
            applied: _Applied = yield self._applied(named, tuple(given), called=True)
            if applied.faults:
                frame.sink(faulty_call(node, given, wanted, applied.faults[0]))
            return applied.kind
        if name in BUILTINS:
            return builtin_call(node, given, frame.sink)
        is_number = named is not None or name in frame.arguments
        frame.sink(unknown_function(node, frame.scope, is_number=is_number, brief=self._brief))
        return UNKNOWN

    def _applied(self, named: Named, arguments: tuple[Kind, ...], *, called: bool) -> Step[_Applied]:
        """A function at arguments; of a call, only the faults that other arguments would not have."""
        key = (named, arguments)
        if key in self._calls:
            return self._calls[key]
        if named in self._open:
            self._cycle(named)
            return _Applied(UNKNOWN)
        definition, home = named.definition, named.home
        if definition is None or home is None:
            return _Applied(UNKNOWN)
        base: _Applied = _Applied(UNKNOWN)
        if called:
            unknown = (UNKNOWN,) * len(arguments)
            base = yield self._applied(named, unknown, called=False)
        self._open[named] = None
        found: list[Fault] = []
        frame = _Frame(home, dict(zip(_parameters(named), arguments, strict=True)), found.append)
        kind = yield self._expression(definition.value, frame)
        for condition in definition.where:
            yield self._condition(condition, frame)
        self._open.pop(named, None)
        own = {fault.span.start for fault in base.faults}
        self._calls[key] = _Applied(kind, tuple(fault for fault in found if fault.span.start not in own))
        return self._calls[key]

    def _cycle(self, named: Named) -> None:
        """A name that needs itself, told once where the circle is entered."""
        ring = list(self._open)
        ring = ring[ring.index(named) :]
        first = min(ring, key=lambda member: member.definition.name.span.start if member.definition else 0)
        if first.definition is None:
            return
        turned = ring[ring.index(first) :] + ring[: ring.index(first)]
        names = [member.name for member in turned]
        shown = [*names[:5], "..."] if len(names) > 5 else names
        way = " needs ".join(f"`{name}`" for name in [*shown, first.name])
        message = "recursion is not part of Tarn" if first.is_function else "a name cannot need itself"
        self.faults.add(
            first.definition.name.span, f"{message}: {way}", "break the circle with a value of its own"
        )


def _parameters(named: Named) -> tuple[str, ...]:
    definition = named.definition
    return tuple(parameter.name for parameter in (definition.parameters if definition else None) or ())
