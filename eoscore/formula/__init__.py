"""Formulas of real variables: shared graphs, fast evaluation, exact derivatives, structure, intervals."""

from __future__ import annotations

from typing import TYPE_CHECKING

from eoscore.formula.expression import Condition, Formula, condition, formula, intern
from eoscore.formula.numeric import ARITY
from eoscore.formula.tape import tape_of

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    import numpy as np
    from numpy.typing import ArrayLike, NDArray

__all__ = [
    "Condition", "Formula", "both", "call", "choose", "constant", "either", "evaluate_many", "gradient",
    "hessian", "less", "margin", "negate", "variable",
]  # fmt: skip


def constant(value: float) -> Formula:
    """A number."""
    return Formula.of(value)


def variable(name: str) -> Formula:
    """A real variable."""
    return Formula.named(name)


def call(name: str, *args: Formula | float) -> Formula:
    """A function at its arguments.

    sqrt exp ln log10 sin cos tan asin acos atan atan2(y, x) sinh cosh tanh abs sign min max erf ellipk(m)
    ellipe(m) besselj(order, x); the elliptic integrals take the parameter m = k^2 (DLMF 19.2.8). `min` and
    `max` take two or more. Raises ValueError for another name or number of arguments.
    """
    wanted = ARITY.get(name)
    if wanted is None:
        message = f"unknown function {name!r}; known are {', '.join(sorted(ARITY))}"
        raise ValueError(message)
    formulas = [Formula.of(arg) for arg in args]
    if name in ("min", "max"):
        while len(formulas) > 2:
            formulas[:2] = [formulas[0].apply(name, formulas[1])]
    if len(formulas) != wanted:
        message = f"{name} takes {wanted} argument{'s' * (wanted > 1)}, not {len(args)}"
        raise ValueError(message)
    return formulas[0].apply(name, *formulas[1:])


def less(a: Formula | float, b: Formula | float, *, strict: bool = True) -> Condition:
    """The condition a < b, or a <= b if not strict."""
    return Formula.of(a).below(b, strict=strict)


def both(a: Condition, b: Condition) -> Condition:
    """The condition that both hold."""
    return condition("both", a, b)


def either(a: Condition, b: Condition) -> Condition:
    """The condition that at least one holds."""
    return condition("either", a, b)


def negate(a: Condition) -> Condition:
    """The condition that this one does not hold."""
    done: dict[int, Condition] = {}
    for node in _conditions(a):
        if node.op == "truth":
            done[node.serial] = intern(Condition, "truth", value=1 - node.value)
        elif node.op in ("less", "less_equal"):
            done[node.serial] = condition("less_equal" if node.op == "less" else "less", *node.args[::-1])
        else:
            inner = [done[arg.serial] for arg in node.args]
            done[node.serial] = condition("either" if node.op == "both" else "both", *inner)
    return done[a.serial]


def choose(where: Condition, a: Formula | float, b: Formula | float) -> Formula:
    """The formula a where the condition holds, b elsewhere."""
    return where.choose(Formula.of(a), Formula.of(b))


def margin(a: Condition) -> Formula:
    """A formula that is positive inside the condition, negative outside, zero on its edge."""
    done: dict[int, Formula] = {}
    for node in _conditions(a):
        if node.op == "truth":
            done[node.serial] = constant(1.0 if node.value else -1.0)
        elif node.op in ("less", "less_equal"):
            done[node.serial] = formula("sub", *node.args[::-1])
        else:
            inner = [done[arg.serial] for arg in node.args]
            done[node.serial] = formula("min" if node.op == "both" else "max", *inner)
    return done[a.serial]


def evaluate_many(formulas: Sequence[Formula], values: Mapping[str, ArrayLike]) -> list[NDArray[np.float64]]:
    """Several formulas at once, what they share computed once; see `Formula.evaluate`."""
    return tape_of(*formulas).run(values)


def gradient(f: Formula, names: Sequence[str]) -> tuple[Formula, ...]:
    """The exact first derivatives by these variables."""
    return tuple(f.derivative(name) for name in names)


def hessian(f: Formula, names: Sequence[str]) -> tuple[tuple[Formula, ...], ...]:
    """The exact second derivatives by these variables, symmetric node for node."""
    first = gradient(f, names)
    upper = [
        [first[min(i, j)].derivative(names[max(i, j)]) for j in range(len(names))] for i in range(len(names))
    ]
    return tuple(map(tuple, upper))


def _conditions(a: Condition) -> list[Condition]:
    """All conditions below, inner ones first; conditions inside formulas are left alone."""
    found: dict[int, Condition] = {}
    waiting = [a]
    while waiting:
        node = waiting.pop()
        if node.serial not in found:
            found[node.serial] = node
            waiting.extend(arg for arg in node.args if isinstance(arg, Condition))
    return [found[serial] for serial in sorted(found)]
