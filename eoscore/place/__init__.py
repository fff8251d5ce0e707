"""Places that hold a gas: traps, boxes, the uniform place, densities of states."""

from eoscore.place.base import Place
from eoscore.place.choice import place_of
from eoscore.place.flat import UniformPlace, VolumePlace
from eoscore.place.states import StatesPlace
from eoscore.place.trap import TrapPlace

__all__ = ["Place", "StatesPlace", "TrapPlace", "UniformPlace", "VolumePlace", "place_of"]
