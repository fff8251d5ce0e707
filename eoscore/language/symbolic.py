"""Symbolic side"""

Symbolic = object
