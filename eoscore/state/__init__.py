"""The state room: the equation of state of a gas held in a place."""

from eoscore.state.held import HeldGas
from eoscore.state.hold import hold
from eoscore.state.reading import Reading, Reason, reading_of
from eoscore.state.state import State

__all__ = ["HeldGas", "Reading", "Reason", "State", "hold", "reading_of"]
