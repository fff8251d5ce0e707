"""How a held gas and a state show in a notebook: a plain table."""

from __future__ import annotations

from html import escape
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Iterable

    from eoscore.state.held import HeldGas
    from eoscore.state.reading import Reading
    from eoscore.state.state import State

__all__ = ["gas_table", "state_table"]

SHOWN = ("N", "n", "T", "mu", "f_0", "n_peak", "PSD", "U", "S", "C_N", "T_c")


def gas_table(held: HeldGas) -> str:
    """A held gas: what holds it, and how it is counted."""
    rows = [("held gas", held.name), ("statistics", held.gas.statistics), ("route", held.model.whole.route)]
    return _table(rows)


def state_table(state: State) -> str:
    """The main quantities of a state, or why there are none."""
    rows = [(name, _cell(state.reading(name))) for name in SHOWN]
    return _table([("state", repr(state)), *rows])


def _cell(reading: Reading) -> str:
    if reading.value.ndim:
        return f"{reading.value.size} values, {reading.unit}"
    if reading.why is not None:
        return reading.why
    return f"{float(reading.value):.6g} {reading.unit}".removesuffix(" 1")


def _table(rows: Iterable[tuple[str, str]]) -> str:
    cells = "".join(f"<tr><th>{escape(name)}</th><td>{escape(text)}</td></tr>" for name, text in rows)
    return f"<table>{cells}</table>"
