"""One `derive` question: from Z1 to the forms, values and notes of every quantity asked for."""

from __future__ import annotations

from functools import cached_property
from typing import TYPE_CHECKING, Any

import sympy as sp
from scipy.optimize import brentq

from eoscore.symbolic.critical import explicit, heat_capacity_jump, number_at, root
from eoscore.symbolic.evaluate import number
from eoscore.symbolic.expansion import Expansion, expansions
from eoscore.symbolic.partition import ALPHA
from eoscore.symbolic.quantities import ENERGY, K_B, NUMBER, QUANTITIES, TEMPERATURE, Model, critical_number
from eoscore.symbolic.writing import forms, plain, tidy

if TYPE_CHECKING:
    from collections.abc import Mapping

    from eoscore.symbolic.problem import Problem

__all__ = ["UNITS", "Derivation"]

UNITS = {"T_c": "K", "N_c": "1", "f_0": "1", "U": "J", "S": "J/K", "C_N": "J/K", "rho": "1/J", "g": "1"}
_FREE = {"rho": {ENERGY, TEMPERATURE, ALPHA}, "g": {TEMPERATURE, ALPHA}}


class Derivation:
    """The formulas of a problem under the conditions given (N, T, n in SI)."""

    def __init__(self, problem: Problem, given: Mapping[str, float]) -> None:
        self.problem, self.given = problem, given

    def formula(self, name: str) -> dict[str, Any]:
        """The document's entry for a quantity; `why` in words where there is none."""
        temperature = name == "T_c"
        entry = (
            self._critical_temperature() if temperature else self._entry(name, QUANTITIES[name](self.model))
        )
        if "why" in entry:
            return entry
        return {**entry, "conditions": [plain(c) for c in self.problem.conditions], "steps": self._steps}

    def _tidy(self, expression: sp.Expr) -> sp.Expr:
        """Tidied, in n where the place is unbounded, and without moduli whose sign the values settle."""
        if "n" in self.given:
            expression = expression.subs(NUMBER, sp.Symbol("n", positive=True))
        return tidy(expression.replace(sp.Abs, self._signed))

    def _signed(self, inner: sp.Expr) -> sp.Expr:
        values = self._values(inner.free_symbols)
        if set(values) != inner.free_symbols:
            return sp.Abs(inner)
        return inner if number(inner, values) >= 0 else -inner

    @cached_property
    def condensed(self) -> Model:
        """The sums at mu = 0."""
        return self.problem.model(condensed=True)

    @cached_property
    def model(self) -> Model:
        """The side of the transition that N and T lie on; the condensed one where they do not say."""
        if self.no_condensate:
            return self.problem.model(condensed=False)
        if not {"N", "T"} <= set(self.given):
            return self.condensed
        count = number_at(self.condensed, self._values(critical_number(self.condensed).free_symbols))
        return self.problem.model(condensed=count(self.given["T"]) < self.given["N"])

    @cached_property
    def no_condensate(self) -> str | None:
        """Why the gas cannot condense, None where it can."""
        if self.problem.sign != 1:
            return "only bosons condense"
        exponent = self.problem.model(condensed=True).number.diverges(self.problem.values)
        if exponent is None:
            return None
        return (
            f"N_ex diverges as mu reaches the bottom: rho(E) ~ E^(a - 1) with a = {plain(exponent)}, "
            "and condensation needs a > 1"
        )

    def _values(self, symbols: set[sp.Symbol]) -> dict[sp.Symbol, float]:
        """SI values of the symbols that occur, by name; alpha is solved for where N and T are given."""
        known = {**self.problem.values, **{str(s): v for s, v, _ in self.problem.constants}, **self.given}
        found = {s: float(known[s.name]) for s in symbols if s.name in known}
        if ALPHA in symbols and {"N", "T"} <= set(self.given):
            found[ALPHA] = self._alpha
        return found

    @cached_property
    def _alpha(self) -> float:
        """-mu/(k_B T) above T_c, from N at T by a bracketed root."""
        total = self.model.number.total(ALPHA).subs(self._beta)
        values = self._values(total.free_symbols - {ALPHA})
        target = self.given["N"]

        def excess(alpha: float) -> float:
            return number(total, {**values, ALPHA: alpha}) / target - 1

        low, high = (-1.0 if self.problem.sign != 1 else 1e-12), 1.0
        while self.problem.sign != 1 and excess(low) < 0:
            low *= 2
        while excess(high) > 0:
            high *= 2
        return float(brentq(excess, low, high, xtol=1e-15, rtol=1e-14))

    @property
    def _beta(self) -> dict[sp.Symbol, sp.Expr]:
        from eoscore.symbolic.integrals.rule import BETA

        return {BETA: 1 / (K_B * TEMPERATURE)}

    @cached_property
    def _steps(self) -> list[str]:
        whole = (
            plain(self.problem.number.subs(self._beta)) if len(str(self.problem.number)) < 200 else "as above"
        )
        words = [*self.problem.steps, f"Z1(beta) at beta = 1/(k_B*T): {whole}"]
        words.extend(f"{s} = {v:.12g}: {text}" for s, v, text in self.problem.constants)
        words = [word.replace("**", "^") for word in words]
        return [*words, "N_ex = sum over l of exp(-l*alpha) Z1(l*beta), and alpha = 0 at T_c"]

    def _entry(self, name: str, expression: sp.Expr | None) -> dict[str, Any]:
        if name in ("N_c", "f_0") and self.no_condensate:
            return {"why": self.no_condensate} if name == "N_c" else self._filled("f_0", sp.Integer(0))
        if expression is None:
            return {"why": "Z1 is no sum of powers of beta, and its inverse Laplace transform was not found"}
        entry = self._filled(name, self._tidy(expression))
        if name == "g":
            scale = self._tidy(self.model.number.whole.subs(self._beta))
            entry["scale"] = forms("N_scale", scale)
        if name in ("U", "S", "C_N", "f_0"):
            entry["side"] = "T <= T_c" if self.model.condensed else "T > T_c"
        return entry

    def _filled(self, name: str, expression: sp.Expr) -> dict[str, Any]:
        """Forms, `where` and value; a value needs every symbol but the free ones."""
        values = self._values(expression.free_symbols - _FREE.get(name, set()))
        missing = expression.free_symbols - set(values)
        value, why = None, None
        if missing:
            why = f"no value for {', '.join(sorted(map(str, missing)))}"
        else:
            value = number(expression, values)
        where = {str(s): v for s, v in sorted(values.items(), key=lambda item: str(item[0]))}
        entry = {**forms(name, expression), "closed": not expression.has(sp.Sum), "where": where}
        entry |= {"value": value, "unit": UNITS[name]}
        return entry | ({"missing": why} if why else {})

    def _critical_temperature(self) -> dict[str, Any]:
        if self.no_condensate:
            return {"why": self.no_condensate}
        power = self.condensed.number.single
        if power is None:
            return self._implicit()
        expression = self._tidy(explicit(power))
        exponent = number(power.exponent, self._values(power.exponent.free_symbols))
        jump = self._tidy(heat_capacity_jump(power, exponent))
        slopes = {
            str(s): plain(sp.simplify(s * sp.diff(expression, s) / expression))
            for s in sorted(expression.free_symbols - {K_B}, key=str)
        }
        entry = {**self._filled("T_c", expression), "sensitivities": slopes}
        return {**entry, "jump": forms("DeltaC", jump)}

    def _implicit(self) -> dict[str, Any]:
        """N_c(T) - N = 0 with its root, slopes by the implicit function theorem, and the leading expansions."""
        count = critical_number(self.condensed)
        equation = count - NUMBER
        values = self._values(equation.free_symbols)
        entry = {**forms("T_c", equation), "closed": False, "equation": sp.sstr(equation, full_prec=True)}
        entry["text"] = f"T_c solves {plain(count)} = N"
        entry["where"] = {str(s): v for s, v in sorted(values.items(), key=lambda item: str(item[0]))}
        entry |= {"value": None, "unit": "K"}
        if missing := equation.free_symbols - set(values) - {TEMPERATURE}:
            return entry | {"missing": f"no value for {', '.join(sorted(map(str, missing)))}"}
        at = number_at(self.condensed, values)
        entry["value"] = temperature = root(at, values[NUMBER])
        here = {**values, TEMPERATURE: temperature}
        slope = number(sp.diff(count, TEMPERATURE), here) * temperature
        for symbol in sorted(set(values) - {K_B, NUMBER}, key=str):
            rise = number(sp.diff(count, symbol), here) * values[symbol]
            entry.setdefault("sensitivities", {"N": values[NUMBER] / slope})[str(symbol)] = -rise / slope
        several = [self._written(e, here, at, temperature) for e in expansions(self.problem.number)]
        several.sort(key=lambda e: float(e["small_value"]))
        return entry | ({"expansion": several[0], "expansions": several} if several else {})

    def _written(
        self, expansion: Expansion, here: Mapping[sp.Symbol, float], count: Any, at: float
    ) -> dict[str, Any]:
        whole, small = self._tidy(expansion.whole), self._tidy(expansion.small)
        size = number(small, here)
        reach = expansion.reach(count, here, at)
        good = f"within 1 % up to small = {reach:.2g}" if reach is not None else "not within 1 % near this N"
        return {
            **forms("T_c", whole),
            "limit": expansion.limit,
            "small": sp.sstr(small),
            "small_value": size,
            "range": f"small -> 0; {good}",
            # Two terms of a series say nothing where the next one is as large as they are.
            "value": number(whole, here) if size < 1 else None,
        }
