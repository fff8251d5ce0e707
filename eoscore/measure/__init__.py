"""How much space lies below an energy: measures, and the routes from a field to its measure."""

from eoscore.measure.base import Foot, Measure, Nodes
from eoscore.measure.convolve import convolve
from eoscore.measure.powers import Powers
from eoscore.measure.route import measure_of
from eoscore.measure.sampled import Sampled

__all__ = ["Foot", "Measure", "Nodes", "Powers", "Sampled", "convolve", "measure_of"]
