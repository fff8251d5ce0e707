"""The gas room: one particle, its statistics, its dispersion, and the plugins that give dispersions."""

from eoscore.gas.bose_function import bose
from eoscore.gas.dispersion import Branch, Dispersion, Parameter
from eoscore.gas.fermi_function import fermi
from eoscore.gas.gas import Gas, gas_of
from eoscore.gas.inverse import alpha_from_bose, eta_from_fermi
from eoscore.gas.truncated import (
    bose_log_truncated,
    bose_truncated,
    classical_truncated,
    fermi_log_truncated,
    fermi_truncated,
)

__all__ = [
    "Branch",
    "Dispersion",
    "Gas",
    "Parameter",
    "alpha_from_bose",
    "bose",
    "bose_log_truncated",
    "bose_truncated",
    "classical_truncated",
    "eta_from_fermi",
    "fermi",
    "fermi_log_truncated",
    "fermi_truncated",
    "gas_of",
]
