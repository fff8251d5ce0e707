"""The front door of the symbolic room: a bound question to the formulas of its answer."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from eoscore.errors import NoAnswerError
from eoscore.symbolic.deadline import OutOfTimeError, deadline

if TYPE_CHECKING:
    from collections.abc import Iterable, Mapping

    from eoscore.language.binding import Binding
    from eoscore.state import HeldGas

__all__ = ["TIME_LIMIT", "derive"]

# What the numerical engine needs to be given for a quantity, one of several sets.
_STATE = ({"N", "T"}, {"n", "T"})
_NEEDS = {"T_c": ({"N"}, {"n"}), "N_c": ({"T"},), "n_c": ({"T"},)}
_APART = 1e-3  # relative; both ways are good to far more digits, unless one of them is wrong
TIME_LIMIT = 20.0  # s for one question; SymPy may run away, an answer may not


def derive(
    binding: Binding,
    held: HeldGas,
    names: Iterable[str],
    given: Mapping[str, float],
    seconds: float = TIME_LIMIT,
) -> dict[str, dict[str, Any]]:
    """For each quantity its forms, `where`, value and notes, as the JSON document has them.

    given: N, T or n in SI units. Where SymPy stops, or time runs out, the entry says why, and T_c and N_c carry
    the numerical value. Each value is confirmed by the numerical engine: `numerical` and `difference`, relative
    (absolute for f_0); where they are apart there is no value.
    Formulas are those of the ideal, infinite gas; `first_order` of T_c holds the first terms beyond it.
    """
    from eoscore.symbolic.first_order import continuum, first_orders

    entries: dict[str, dict[str, Any]] = {}
    names, held = tuple(names), continuum(held)
    why = "SymPy gave no formula"
    try:
        with deadline(seconds):
            why = _derived(binding, held, names, given, entries) or why
    except OutOfTimeError as over:
        why = f"SymPy had not finished {str(over) or 'its work'} after {seconds:g} s"
    found = {name: _confirmed(held, name, entries.get(name) or {"why": why}, given) for name in names}
    if found.get("T_c", {}).get("closed") and (further := first_orders(held, given)):
        found["T_c"]["first_order"] = further
    return found


def _derived(
    binding: Binding,
    held: HeldGas,
    names: tuple[str, ...],
    given: Mapping[str, float],
    entries: dict[str, dict[str, Any]],
) -> str | None:
    """Fill in `entries` one by one, so that those that were done stay; returns why there are none."""
    from eoscore.symbolic.derivation import Derivation
    from eoscore.symbolic.integrals import StopError
    from eoscore.symbolic.problem import CutError, problem_of

    try:
        derivation = Derivation(problem_of(binding, held), _counted(held, given))
    except (StopError, CutError) as stop:
        return str(stop)
    except Exception as fault:  # noqa: BLE001 - SymPy's inner works may raise anything, and an answer is words
        return _stopped(fault)
    for name in names:
        try:
            entries[name] = derivation.formula(name)
        except Exception as fault:  # noqa: BLE001 - as above
            entries[name] = {"why": _stopped(fault)}
    return None


def _stopped(fault: Exception) -> str:
    return f"SymPy stopped: {str(fault) or type(fault).__name__}"


def _counted(held: HeldGas, given: Mapping[str, float]) -> dict[str, float]:
    """A number for a density: N = n V in a box; in the unbounded place every N stands for n, per volume."""
    if "n" not in given:
        return dict(given)
    if held.uniform:
        return {**given, "N": given["n"]}
    return {**{k: v for k, v in given.items() if k != "n"}, "N": given["n"] * (held.volume or 1.0)}


def _confirmed(held: HeldGas, name: str, entry: dict[str, Any], given: Mapping[str, float]) -> dict[str, Any]:
    """Put the numerical engine's value beside the formula's, or in its stead where there is no formula."""
    from eoscore.symbolic.units import unit_of

    per = held.dimension if held.uniform else 0
    numerical, reason = _numerical(held, "n_c" if per and name == "N_c" else name, given)
    if reason is not None and name in ("T_c", "N_c") and entry.get("value") is not None:
        entry = {"why": reason}  # a sum that diverges may look as if it had a root
    if "sympy" not in entry:
        empty = dict.fromkeys(("sympy", "latex", "text")) | {"closed": False, "where": {}, "value": numerical}
        told = reason is None or reason == entry["why"] or "condens" in entry["why"]
        why = entry["why"] if told else f"{entry['why']}; the numbers: {reason}"
        return {**empty, "unit": unit_of(name, per), **entry, "why": why}
    if numerical is not None and entry["value"] is not None:
        scale = 1.0 if name == "f_0" else max(abs(numerical), abs(entry["value"])) or 1.0
        entry |= {"numerical": numerical, "difference": abs(entry["value"] - numerical) / scale}
        if entry["difference"] > _APART:
            entry |= {"value": None, "why": _apart(entry["value"], numerical, entry["unit"])}
    return entry


def _apart(value: float, numerical: float, unit: str) -> str:
    """Why no number is given where the two ways to it part."""
    return (
        f"the formula gives {value:.6g} {unit} here and the numerical engine {numerical:.6g} {unit}: one of them is "
        "wrong, please report it"
    )


def _numerical(held: HeldGas, name: str, given: Mapping[str, float]) -> tuple[float | None, str | None]:
    """The numerical engine's value, or why it has none; neither for what it does not know or was not asked."""
    if name in ("rho", "g") or not any(needs <= set(given) for needs in _NEEDS.get(name, _STATE)):
        return None, None
    try:
        reading = held.find([name], given)[name]
        return (None, str(reading.why)) if reading.why else (float(reading.value), None)
    except NoAnswerError as fault:
        return None, fault.why
    except (TypeError, ValueError):
        return None, None
