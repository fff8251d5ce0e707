"""How a text is read, so that another process can read it again."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from pathlib import Path

    from eoscore.language.program import Program

__all__ = ["Recipe"]


@dataclass(frozen=True)
class Recipe:
    """A Tarn text, its name in complaints, the folder in which `use "path"` looks, and the settings.

    `samples`: draws of the uncertain literals for sampled intervals.
    """

    text: bytes
    name: str
    folder: Path | None
    settings: tuple[str, ...]
    samples: int = 0

    def program(self) -> Program:
        """The text read and checked, with the dispersions that are installed.

        Raises
        ------
        TarnError
            Where the text or a setting is at fault.
        """
        from eoscore.gas.registry import Signatures
        from eoscore.language import read

        return read(
            self.text, self.name, folder=self.folder, settings=self.settings, dispersions=Signatures()
        )
