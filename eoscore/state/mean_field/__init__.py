"""Hartree-Fock in local density: a Bose gas with s-wave collisions, its condensate in the Thomas-Fermi limit."""

from eoscore.state.mean_field.state import MeanFieldState

__all__ = ["MeanFieldState"]
