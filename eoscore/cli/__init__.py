"""The command `eoscore`: one file per verb, and the exit status that each outcome gets."""

from __future__ import annotations

from eoscore.cli.command import command, main

__all__ = ["command", "main"]
