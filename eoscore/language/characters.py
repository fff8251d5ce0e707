"""Bytes to characters: what is not text, or too much of it, is told before anything is read."""

from __future__ import annotations

import re

from eoscore.language.faults import Faults
from eoscore.language.limits import CHARACTERS, WORDS, words_in
from eoscore.source import Source, Span

_CONTROL = re.compile(r"[\x00-\x08\x0b\x0e-\x1f\x7f-\x9f\ud800-\udfff\ufffe\uffff]")
_BOM = "\N{ZERO WIDTH NO-BREAK SPACE}"


def read_source(text: str | bytes, name: str) -> Source:
    """The source of a text, without a byte order mark.

    Raises TarnError for bytes that are not UTF-8, characters that no text has, and texts that are too long.
    """
    faults = Faults()
    source = Source(
        name, _decoded(text, name, faults) if isinstance(text, bytes) else text.removeprefix(_BOM)
    )
    if len(source.text) > CHARACTERS:
        message = f"a text of {len(source.text)} characters came, at most {CHARACTERS} are read"
        faults.add(Span(source, 0, 1), message, 'divide it into files, and join them by `use "path.tarn"`')
    elif (words := words_in(source.text)) > WORDS:
        message = f"a text of {words} words and signs came, at most {WORDS} are read"
        faults.add(Span(source, 0, 1), message, 'divide it into files, and join them by `use "path.tarn"`')
    elif strange := _CONTROL.search(source.text):
        message = f"the character U+{ord(strange[0]):04X} came, which no text has"
        place = Span(source, strange.start(), strange.end())
        faults.add(place, message, "take it out; a Tarn file is plain text in UTF-8")
    faults.raise_if_any()
    return source


def _decoded(text: bytes, name: str, faults: Faults) -> str:
    if len(text) > 4 * CHARACTERS:  # too long in any case
        return text[: 5 * CHARACTERS].decode("latin-1")
    try:
        return text.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        readable = text[: error.start].decode("utf-8", "replace").removeprefix(_BOM)
        source = Source(name, readable + text[error.start :].decode("utf-8", "replace"))
        message = f"the byte 0x{text[error.start]:02X} came, which is not UTF-8"
        place = Span(source, len(readable), len(readable) + 1)
        faults.add(place, message, "save the file with the encoding UTF-8")
        return ""
