"""Dispersions by somebody else."""
