"""Presentation MathML of a formula as it was gathered: SymPy's own printer would expand its powers again."""

from __future__ import annotations

import re
from html.entities import html5
from typing import TYPE_CHECKING, Any

import sympy as sp
from sympy.printing.mathml import MathMLPresentationPrinter
from sympy.printing.precedence import PRECEDENCE

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence

__all__ = ["presentation"]

_TIMES = "\N{INVISIBLE TIMES}"
# Names that are written by a letter of their own.
_LETTERS = {"hbar": "&#x210F;", "DeltaC": "&#x394;C"}


def presentation(expression: sp.Expr) -> str:
    """What stands in the `math` element; well-formed XML, so that letters have no names."""
    text: str = _Printer().doprint(expression)
    for name, letter in _LETTERS.items():
        text = text.replace(f"<mi>{name}</mi>", f"<mi>{letter}</mi>")
    return re.sub(r"&(?!lt;|gt;|amp;)(\w+;)", lambda found: html5[found[1]], text)


class _Printer(MathMLPresentationPrinter):  # type: ignore[misc] # SymPy is not typed
    """Products as one fraction, whose parts stay as they are."""

    def _print_Mul(self, expr: sp.Expr) -> Any:
        """A minus sign, and the factors above and below the bar."""
        coefficient, factors = _factors(expr)
        above = [f for f in factors if not _is_below(f)]
        below = [sp.Pow(f.base, -f.exp, evaluate=f.exp == -1) for f in factors if _is_below(f)]
        numbers = [sp.Integer(abs(part)) for part in (coefficient.p, coefficient.q)]
        row = self.dom.createElement("mrow")
        if coefficient.p < 0:
            row.appendChild(self._operator("\N{MINUS SIGN}"))
        above, below = ([n] * (n != 1) + f for n, f in zip(numbers, (above, below), strict=True))
        if below:
            fraction = self.dom.createElement("mfrac")
            fraction.appendChild(self._product(above or [sp.Integer(1)]))
            fraction.appendChild(self._product(below))
            row.appendChild(fraction)
        else:
            row.appendChild(self._product(above or [sp.Integer(1)]))
        return row

    def _product(self, factors: Sequence[sp.Expr]) -> Any:
        if len(factors) == 1:
            return self._print(factors[0])
        row = self.dom.createElement("mrow")
        for place, factor in enumerate(factors):
            if place:
                row.appendChild(self._operator(_TIMES))
            row.appendChild(self.parenthesize(factor, PRECEDENCE["Mul"]))
        return row

    def _operator(self, sign: str) -> Any:
        operator = self.dom.createElement("mo")
        operator.appendChild(self.dom.createTextNode(sign))
        return operator


def _factors(expression: sp.Expr) -> tuple[sp.Rational, list[sp.Expr]]:
    """The rational coefficient and the other factors, nested products taken apart, sums and functions last."""
    rest: list[sp.Expr] = []
    coefficient = sp.Integer(1)
    for factor in _flat(expression):
        if factor.is_Rational:
            coefficient *= factor
        elif factor.is_Float and factor < 0:
            coefficient, rest = -coefficient, [*rest, -factor]
        else:
            rest.append(factor)
    return coefficient, sorted(sp.Mul._from_args(rest).as_ordered_factors(), key=_rank)


def _flat(expression: sp.Expr) -> Iterator[sp.Expr]:
    for factor in expression.args:
        yield from _flat(factor) if factor.is_Mul else (factor,)


def _rank(factor: sp.Expr) -> int:
    """Numbers such as pi and roots of them, then symbols, then functions and sums."""
    base = factor.base if factor.is_Pow else factor
    if base.is_number and not base.is_Function:
        return 0
    return 2 if base.is_Function or base.is_Add or isinstance(base, sp.Sum) else 1


def _is_below(factor: sp.Expr) -> bool:
    return bool(factor.is_Pow and factor.base != sp.E and factor.exp.could_extract_minus_sign())
