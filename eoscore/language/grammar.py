"""The parser that lark makes of `grammar/tarn.lark`: made once, used by one text at a time."""

from __future__ import annotations

import os
from functools import cache
from importlib.resources import files
from pathlib import Path
from threading import Lock
from typing import TYPE_CHECKING

from lark import Lark

from eoscore.language.build import Build

if TYPE_CHECKING:
    from collections.abc import Callable

    from lark import UnexpectedInput

    from eoscore.language import nodes
    from eoscore.language.faults import Faults
    from eoscore.source import Source

# lark calls one builder for every text, and the builder knows the text it is at: two threads must take turns.
_turn = Lock()


@cache
def _parser() -> tuple[Lark, Build]:
    grammar = files("eoscore.grammar").joinpath("tarn.lark").read_text(encoding="utf-8")
    build = Build()
    lark = Lark(
        grammar,
        start="file",
        parser="lalr",
        lexer="contextual",
        keep_all_tokens=True,
        maybe_placeholders=True,
        cache=_tables(),
        transformer=build,  # lark asks only for methods named as the rules
    )
    return lark, build


def _tables() -> str | bool:
    """The file where lark keeps the tables of the grammar: making them takes longer than all else of a short run.

    lark checks a hash of the grammar and of its own version, and makes them anew where the file does not fit.
    """
    try:
        folder = Path(os.environ.get("XDG_CACHE_HOME") or Path.home() / ".cache") / "eoscore"
        folder.mkdir(mode=0o700, parents=True, exist_ok=True)
    except (OSError, RuntimeError):  # no home, or one that may not be written
        return False
    return str(folder / "tarn.tables")


def build_nodes(
    source: Source, on_error: Callable[[UnexpectedInput, Source, Faults], bool]
) -> tuple[nodes.File | None, Faults]:
    """The nodes of a text and all faults; `on_error` puts a fault into words and says where to go on."""
    with _turn:
        lark, build = _parser()
        faults = build.begin(source)
        tree = lark.parse(source.text, on_error=lambda error: on_error(error, source, faults))
        return tree, faults  # type: ignore[return-value]  # lark types the result of a transformer as a tree
