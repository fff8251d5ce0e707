"""The functions of Tarn: how many arguments each takes and what becomes of their dimensions."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Literal

from eoscore.language.kind import PURE, Dim, Wild, alike, power

if TYPE_CHECKING:
    from collections.abc import Sequence

__all__ = ["BUILTINS", "Builtin", "misfit", "result"]

Rule = Literal["pure", "root", "keeps", "drops"]


@dataclass(frozen=True)
class Builtin:
    """One function of Tarn.

    Rule: `pure` takes and gives pure numbers; `root` halves the dimension; `keeps` wants its arguments alike and
    gives the same; `drops` wants them alike and gives a pure number. `most` is None where there is no limit.
    """

    arguments: tuple[str, ...]
    rule: Rule
    most: int | None

    def takes(self, count: int) -> bool:
        """Whether so many arguments are right."""
        return count >= len(self.arguments) and (self.most is None or count <= self.most)


def _plain(arguments: str, rule: Rule) -> Builtin:
    names = tuple(arguments.split())
    return Builtin(names, rule, len(names))


BUILTINS: dict[str, Builtin] = {
    **dict.fromkeys(("exp", "ln", "log10", "sin", "cos", "tan", "asin", "acos", "atan"), _plain("x", "pure")),
    **dict.fromkeys(("sinh", "cosh", "tanh", "erf"), _plain("x", "pure")),
    **dict.fromkeys(("ellipk", "ellipe"), _plain("m", "pure")),
    "besselj": _plain("order x", "pure"),
    "sqrt": _plain("x", "root"),
    "abs": _plain("x", "keeps"),
    "sign": _plain("x", "drops"),
    "atan2": _plain("y x", "drops"),
    "min": Builtin(("a", "b"), "keeps", None),
    "max": Builtin(("a", "b"), "keeps", None),
}


def misfit(builtin: Builtin, given: Sequence[Dim]) -> int | None:
    """Index of the first argument that does not fit, None if all do."""
    known = [dim for dim in given if not isinstance(dim, Wild)]
    wanted = PURE if builtin.rule == "pure" else known[0] if known else PURE
    if builtin.rule == "root":
        return None
    return next((index for index, dim in enumerate(given) if not alike(dim, wanted)), None)


def result(builtin: Builtin, given: Sequence[Dim]) -> Dim:
    """The dimension of the value; a faulty argument among others would have fitted them."""
    if builtin.rule in ("pure", "drops"):
        return PURE
    if builtin.rule == "root":
        return power(given[0], 0.5)
    faulty = Wild.FAULTY if Wild.FAULTY in given else Wild.ZERO
    return next((dim for dim in given if not isinstance(dim, Wild)), faulty)
