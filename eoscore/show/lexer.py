"""Tarn for Pygments: pages, documents and editors that know it colour a text. Registered as `tarn`."""

from __future__ import annotations

from typing import Any, ClassVar

from pygments.lexer import RegexLexer, bygroups, words
from pygments.token import Comment, Keyword, Name, Number, Operator, Punctuation, String, Text

from eoscore.language.builtin import BUILTINS
from eoscore.language.reserved import BLOCKS, JOINERS, LINE_WORDS
from eoscore.language.scope import constant_scope

__all__ = ["TarnLexer"]

_SYMBOL = r"°?[^\W\d]\w*(?:(?:(?<=[^\W\d])|(?<=\ba0))-[0-9]+(?!\w|\.[0-9]))?"
_UNIT = rf"{_SYMBOL}(?:[./]{_SYMBOL})*"
_NUMBER = r"(?:[0-9]+\.?[0-9]*|\.[0-9]+)(?:[eE][+-]?[0-9]+)?(?:\([0-9]+\)(?:[eE][+-]?[0-9]+)?)?"
_KEYWORD = r"(?:for|in|with|over|from|where|at|and|or|not)\b"


class TarnLexer(RegexLexer):
    """Comments, numbers with their units, words of the language, functions, constants and names."""

    name = "Tarn"
    aliases: ClassVar[list[str]] = ["tarn"]
    filenames: ClassVar[list[str]] = ["*.tarn"]
    mimetypes: ClassVar[list[str]] = ["text/x-tarn"]
    url = ""

    tokens: ClassVar[dict[str, list[Any]]] = {
        "root": [
            (r"[^\S\n]+|\n", Text),
            (r"#[^\n]*", Comment.Single),
            (r'"[^"\n]*"', String),
            (rf"({_NUMBER})([ \t]+)(?!{_KEYWORD})({_UNIT})", bygroups(Number, Text, Keyword.Type)),
            (_NUMBER, Number),
            (r"(isotope)([ \t\n]+)([A-Z][a-z]?-[0-9]{1,3})", bygroups(Keyword, Text, String.Symbol)),
            (words(("find", "derive"), suffix=r"\b"), Keyword.Declaration),
            (
                rf"\b({'|'.join(BLOCKS)})([ \t]+)([^\W\d]\w*)",
                bygroups(Keyword.Declaration, Text, Name.Class),
            ),
            (words((*BLOCKS, "use", *JOINERS), suffix=r"\b"), Keyword),
            (words(tuple(LINE_WORDS), suffix=r"\b(?!\s*[=(])"), Keyword),
            (words(tuple(BUILTINS), suffix=r"(?=\s*\()"), Name.Builtin),
            (words(tuple(constant_scope().names), suffix=r"\b"), Name.Constant),
            (r"[^\W\d]\w*(?=\s*\()", Name.Function),
            (r"[^\W\d]\w*", Name),
            (r"<=|>=|[-+*/^=<>]", Operator),
            (r"[(){}\[\],]", Punctuation),
        ],
    }
