"""eoscore: where a quantum gas condenses in a given trap, and in what state it is.

The front door is narrow. `load` and `loads` read a Tarn text into a `Lab`, which answers the text's own
questions and hands out its gases and places; `dataset` makes labelled arrays of an answer; `bose` and `fermi` are
the functions behind every number; all errors descend from `EoscoreError`. Quantities are SI floats, arrays are
NumPy's.
"""

from __future__ import annotations

from importlib import import_module
from pathlib import Path
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from eoscore.answer.lab import Lab, load, loads
    from eoscore.errors import EoscoreError, NoAnswerError, PluginError, TarnError
    from eoscore.gas.bose_function import bose
    from eoscore.gas.fermi_function import fermi
    from eoscore.show.dataset import dataset

__version__ = "0.1.0"
__all__ = [
    "EoscoreError",
    "Lab",
    "NoAnswerError",
    "PluginError",
    "TarnError",
    "bose",
    "dataset",
    "fermi",
    "load",
    "loads",
]

# Imported when first asked for (PEP 562), so that `import eoscore` costs next to nothing.
_ROOMS = {
    "EoscoreError": "eoscore.errors",
    "Lab": "eoscore.answer.lab",
    "NoAnswerError": "eoscore.errors",
    "PluginError": "eoscore.errors",
    "TarnError": "eoscore.errors",
    "bose": "eoscore.gas.bose_function",
    "dataset": "eoscore.show.dataset",
    "fermi": "eoscore.gas.fermi_function",
    "load": "eoscore.answer.lab",
    "loads": "eoscore.answer.lab",
}

# In a checkout the grammar and the plugins stand beside the package, for readers; an installed package holds them.
_checkout = Path(__file__).parent.parent
if (_checkout / "grammar" / "tarn.lark").is_file():
    __path__.append(str(_checkout))


def load_ipython_extension(shell: Any) -> None:
    """`%load_ext eoscore` in a notebook: rich displays, and the cell magic `%%tarn`."""
    import_module("eoscore.show.notebook").install(shell)


def __getattr__(name: str) -> Any:
    if name not in _ROOMS:
        raise AttributeError(f"eoscore has no {name!r}; it has {', '.join(__all__)}")
    value = getattr(import_module(_ROOMS[name]), name)
    globals()[name] = value
    return value


def __dir__() -> list[str]:
    return sorted([*__all__, "__version__"])
