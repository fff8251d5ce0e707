"""What made the page: versions, the hash of the input, and the command that makes it again."""

from __future__ import annotations

import platform
import shlex
from hashlib import sha256
from importlib.metadata import PackageNotFoundError, version
from typing import TYPE_CHECKING

from eoscore.show.report.markup import Markup, element, table, together

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence

__all__ = ["provenance"]

_PACKAGES = ("numpy", "scipy", "sympy", "matplotlib", "lark", "periodictable")


def provenance(name: str, content: bytes, settings: Sequence[str], options: Sequence[str]) -> Markup:
    """A table of what a colleague needs to make the same page; `options` are the further words of the command."""
    rows = list(_rows(name, content, settings))
    words = ["eoscore", "report", name, *(word for each in settings for word in ("--set", each))]
    command = element("code", shlex.join([*words, *options, "--out", "page.html"]))
    return together(table("Input and versions", ("what", "value"), rows), element("p", "Made by ", command))


def _rows(name: str, content: bytes, settings: Sequence[str]) -> Iterator[tuple[str, str]]:
    from eoscore import __version__

    yield "file", name
    yield "SHA-256 of the file", sha256(content).hexdigest()
    for setting in settings:
        yield "set from outside", setting
    yield "eoscore", __version__
    yield "Python", platform.python_version()
    for package in _PACKAGES:
        try:
            yield package, version(package)
        except PackageNotFoundError:
            continue
    yield "constants", "CODATA as carried by SciPy"
