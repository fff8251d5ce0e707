"""Boltzmann integrals in closed form: one rule a file, tried in order of cost."""

from eoscore.symbolic.integrals.boltzmann import Boltzmann, StopError, boltzmann

__all__ = ["Boltzmann", "StopError", "boltzmann"]
