"""Completion in notebooks: the words and names of Tarn in a `%%tarn` cell, parameters behind `held_in(`."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING, Any

from eoscore.errors import NoAnswerError, TarnError

if TYPE_CHECKING:
    from collections.abc import Iterable, Mapping

    from eoscore.answer.lab import Lab

__all__ = ["install_completion", "names_of_cell", "names_of_lab"]

_MAGIC = re.compile(r"\s*%%tarn\b.*\n")
_CALL = re.compile(r"\.held_in\([^()]*(?:\([^()]*\)[^()]*)*$")
_WORD = re.compile(r"[^\W\d]\w*$")
_DEFINED = re.compile(r"(?:^|[{\n])\s*([^\W\d]\w*)\s*(?:\([^()]*\))?\s*=|(?:gas|trap|states)\s+([^\W\d]\w*)")


def names_of_cell(cell: str) -> list[str]:
    """What may be written in a cell of Tarn: the language's own names, and those that the cell defines."""
    from eoscore.show.glossary import glossary

    own = (first or second for first, second in _DEFINED.findall(cell))
    kinds = ("unit", "caution")  # a unit is known by its number, a caution is never written
    known = (name for name, entries in glossary().items() if not entries[0].kind.startswith(kinds))
    return sorted({*own, *known})


def names_of_lab(lab: Lab) -> list[str]:
    """The parameters of its gases and places, whose values `held_in` takes."""
    program = lab.program
    found: set[str] = set()
    for gas in program.gases:
        for place in (None, *program.places):
            try:
                found.update(program.bind(gas, place).names)
            except (TarnError, NoAnswerError):
                continue
    return sorted(found)


def install_completion(shell: Any) -> None:
    """Add the names to those that the shell completes."""
    from IPython.core.completer import SimpleCompletion, context_matcher

    def tarn_matcher(context: Any) -> Any:
        names = _names(context.full_text, context.text_until_cursor, shell.user_ns)
        begun = _WORD.search(context.text_until_cursor)
        token = begun[0] if begun else ""
        fitting = [SimpleCompletion(name, type="Tarn") for name in names if name.startswith(token)]
        return {
            "completions": fitting,
            "matched_fragment": token,
            "suppress": bool(_MAGIC.match(context.full_text)),
        }

    shell.Completer.custom_matchers.append(context_matcher()(tarn_matcher))


def _names(text: str, before: str, known: Mapping[str, Any]) -> Iterable[str]:
    """The names that fit where the cursor is; `known` are the variables of the notebook."""
    if magic := _MAGIC.match(text):
        return names_of_cell(text[magic.end() :])
    if not _CALL.search(before):
        return ()
    from eoscore.answer.lab import Lab

    labs = [each for each in known.values() if isinstance(each, Lab)]
    return sorted({f"{name}=" for lab in labs for name in names_of_lab(lab)})
