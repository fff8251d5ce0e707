"""One `derive` question: from Z1 to the forms, values and notes of every quantity asked for."""

from __future__ import annotations

from functools import cached_property
from typing import TYPE_CHECKING, Any

import sympy as sp

from eoscore.symbolic.algebra import log_slope
from eoscore.symbolic.critical import explicit, heat_capacity_jump, number_at
from eoscore.symbolic.evaluate import number, numerical_slope
from eoscore.symbolic.expansion import cold_exponent, expansions
from eoscore.symbolic.implicit import implicit
from eoscore.symbolic.partition import ALPHA
from eoscore.symbolic.quantities import ENERGY, K_B, NUMBER, QUANTITIES, TEMPERATURE, Model, critical_number
from eoscore.symbolic.units import unit_of
from eoscore.symbolic.writing import forms, missing_words, plain, tidy, where, written_name

if TYPE_CHECKING:
    from collections.abc import Mapping

    from eoscore.symbolic.problem import Problem

__all__ = ["Derivation"]

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
        if "sympy" not in entry:
            return entry
        return {**entry, "conditions": self._conditions, "steps": self._steps}

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
        partition = self.problem.model(condensed=True).number
        exponent = partition.diverges(self.problem.values)
        if partition.rest != 0:
            exponent = cold_exponent(partition.rest)
            exponent = exponent if exponent is not None and exponent <= 1 else None
        if exponent is None:
            return None
        return (
            f"N_ex diverges as mu reaches the bottom: rho(E) ~ E^(a - 1) with a = {plain(exponent)}, "
            "and condensation needs a > 1"
        )

    def _values(self, symbols: set[sp.Symbol]) -> dict[sp.Symbol, float]:
        """SI values of the symbols that occur, by name; alpha is solved for where N and T are given."""
        known = {**self.problem.values, **{str(s): v for s, v, *_ in self.problem.constants}, **self.given}
        found = {s: float(known[s.name]) for s in symbols if s.name in known}
        if ALPHA in symbols and {"N", "T"} <= set(self.given):
            found[ALPHA] = self._alpha
        return found

    @cached_property
    def _alpha(self) -> float:
        """-mu/(k_B T) above T_c, from N at T by a bracketed root."""
        from scipy.optimize import brentq

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
        if excess(low) < 0:
            msg = "alpha = -mu/(k_B T) is below 1e-12, too small to be told from 0"
            raise ValueError(msg)
        return float(brentq(excess, low, high, xtol=1e-15, rtol=1e-14))

    @property
    def _beta(self) -> dict[sp.Symbol, sp.Expr]:
        from eoscore.symbolic.integrals.rule import BETA

        return {BETA: 1 / (K_B * TEMPERATURE)}

    @cached_property
    def _conditions(self) -> list[str]:
        """What must hold: for the integrals to converge, and for the gas to condense where that is open."""
        found = [plain(condition) for condition in self.problem.conditions]
        power = None if self.no_condensate else self.condensed.number.single
        if power is not None and not (power.exponent - 1).is_positive:
            found.append(f"{plain(self._tidy(power.exponent))} > 1")
        return found

    @cached_property
    def _steps(self) -> list[str]:
        whole = (
            plain(self.problem.number.subs(self._beta)) if len(str(self.problem.number)) < 200 else "as above"
        )
        words = [*self.problem.steps, f"Z1(beta) at beta = 1/(k_B*T): {whole}"]
        words.extend(f"{s} = {v:.12g}: {text}" for s, v, text, _ in self.problem.constants)
        words = [word.replace("**", "^").replace("'", "") for word in words]
        return [*words, "N_ex = sum over l of exp(-l*alpha) Z1(l*beta), and alpha = 0 at T_c"]

    def _entry(self, name: str, expression: sp.Expr | None) -> dict[str, Any]:
        if name in ("N_c", "f_0") and self.no_condensate:
            return {"why": self.no_condensate} if name == "N_c" else self._filled("f_0", sp.Integer(0))
        if expression is None:
            return {"why": "Z1 is no sum of powers of beta, and its inverse Laplace transform was not found"}
        entry = self._filled(name, self._tidy(expression))
        if name == "g":
            scale = self._tidy(self.model.number.whole.subs(self._beta))
            entry["scale"] = forms("N_scale", scale, entry["where"])
        if name in ("U", "S", "C_N", "f_0") and not self.no_condensate:
            entry["side"] = "T <= T_c" if self.model.condensed else "T > T_c"
        return entry | (self._jump() if name == "C_N" else {})

    def _filled(self, name: str, expression: sp.Expr) -> dict[str, Any]:
        """Forms, `where` and value; a value needs every symbol but the free ones."""
        values = self._values(expression.free_symbols - _FREE.get(name, set()))
        why = missing_words(expression.free_symbols - set(values))
        value = None if why else number(expression, values)
        known = where(values.items())
        entry = {
            **forms(name, expression, known),
            "closed": not expression.has(sp.Sum),
            "where": known,
        }
        entry |= {"value": value, "unit": unit_of(name, self.problem.per), "why": why}
        return entry

    def _critical_temperature(self) -> dict[str, Any]:
        if self.no_condensate:
            return {"why": self.no_condensate}
        power = self.condensed.number.single
        if power is None:
            count, expanded = critical_number(self.condensed), expansions(self.problem.number)
            return implicit(count, expanded, self._values(count.free_symbols | {NUMBER}), self._tidy)
        expression = self._tidy(explicit(power))
        return {**self._filled("T_c", expression), "sensitivities": self._slopes(expression)} | self._jump()

    def _slopes(self, expression: sp.Expr) -> dict[str, str | float]:
        """d ln T_c / d ln of every symbol; numbers, where there are values, for the symbols in exponents."""
        exponents = {s for power in expression.atoms(sp.Pow) for s in power.exp.free_symbols}
        values = self._values(expression.free_symbols)
        slopes: dict[str, str | float] = {}
        # What a number without closed form depends on, and that number itself, would show half of the slope.
        inside = {s for name, *_, hidden in self.problem.constants for s in (name, *hidden)}
        for symbol in sorted(expression.free_symbols - {K_B} - inside, key=str):
            if symbol not in exponents:
                slopes[written_name(symbol.name)] = plain(log_slope(expression, symbol))
            elif len(values) == len(expression.free_symbols):
                slopes[written_name(symbol.name)] = numerical_slope(expression, values, symbol)
        return slopes

    def _jump(self) -> dict[str, Any]:
        """The jump of C_N at T_c, where one power of beta is all of Z1."""
        power = self.condensed.number.single
        if power is None or self.no_condensate:
            return {}
        exponent = number(power.exponent, self._values(power.exponent.free_symbols))
        jump = self._tidy(heat_capacity_jump(power, exponent))
        return {"jump": self._filled("DeltaC", jump)}
