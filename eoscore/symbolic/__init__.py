"""`derive`: formulas in the file's own symbols, by SymPy, sharing no code with the numbers' way."""

from eoscore.symbolic.derive import TIME_LIMIT, derive

__all__ = ["TIME_LIMIT", "derive"]
