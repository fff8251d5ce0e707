"""Exact derivatives: one rule for each function, one iterative walk over the shared nodes."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, cast

from eoscore.formula.tape import ordered

if TYPE_CHECKING:
    from collections.abc import Callable

    from eoscore.formula.expression import Formula

__all__ = ["derive"]

# f'(x) of the functions of one variable, from the node f itself and its argument x (DLMF 4.7, 4.20, 7.2).
_ONE: dict[str, Callable[[Formula, Formula], Formula]] = {
    "neg": lambda _, x: 0 * x - 1,
    "sqrt": lambda f, _: 0.5 / f,
    "exp": lambda f, _: f,
    "ln": lambda _, x: 1 / x,
    "log10": lambda _, x: 1 / (math.log(10) * x),
    "sin": lambda _, x: x.apply("cos"),
    "cos": lambda _, x: -x.apply("sin"),
    "tan": lambda f, _: 1 + f**2,
    "asin": lambda _, x: (1 - x**2) ** -0.5,
    "acos": lambda _, x: -((1 - x**2) ** -0.5),
    "atan": lambda _, x: 1 / (1 + x**2),
    "sinh": lambda _, x: x.apply("cosh"),
    "cosh": lambda _, x: x.apply("sinh"),
    "tanh": lambda _, x: x.apply("cosh") ** -2,
    "abs": lambda _, x: x.apply("sign"),
    "erf": lambda _, x: 2 / math.sqrt(math.pi) * (-(x**2)).apply("exp"),
    "ellipk": lambda _, m: (0 * m + 1).apply("ellipk_n", m),
    "ellipe": lambda _, m: (0 * m + 1).apply("ellipe_n", m),
}

# df/dx of the functions with an order, f(order, x) (DLMF 10.6.1).
_ORDERED: dict[str, Callable[[Formula, Formula], Formula]] = {
    "besselj": lambda n, x: ((n - 1).apply("besselj", x) - (n + 1).apply("besselj", x)) / 2,
    "ellipk_n": lambda n, m: (n + 1).apply("ellipk_n", m),
    "ellipe_n": lambda n, m: (n + 1).apply("ellipe_n", m),
}


def derive(root: Formula, name: str) -> Formula:
    """The derivative of a formula by the variable of that name.

    At the kinks of abs, sign, min, max and choose the derivative is that of one side. Raises ValueError for a
    Bessel function whose order depends on the variable.
    """
    zero = 0 * root
    known: dict[int, Formula] = {}
    for node in ordered([root]):
        if name not in node.variables:
            known[node.serial] = zero
        elif node.is_formula:
            known[node.serial] = _rule(cast("Formula", node), name, known, zero)
    return known[root.serial]


def _rule(f: Formula, name: str, known: dict[int, Formula], zero: Formula) -> Formula:
    if f.op == "variable":
        return zero + 1
    if f.op == "choose":
        _, a, b = f.args
        return f.condition.choose(known[a.serial], known[b.serial])
    inner = [known[arg.serial] for arg in f.args]
    if f.op in _ONE:
        return _ONE[f.op](f, f.operands[0]) * inner[0]
    if f.op == "sign":
        return zero
    return _two(f, name, *f.operands, *inner)


def _two(f: Formula, name: str, a: Formula, b: Formula, da: Formula, db: Formula) -> Formula:
    """The rules of the operations on two arguments."""
    match f.op:
        case "add":
            return da + db
        case "sub":
            return da - db
        case "mul":
            return da * b + a * db
        case "div":
            return da / b - f * db / b
        case "pow" if name not in b.variables:
            return b * a ** (b - 1) * da
        case "pow":
            return f * (db * a.apply("ln") + b * da / a)
        case "min":
            return a.below(b).choose(da, db)
        case "max":
            return b.below(a).choose(da, db)
        case "atan2":
            return (b * da - a * db) / (a**2 + b**2)
    if name in a.variables:
        message = f"the order of {f.op} depends on {name}: its derivative by the order is not known"
        raise ValueError(message)
    return _ORDERED[f.op](a, b) * db
