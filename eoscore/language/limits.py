"""What a text may ask of the reader: its length, and how deep an expression nests."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING, Final

from eoscore.language import nodes

if TYPE_CHECKING:
    from collections.abc import Sequence

CHARACTERS: Final = 1_000_000
WORDS: Final = 100_000
DEPTH: Final = 200  # small enough for Python's own recursive comparing, hashing and printing of frozen nodes
DIGITS: Final = 1_000  # characters of one number
FAULTS: Final = 100  # told of one text

_WORD = re.compile(r"[\w.]+|[^\w\s]")
_BRACKET = re.compile(r"#[^\n]*|[()]")


def words_in(text: str) -> int:
    """How many words, numbers and signs a text holds, comments included."""
    return sum(1 for _ in _WORD.finditer(text))


def parts(node: nodes.Expr | nodes.Condition) -> Sequence[nodes.Expr | nodes.Condition]:
    """The expressions and conditions directly within an expression or a condition."""
    match node:
        case nodes.Binary() | nodes.Compare():
            return (node.left, node.right)
        case nodes.Negative():
            return (node.operand,)
        case nodes.Call():
            return node.arguments
        case nodes.If():
            return (node.condition, node.then, node.otherwise)
        case nodes.Logic():
            return node.operands
        case _:
            return ()


def too_deep(node: nodes.Expr | nodes.Condition) -> bool:
    """Whether an expression has more than DEPTH levels.

    Each bracket, sign, operator and function is a level; a sum of n terms has n, since it is read from the left.
    """
    if node.span.end - node.span.start <= DEPTH:  # a level takes at least a character
        return False
    if _brackets(node.span.text) > DEPTH:
        return True
    level: list[nodes.Expr | nodes.Condition] = [node]
    for _ in range(DEPTH):
        level = [part for above in level for part in parts(above)]
    return bool(level)


def _brackets(text: str) -> int:
    depth = most = 0
    for sign in _BRACKET.findall(text):
        depth += (sign == "(") - (sign == ")")
        most = max(most, depth)
    return most
