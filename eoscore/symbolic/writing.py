"""Formulas as a physicist writes them, in every form that an answer carries."""

from __future__ import annotations

import re
from typing import Any

import sympy as sp

__all__ = ["forms", "tidy"]


def tidy(expression: sp.Expr) -> sp.Expr:
    """Powers of products gathered, common factors out: the shortest of a few equal writings."""
    if expression.has(sp.Sum):
        return expression
    candidates = [expression, sp.powsimp(sp.powdenest(expression)), sp.factor_terms(sp.powsimp(expression))]
    candidates.append(sp.powdenest(sp.powsimp(sp.simplify(expression)), force=False))
    return min(candidates, key=lambda e: (sp.count_ops(e), len(str(e))))


def forms(name: str, expression: sp.Expr) -> dict[str, Any]:
    """SymPy text, LaTeX, plain text and presentation MathML of `name = expression`."""
    left = sp.Symbol(name)
    equation = sp.Eq(left, expression, evaluate=False)
    return {
        "sympy": sp.sstr(expression, full_prec=True),
        "latex": sp.latex(equation),
        "text": f"{name} = {plain(expression)}",
        "mathml": sp.mathml(equation, printer="presentation").replace("<mi>hbar</mi>", "<mi>&#x210F;</mi>"),
    }


def plain(expression: sp.Expr) -> str:
    """One line in the file's own notation: `^` for powers."""
    return re.sub(r"\*\*", "^", sp.sstr(expression))
