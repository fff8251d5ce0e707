"""The gas room: one particle, its statistics, its dispersion, and the plugins that give dispersions."""

from eoscore.gas.bose_function import bose
from eoscore.gas.dispersion import Branch, Dispersion, Parameter
from eoscore.gas.fermi_function import fermi
from eoscore.gas.gas import Gas, gas_of

__all__ = ["Branch", "Dispersion", "Gas", "Parameter", "bose", "fermi", "gas_of"]
