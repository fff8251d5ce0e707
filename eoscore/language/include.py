"""What a text takes in with `use`: files below its folder, each read once, and the shelf that ships with eoscore."""

from __future__ import annotations

from dataclasses import dataclass, field
from functools import cache
from importlib import resources
from pathlib import Path
from typing import TYPE_CHECKING

from eoscore.errors import Complaint, TarnError
from eoscore.language import nodes
from eoscore.language.faults import Faults, listed
from eoscore.language.parse import parse

if TYPE_CHECKING:
    from collections.abc import Iterator
    from importlib.resources.abc import Traversable

__all__ = ["Included", "Includer", "shelf_files"]

_LARGEST = 20_000_000  # bytes of a file that is taken in


@dataclass
class Included:
    """The entries of all files taken in (the main file's first), and the shelf files by name."""

    entries: list[nodes.Entry] = field(default_factory=list)
    shelf: dict[str, nodes.File] = field(default_factory=dict)
    broken: list[Complaint] = field(default_factory=list)


class Includer:
    """Follows the `use` lines of a file, depth first."""

    def __init__(self, folder: Path | None, faults: Faults) -> None:
        self._root = folder.resolve() if folder else None
        self._shown = folder
        self._faults = faults
        self._open: list[Path] = []
        self._read: set[Path] = set()
        self.included = Included()

    def take(self, file: nodes.File, path: Path | None) -> None:
        """Takes in a file's entries and all it uses; `path` is where it was read, None for a bare text."""
        if path is not None:
            self._read.add(path)
            self._open.append(path)
        for entry in file.entries:
            if not isinstance(entry, nodes.Use):
                self.included.entries.append(entry)
            elif entry.is_path:
                self._take_path(entry, path.parent if path else self._root)
            else:
                self._take_shelf(entry)
        if path is not None:
            self._open.pop()

    def _take_path(self, use: nodes.Use, folder: Path | None) -> None:
        target = self._target(use, folder)
        if target is None:
            return
        if target in self._open:
            ring = [*self._open[self._open.index(target) :], target]
            way = " uses ".join(path.name for path in ring)
            self._faults.add(
                use.span, f"files cannot use each other in a circle: {way}", "take one `use` out"
            )
        elif target not in self._read:
            used = self._parsed(use, target)
            if used is not None:
                self.take(nodes.File(span=used.span, entries=tuple(_declarations(used))), target)

    def _target(self, use: nodes.Use, folder: Path | None) -> Path | None:
        if self._root is None or folder is None:
            self._faults.add(use.span, "a text without a folder cannot use files", "save it as a file first")
            return None
        hint = f'a file below the folder of the first, such as `use "beams.tarn"`, not `{use.target}`'
        if Path(use.target).is_absolute() or not use.target.endswith(".tarn") or "\0" in use.target:
            self._faults.add(use.span, "`use` takes the relative path of a .tarn file", hint)
            return None
        try:
            target = (folder / use.target).resolve()
            if not target.is_relative_to(self._root):
                self._faults.add(use.span, f"`{use.target}` leads out of the folder", hint)
                return None
            if target.is_file():
                return target
        except (OSError, RuntimeError):  # a name too long, or a ring of links
            pass
        self._faults.add(use.span, f"there is no file `{use.target}`", self._others(folder))
        return None

    def _others(self, folder: Path) -> str:
        names = [path.name for path, _ in zip(folder.glob("*.tarn"), range(50), strict=False)]
        return f"files there: {', '.join(sorted(names)[:8])}" if names else "no .tarn file is there"

    def _parsed(self, use: nodes.Use, target: Path) -> nodes.File | None:
        self._read.add(target)
        shown = self._shown / target.relative_to(self._root) if self._shown and self._root else target
        try:
            if target.stat().st_size > _LARGEST:
                self._faults.add(
                    use.span, f"`{use.target}` is larger than {_LARGEST // 10**6} MB", "split it"
                )
                return None
            return parse(target.read_bytes(), str(shown))
        except OSError as error:
            self._faults.add(
                use.span, f"`{use.target}` cannot be read: {error.strerror}", "check its permissions"
            )
        except TarnError as error:
            self.included.broken.extend(error.complaints)
        return None

    def _take_shelf(self, use: nodes.Use) -> None:
        if use.target in self.included.shelf:
            return
        shelf = shelf_files()
        if use.target in shelf:
            self.included.shelf[use.target] = _shelf_file(use.target)
        else:
            hint = listed(use.target, shelf, what="on the shelf")
            self._faults.add(use.span, f"there is no shelf file `{use.target}`", hint)


def shelf_files() -> dict[str, Traversable]:
    """The files of the shelf by their names."""
    paths = resources.files("eoscore.language.shelf").iterdir()
    return {path.name.removesuffix(".tarn"): path for path in paths if path.name.endswith(".tarn")}


@cache
def _shelf_file(name: str) -> nodes.File:
    return parse(shelf_files()[name].read_bytes(), f"shelf/{name}.tarn")


def _declarations(file: nodes.File) -> Iterator[nodes.Entry]:
    """What a used file declares: its questions are its own."""
    return (entry for entry in file.entries if not isinstance(entry, nodes.Find | nodes.Derive))
