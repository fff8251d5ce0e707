"""The report: one self-contained page of a file, its answers, its traps and its curves. Wants the extra `plot`."""

from __future__ import annotations
