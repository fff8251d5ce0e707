"""Formulas as a physicist writes them, in every form that an answer carries."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import sympy as sp
from sympy.printing.str import StrPrinter

from eoscore.symbolic.presentation import presentation
from eoscore.symbolic.scaled import written_out

if TYPE_CHECKING:
    from collections.abc import Collection, Iterable

__all__ = ["forms", "gathered", "missing_words", "plain", "root_forms", "tidy", "where", "written_name"]

# Words of SymPy that a formula may hold, or that its reader puts in: no symbol of a file may shadow them.
_WORDS = frozenset(
    """
    Abs Max Min acos asin atan atan2 besseli besselj besselk cos cosh elliptic_e elliptic_k erf erfc exp gamma log
    lowergamma polylog sign sin sinh sqrt tan tanh uppergamma zeta
    Float Function Integer Integral Rational Sum Symbol oo pi
    """.split()  # noqa: SIM905 - a table of words reads better than 37 quoted ones
)


def written_name(name: str) -> str:
    """The name under which a symbol is written: one that SymPy would take for its own word gets a trailing `_`."""
    return f"{name}_" if name in _WORDS else name


def _renamed(expression: sp.Expr) -> sp.Expr:
    """Symbols under their written names, and sums over an index that is no symbol of the file."""
    free = expression.free_symbols
    names = {symbol: sp.Symbol(written_name(symbol.name), **symbol.assumptions0) for symbol in free}
    names = {old: new for old, new in names.items() if old.name != new.name}
    taken = {symbol.name for symbol in free}
    for index in {limit[0] for total in expression.atoms(sp.Sum) for limit in total.limits}:
        if index.name in taken:
            names[index] = sp.Symbol(f"{index.name}_", integer=True, positive=True)
    return expression.xreplace(names) if names else expression


def tidy(expression: sp.Expr) -> sp.Expr:
    """Powers of products gathered, common factors out: the shortest of a few equal writings."""
    if expression.has(sp.Sum):
        return expression
    merged = sp.powsimp(sp.powdenest(expression))
    candidates = [expression, merged, sp.factor_terms(merged)]
    if expression.has(sp.Add) and all(power.exp.is_number for power in expression.atoms(sp.Pow)):
        candidates += [sp.powsimp(sp.together(each)) for each in candidates[1:]]
    return min(candidates, key=lambda e: (sp.count_ops(e), len(str(e))))


def gathered(expression: sp.Expr) -> sp.Expr:
    """Equal powers of positive factors as the power of a product: N^(1/3)/zeta(3)^(1/3) as (N/zeta(3))^(1/3)."""
    if not expression.args or isinstance(expression, sp.Sum):
        return expression
    if not isinstance(expression, sp.Mul):
        parts = [gathered(part) for part in expression.args]
        if all(new is old for new, old in zip(parts, expression.args, strict=True)):
            return expression
        return expression.func(*parts, evaluate=False)
    alone: list[sp.Expr] = []
    powers: dict[sp.Expr, list[sp.Expr]] = {}
    for factor in expression.args:
        base, exponent = factor.as_base_exp()
        if exponent in (1, -1) or base == sp.E or not _positive(base):
            alone.append(gathered(factor))
            continue
        turned = exponent.could_extract_minus_sign()
        powers.setdefault(-exponent if turned else exponent, []).append(1 / base if turned else base)
    written = [_power(bases, exponent) for exponent, bases in powers.items()]
    return sp.Mul(*alone, *written, evaluate=False)


def _power(bases: list[sp.Expr], exponent: sp.Expr) -> sp.Expr:
    product = sp.Mul(*bases)
    turned = sp.fraction(product)[0] == 1  # m^(-3/8) rather than (1/m)^(3/8)
    return (
        sp.Pow(1 / product, -exponent, evaluate=False)
        if turned
        else sp.Pow(product, exponent, evaluate=False)
    )


def _positive(base: sp.Expr) -> bool:
    return bool(base.is_positive) or isinstance(base, (sp.zeta, sp.gamma))


class _Reader(StrPrinter):  # type: ignore[misc]  # SymPy is not typed
    """SymPy text whose symbols read back as such: those without a value stand in no table of the reader.

    Where SymPy has a word of its own for such a name (E, N, S), the text says `Symbol('E')`.
    """

    def __init__(self, given: Collection[str]) -> None:
        super().__init__({"full_prec": True})
        self._given = given

    def _print_Symbol(self, symbol: sp.Symbol) -> str:
        name = symbol.name
        return f"Symbol('{name}')" if name not in self._given and hasattr(sp, name) else str(name)


def forms(name: str, expression: sp.Expr, given: Collection[str]) -> dict[str, Any]:
    """SymPy text, LaTeX, plain text and presentation MathML of `name = expression`; `given`: names with a value."""
    written = gathered(_renamed(written_out(expression)))
    equation = sp.Eq(sp.Symbol(name), written, evaluate=False)
    return {
        **_forms(equation),
        "sympy": _Reader(given).doprint(written),
        "text": f"{name} = {plain(written)}",
    }


def root_forms(name: str, count: sp.Expr, total: sp.Symbol, given: Collection[str]) -> dict[str, Any]:
    """The same of the equation count = total that `name` solves; its SymPy text is zero at the root."""
    plainly = _renamed(written_out(count))
    written, total = gathered(plainly), _renamed(total)
    return {
        **_forms(sp.Eq(written, total, evaluate=False)),
        "sympy": _Reader(given).doprint(sp.Add(-total, *sp.Add.make_args(written), evaluate=False)),
        "text": f"{name} solves {_inline(plainly)} = {total}",
    }


def _forms(equation: sp.Eq) -> dict[str, Any]:
    return {"latex": sp.latex(equation).replace("DeltaC", r"\Delta C"), "mathml": presentation(equation)}


def plain(expression: sp.Expr) -> str:
    """One line in the file's own notation: `^` for powers."""
    return _inline(_renamed(written_out(expression)))


def _inline(expression: sp.Expr) -> str:
    return str(sp.sstr(expression)).replace("**", "^")


def missing_words(missing: Iterable[sp.Symbol]) -> str | None:
    """Why there is no number: the symbols that have none; None where none is missing."""
    names = sorted(written_name(symbol.name) for symbol in missing)
    return f"no value for {', '.join(names)}" if names else None


def where(values: Iterable[tuple[sp.Symbol, float]]) -> dict[str, float]:
    """SI values by written name, in alphabetical order."""
    return dict(sorted((written_name(symbol.name), value) for symbol, value in values))
