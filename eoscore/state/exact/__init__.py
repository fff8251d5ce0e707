"""True single-particle levels of a place, and exact sums over them (`levels exact`)."""

from eoscore.state.exact.ensemble import ExactLevels
from eoscore.state.exact.spectrum import exact_levels

__all__ = ["ExactLevels", "exact_levels"]
