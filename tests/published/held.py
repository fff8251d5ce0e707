"""Gases in places from a line of Tarn each, for the published numbers."""

from __future__ import annotations

import eoscore

RUBIDIUM = "isotope Rb-87"


def held(place, gas=RUBIDIUM):
    """The gas of a block held in a place: `V(...) = ...` or `volume = ...`; None for a gas that needs none."""
    if place is None:
        lab = eoscore.loads(f"gas probe {{ {gas} }}")
        return lab["probe"].held_in(None)
    lab = eoscore.loads(f"gas probe {{\n{gas}\n}}\ntrap place {{\n{place}\n}}")
    return lab["probe"].held_in(lab["place"])


def power_trap(p, gas=RUBIDIUM):
    """V ~ r^p; `inf` is a box."""
    if p == float("inf"):
        return held("volume = 1e-13 m3", gas)
    return held(f"V(r) = 1e-30 J * (r/(1 um))^{p}", gas)
