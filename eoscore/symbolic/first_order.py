"""What a formula of T_c leaves out, to first order: the finite number, and collisions."""

from __future__ import annotations

from copy import copy
from dataclasses import replace
from math import pi
from typing import TYPE_CHECKING, Any

import numpy as np
import sympy as sp

from eoscore.constants import HBAR, K_B, H
from eoscore.errors import NoAnswerError
from eoscore.state import hold
from eoscore.state.shifts import BOX, is_flat
from eoscore.symbolic.writing import forms

if TYPE_CHECKING:
    from collections.abc import Mapping

    from eoscore.state import HeldGas

__all__ = ["continuum", "first_orders"]

ENERGY, TEMPERATURE, LENGTH, MASS, DENSITY = sp.symbols("E_0 T_c a_s m n", positive=True)
BOLTZMANN, PLANCK = sp.symbols("k_B h", positive=True)


def continuum(held: HeldGas) -> HeldGas:
    """The ideal semiclassical gas, which formulas are about, of one with a mean field or on exact levels."""
    gas = replace(held.gas, treatment=None)
    if held.place is None or held.place.levels is None:
        return held if gas == held.gas else replace(held, gas=gas, _cache={})
    place = copy(held.place)
    place.levels = None
    return hold(gas, place)


def first_orders(held: HeldGas, given: Mapping[str, float]) -> dict[str, dict[str, Any]]:
    """Relative shifts of T_c as formulas, where rho(E) is one power E^(a - 1), with their values at N.

    By the lowest level, E_0 above the bottom: -zeta(a - 1)/(a zeta(a)) E_0/(k_B T_c), a > 2. By collisions: a number
    that the shape of the trap alone decides, times a_s/lambda_T; in a box 1.32 a_s n^(1/3), beyond the mean field.
    """
    counts = {name: given[name] for name in ("N", "n") if name in given}
    terms = held.model.whole.measure.powers() if hasattr(held.model.whole, "measure") else None
    if not counts or terms is None or len(terms) != 1:
        return {}
    a = terms[0][1]
    names = ["T_c", "shift_int", *(["shift_size"] if a > 2 and _rises(held) else [])]
    found = held.find(names, counts)
    if found["T_c"].why:
        return {}
    T_c = float(found["T_c"].value)
    entries = {}
    if (
        "shift_size" in found
        and found["shift_size"].why is None
        and found["shift_size"].route.startswith("first order")
    ):
        order = sp.nsimplify(a, rational=True).limit_denominator(1000)
        formula = -sp.zeta(order - 1) / (order * sp.zeta(order)) * ENERGY / (BOLTZMANN * TEMPERATURE)
        values = {"E_0": float(np.sum(held.frequencies())) * pi * HBAR, "k_B": K_B, "T_c": T_c}
        entries["shift_size"] = _entry("shift_size", formula, values, float(found["shift_size"].value))
    if found["shift_int"].why is None and is_flat(held):
        entries["shift_int"] = _of_box(held, counts, float(found["shift_int"].value))
    elif found["shift_int"].why is None and found["shift_int"].route.startswith("first order"):
        a_s, m = held.gas.a_s or np.nan, held.gas.mass or np.nan
        value = float(found["shift_int"].value)
        number = value * H / (a_s * (2 * pi * m * K_B * T_c) ** 0.5)
        length = PLANCK / sp.sqrt(2 * sp.pi * MASS * BOLTZMANN * TEMPERATURE)
        formula = sp.Float(number, 12) * LENGTH / length
        values = {"a_s": a_s, "m": m, "h": H, "k_B": K_B, "T_c": T_c}
        entries["shift_int"] = _entry("shift_int", formula, values, value)
    return entries


def _of_box(held: HeldGas, counts: Mapping[str, float], value: float) -> dict[str, Any]:
    """The density that the shift goes with is read off the shift itself, whatever gave it."""
    a_s = held.gas.a_s or np.nan
    density = counts["n"] if "n" in counts else (value / (BOX[0] * a_s)) ** 3
    formula = sp.Float(str(BOX[0])) * LENGTH * DENSITY ** sp.Rational(1, 3)
    return _entry("shift_int", formula, {"a_s": a_s, "n": density}, value)


def _rises(held: HeldGas) -> bool:
    """Whether the bottom is quadratic in every direction: elsewhere the levels would be summed, which takes long."""
    try:
        return bool(np.all(held.frequencies() > 0))
    except NoAnswerError:
        return False


def _entry(name: str, formula: sp.Expr, values: dict[str, float], value: float) -> dict[str, Any]:
    return {**forms(name, formula, values), "where": values, "value": value, "unit": "1"}
